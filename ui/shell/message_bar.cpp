#include "ui/shell/message_bar.hpp"
#include <QHBoxLayout>
#include <QLabel>
#include <QPushButton>
#include <QStyle>

namespace sinewright::ui {

MessageBar::MessageBar(QWidget* parent)
    : QFrame(parent), text_(new QLabel(this)), row_(new QHBoxLayout(this)), close_(new QPushButton(tr("Close"), this)) {
    setObjectName("message_bar");
    text_->setWordWrap(true);
    text_->setTextInteractionFlags(Qt::TextSelectableByMouse);
    text_->setObjectName("message");
    close_->setObjectName("close_message");
    close_->setAccessibleName(tr("Close the message"));
    row_->setContentsMargins(20, 8, 20, 8);
    row_->setSpacing(8);
    row_->addWidget(text_, 1);
    row_->addWidget(close_);
    connect(close_, &QPushButton::clicked, this, &MessageBar::put_away);
    hide();
}

QString MessageBar::text() const { return text_->text(); }

void MessageBar::put_away() {
    for (QPushButton* button : buttons_) button->deleteLater();
    buttons_.clear();
    text_->clear();
    hide();
}

void MessageBar::show_text(const char* role, const QString& text) {
    put_away();
    setProperty("role", role);
    style()->unpolish(this);
    style()->polish(this);
    text_->setText(text);
    setAccessibleName(text);
    close_->show();
    show();
}

void MessageBar::say_fault(const QString& text) { show_text("bar-fault", text); }
void MessageBar::say_note(const QString& text) { show_text("bar-note", text); }

void MessageBar::ask(const QString& text, std::vector<Answer> answers) {
    show_text("bar-note", text);
    close_->hide();
    for (Answer& answer : answers) {
        auto* button = new QPushButton(answer.text, this);
        button->setObjectName(answer.name);
        button->setAccessibleName(answer.text);
        if (answer.primary) button->setProperty("role", "primary");
        row_->addWidget(button);
        buttons_.push_back(button);
        connect(button, &QPushButton::clicked, this, [this, act = std::move(answer.act)] {
            put_away();
            if (act) act();
        });
        if (answer.primary) button->setFocus();
    }
}

} // namespace sinewright::ui
