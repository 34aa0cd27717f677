#include "ui/values/floating_card.hpp"
#include "ui/theme/theme.hpp"
#include <QEvent>
#include <QLabel>
#include <QMouseEvent>
#include <QToolButton>
#include <QVBoxLayout>

namespace sinewright::ui {
namespace {
constexpr int edge_px = 20;
}

FloatingCard::FloatingCard(const QString& name, Qt::Corner corner, QWidget* parent)
    : QFrame(parent),
      corner_(corner),
      head_(new QWidget(this)),
      title_(new QLabel(head_)),
      fold_(new QToolButton(head_)),
      column_(new QVBoxLayout(this)) {
    setObjectName(name);
    setProperty("role", "card");
    head_->setCursor(Qt::OpenHandCursor);
    head_->installEventFilter(this);
    title_->setAttribute(Qt::WA_TransparentForMouseEvents);
    title_->setProperty("role", "card-title");
    fold_->setObjectName(name + "_fold");
    fold_->setProperty("role", "fold");
    auto* row = new QHBoxLayout(head_);
    row->setContentsMargins(16, 8, 8, 4);
    row->addWidget(title_, 1);
    row->addWidget(fold_);
    column_->setContentsMargins(1, 1, 1, 1);
    column_->setSpacing(0);
    column_->addWidget(head_);
    connect(fold_, &QToolButton::clicked, this, [this] {
        set_folded(!folded_);
        emit folded_by_hand(folded_);
    });
    parent->installEventFilter(this);
    set_folded(false);
}

void FloatingCard::set_title(const QString& title) {
    title_->setText(title);
    setAccessibleName(title);
    set_folded(folded_);
}

QString FloatingCard::title() const { return title_->text(); }

void FloatingCard::set_content(QWidget* content) {
    delete content_;
    content_ = content;
    QList<QWidget*> walk; // Tab goes from the head through the content in its own order
    for (QWidget* next = content->nextInFocusChain(); next != content; next = next->nextInFocusChain()) walk << next;
    column_->addWidget(content_);
    QWidget* last = fold_;
    for (QWidget* next : walk) {
        if (!(next->focusPolicy() & Qt::TabFocus)) continue;
        setTabOrder(last, next);
        last = next;
    }
    content_->setVisible(!folded_);
    settle();
}

void FloatingCard::move_to(Qt::Corner corner) {
    if (!offset_.isNull() || corner == corner_) return;
    corner_ = corner;
    settle();
}

void FloatingCard::set_folded(bool folded) {
    folded_ = folded;
    fold_->setText(folded ? QString(QChar(0x25B8)) : QString(QChar(0x25BE)));
    fold_->setAccessibleName((folded ? tr("Unfold %1") : tr("Fold %1")).arg(title_->text()));
    fold_->setToolTip(folded ? tr("Unfold") : tr("Fold"));
    if (content_) content_->setVisible(!folded);
    settle();
}

QRect FloatingCard::allowed() const { return parentWidget()->rect().adjusted(edge_px, edge_px, -edge_px, -edge_px); }

QPoint FloatingCard::corner_point(const QRect& of) const {
    const bool right = corner_ == Qt::TopRightCorner || corner_ == Qt::BottomRightCorner;
    const bool bottom = corner_ == Qt::BottomLeftCorner || corner_ == Qt::BottomRightCorner;
    return {right ? of.right() : of.left(), bottom ? of.bottom() : of.top()};
}

void FloatingCard::settle() {
    if (settling_) return;
    settling_ = true;
    column_->activate();
    const QRect room = allowed();
    resize(sizeHint().boundedTo(room.size()).expandedTo({80, 0}));
    QRect place = rect();
    place.translate(corner_point(room) + offset_ - corner_point(place));
    // Held inside whatever was dragged or resized.
    place.moveLeft(std::max(room.left(), std::min(place.left(), room.right() - place.width() + 1)));
    place.moveTop(std::max(room.top(), std::min(place.top(), room.bottom() - place.height() + 1)));
    setGeometry(place);
    settling_ = false;
}

bool FloatingCard::event(QEvent* event) {
    if (event->type() == QEvent::LayoutRequest) settle();
    return QFrame::event(event);
}

bool FloatingCard::eventFilter(QObject* watched, QEvent* event) {
    if (watched == parentWidget() && event->type() == QEvent::Resize) settle();
    if (watched == head_ && drag_head(event)) return true;
    return QFrame::eventFilter(watched, event);
}

bool FloatingCard::drag_head(QEvent* event) {
    if (event->type() == QEvent::MouseButtonDblClick) {
        fold_->click();
        return true;
    }
    if (event->type() == QEvent::MouseButtonPress) {
        grip_ = static_cast<QMouseEvent*>(event)->globalPosition().toPoint() - offset_;
        dragging_ = true;
        return true;
    }
    if (event->type() == QEvent::MouseMove && dragging_) {
        offset_ = static_cast<QMouseEvent*>(event)->globalPosition().toPoint() - grip_;
        settle();
        return true;
    }
    if (event->type() == QEvent::MouseButtonRelease) {
        dragging_ = false;
        offset_ = corner_point(geometry()) - corner_point(allowed()); // no slack beyond the edge is remembered
        return true;
    }
    return false;
}

} // namespace sinewright::ui
