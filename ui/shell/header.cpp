#include "ui/shell/header.hpp"
#include "ui/document/document.hpp"
#include "ui/theme/theme.hpp"
#include <QAction>
#include <QFileInfo>
#include <QHBoxLayout>
#include <QLabel>
#include <QLineEdit>
#include <QMenu>
#include <QPainter>
#include <QPainterPath>
#include <QPushButton>

namespace sinewright::ui {
namespace {

constexpr int mark_left = 20, mark_width = 28;
constexpr int title_min = 160, title_max = 560;

} // namespace

Header::Header(Document& document, QAction* undo, QAction* redo, QMenu* menu, QWidget* parent)
    : QWidget(parent), document_(document), title_(new QLineEdit(this)), state_(new QLabel(this)) {
    setObjectName("header");
    setAccessibleName(tr("Header"));
    setFixedHeight(height_px);
    title_->setObjectName("title");
    title_->setProperty("role", "title");
    title_->setPlaceholderText(tr("Untitled loop"));
    title_->setAccessibleName(tr("Title of the design"));
    title_->setToolTip(tr("Title of the design; click to change it"));
    state_->setObjectName("saved_state");
    state_->setProperty("role", "soft");

    auto* row = new QHBoxLayout(this);
    row->setContentsMargins(mark_left + mark_width + 6, 0, 20, 1);
    row->setSpacing(8);
    row->addWidget(title_);
    row->addWidget(state_);
    row->addStretch(1);
    row->addWidget(button_for(undo, tr("Undo"), "undo"));
    row->addWidget(button_for(redo, tr("Redo"), "redo"));
    auto* more = new QPushButton(tr("Menu"), this);
    more->setObjectName("menu");
    more->setAccessibleName(tr("Menu"));
    more->setMenu(menu);
    more->setShortcut(Qt::Key_F10);
    more->setToolTip(tr("Menu  %1").arg(more->shortcut().toString(QKeySequence::NativeText)));
    row->addWidget(more);

    connect(title_, &QLineEdit::textEdited, this, [this](const QString& text) {
        document_.edit(
            tr("Title"), [&](Design& design) { design.title = text.toStdString(); }, "title");
    });
    connect(title_, &QLineEdit::editingFinished, &document_, &Document::end_merge);
    connect(title_, &QLineEdit::returnPressed, title_, [this] { title_->clearFocus(); });
    connect(&document_, &Document::changed, this, &Header::take_over);
    connect(&document_, &Document::file_changed, this, &Header::take_over);
    connect(&ThemeKeeper::instance(), &ThemeKeeper::changed, this, [this] {
        title_->setFont(theme().font(15, QFont::DemiBold));
        fit_title();
        update();
    });
    title_->setFont(theme().font(15, QFont::DemiBold));
    take_over();
}

QPushButton* Header::button_for(QAction* action, const QString& text, const QString& name) {
    auto* button = new QPushButton(text, this);
    button->setObjectName(name);
    const auto follow = [button, action] {
        button->setEnabled(action->isEnabled());
        button->setAccessibleName(action->text());
        button->setToolTip(action->text() + "  " + action->shortcut().toString(QKeySequence::NativeText));
    };
    connect(action, &QAction::changed, button, follow);
    connect(button, &QPushButton::clicked, action, &QAction::trigger);
    follow();
    return button;
}

QString Header::state() const { return state_->text(); }

void Header::take_over() {
    const QString title = QString::fromStdString(document_.design().title);
    if (title_->text() != title) title_->setText(title);
    fit_title();
    QString state = document_.modified() ? tr("edited") : tr("saved");
    if (document_.path().isEmpty()) state = document_.modified() ? tr("not saved yet") : QString();
    state_->setText(state);
    state_->setToolTip(document_.path());
}

void Header::fit_title() {
    const QString shown = title_->text().isEmpty() ? title_->placeholderText() : title_->text();
    const int wanted = QFontMetrics(title_->font()).horizontalAdvance(shown) + 26;
    title_->setFixedWidth(std::clamp(wanted, title_min, title_max));
    title_->setCursorPosition(title_->hasFocus() ? title_->cursorPosition() : 0);
}

void Header::paintEvent(QPaintEvent*) {
    QPainter painter(this);
    const Theme& t = theme();
    painter.fillRect(rect(), t.panel);
    painter.fillRect(0, height() - 1, width(), 1, t.line);
    painter.setRenderHint(QPainter::Antialiasing);
    // One period of a sine, the program's mark.
    QPainterPath mark(QPointF(mark_left, 26));
    mark.quadTo(QPointF(mark_left + 7, 6), QPointF(mark_left + 14, 26));
    mark.quadTo(QPointF(mark_left + 21, 46), QPointF(mark_left + 28, 26));
    painter.setPen(QPen(t.accent, 2.6, Qt::SolidLine, Qt::RoundCap));
    painter.drawPath(mark);
}

} // namespace sinewright::ui
