#include "ui/sheet/inline_field.hpp"
#include "ui/theme/theme.hpp"
#include <QKeyEvent>
#include <QToolTip>
#include <QVBoxLayout>
#include <algorithm>

namespace sinewright::ui {

namespace {
constexpr int narrowest_px = 110, widest_px = 260, line_height_px = 26;
}

InlineField::InlineField(QWidget* parent) : QFrame(parent), edit_(new QLineEdit(this)), list_(new QListWidget(this)) {
    setObjectName(QStringLiteral("inline_field"));
    edit_->setObjectName(QStringLiteral("inline_edit"));
    list_->setObjectName(QStringLiteral("inline_offers"));
    setAutoFillBackground(true);
    setFrameShape(QFrame::StyledPanel);
    auto* column = new QVBoxLayout(this);
    column->setContentsMargins(4, 4, 4, 4);
    column->setSpacing(2);
    column->addWidget(edit_);
    column->addWidget(list_);
    list_->setFocusPolicy(Qt::NoFocus);
    list_->setFrameShape(QFrame::NoFrame);
    list_->viewport()->setAutoFillBackground(false);
    list_->setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
    list_->setVerticalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
    list_->setAccessibleName(tr("What it can mean"));
    edit_->installEventFilter(this);
    connect(edit_, &QLineEdit::textChanged, this, &InlineField::refresh_offers);
    connect(list_, &QListWidget::itemClicked, this, &InlineField::take);
    hide();
}

void InlineField::open(const QPoint& at, Job job) {
    if (isVisible()) drop();
    job_ = std::move(job);
    at_ = at;
    edit_->setAccessibleName(job_.label);
    edit_->setFont(theme().font(Theme::body_px));
    list_->setFont(theme().font(Theme::body_px));
    edit_->setText(job_.text);
    if (job_.select_all) edit_->selectAll();
    refresh_offers();
    show();
    raise();
    edit_->setFocus(Qt::OtherFocusReason);
}

void InlineField::refresh_offers() {
    list_->clear();
    if (job_.offers) list_->addItems(job_.offers(edit_->text()));
    list_->setVisible(list_->count() > 0);
    if (list_->count() > 0) list_->setCurrentRow(0);
    fit();
}

void InlineField::fit() {
    int width = std::max(narrowest_px, edit_->fontMetrics().horizontalAdvance(edit_->text()) + 40);
    for (int i = 0; i < list_->count(); ++i)
        width = std::max(width, list_->fontMetrics().horizontalAdvance(list_->item(i)->text()) + 44);
    width = std::min(width, widest_px);
    list_->setFixedHeight(list_->count() * line_height_px + 4);
    for (int i = 0; i < list_->count(); ++i) list_->item(i)->setSizeHint(QSize(width - 12, line_height_px));
    const int height = edit_->sizeHint().height() + 10 + (list_->count() > 0 ? list_->height() + 2 : 0);
    const QRect room = parentWidget()->rect();
    const QPoint corner(std::clamp(at_.x(), 2, std::max(2, room.width() - width - 2)),
                        std::clamp(at_.y(), 2, std::max(2, room.height() - height - 2)));
    setGeometry(QRect(corner, QSize(width, height)));
}

void InlineField::take() {
    if (!job_.take) return;
    const auto taking = job_.take;
    const QString refusal = taking(edit_->text(), list_->count() > 0 ? list_->currentRow() : -1);
    if (!refusal.isEmpty()) {
        QToolTip::showText(mapToGlobal(QPoint(0, height())), refusal, this);
        edit_->setAccessibleDescription(refusal);
        return;
    }
    drop();
}

void InlineField::drop() {
    if (closing_ || !isVisible()) return;
    closing_ = true;
    job_ = {};
    const bool had_focus = edit_->hasFocus();
    hide();
    if (had_focus) parentWidget()->setFocus(Qt::OtherFocusReason);
    closing_ = false;
    emit closed();
}

bool InlineField::eventFilter(QObject* watched, QEvent* event) {
    if (watched != edit_) return QFrame::eventFilter(watched, event);
    if (event->type() == QEvent::FocusOut && !closing_ && isVisible()) {
        const auto reason = static_cast<QFocusEvent*>(event)->reason();
        if (reason == Qt::PopupFocusReason || reason == Qt::ActiveWindowFocusReason) return false;
        if (job_.take_on_leaving && edit_->isModified()) take();
        if (isVisible()) drop();
        return false;
    }
    if (event->type() != QEvent::KeyPress) return false;
    switch (static_cast<QKeyEvent*>(event)->key()) {
    case Qt::Key_Escape:
        drop();
        return true;
    case Qt::Key_Return:
    case Qt::Key_Enter:
        take();
        return true;
    case Qt::Key_Down:
    case Qt::Key_Up: {
        if (list_->count() == 0) return false;
        const int step = static_cast<QKeyEvent*>(event)->key() == Qt::Key_Down ? 1 : -1;
        list_->setCurrentRow((list_->currentRow() + step + list_->count()) % list_->count());
        return true;
    }
    default:
        return false;
    }
}

} // namespace sinewright::ui
