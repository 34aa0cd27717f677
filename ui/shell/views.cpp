#include "ui/shell/views.hpp"
#include "ui/theme/theme.hpp"
#include <QLabel>
#include <QPainter>
#include <QStackedWidget>
#include <QTabBar>
#include <QVBoxLayout>

namespace sinewright::ui {

Views::Views(QWidget* parent)
    : QWidget(parent), tabs_(new QTabBar(this)), question_(new QLabel(this)), stack_(new QStackedWidget(this)) {
    setObjectName("views");
    setAccessibleName(tr("Views"));
    setMinimumWidth(320);
    tabs_->setObjectName("view_tabs");
    tabs_->setAccessibleName(tr("Which question"));
    tabs_->setDrawBase(false);
    tabs_->setExpanding(false);
    tabs_->setUsesScrollButtons(true);
    question_->setObjectName("question");
    auto* column = new QVBoxLayout(this);
    column->setContentsMargins(14, 11, 14, 8);
    column->setSpacing(0);
    column->addWidget(tabs_);
    column->addSpacing(10);
    auto* indent = new QHBoxLayout;
    indent->setContentsMargins(10, 0, 0, 0);
    indent->addWidget(question_);
    column->addLayout(indent);
    column->addSpacing(6);
    column->addWidget(stack_, 1);
    connect(tabs_, &QTabBar::currentChanged, this, [this](int index) {
        stack_->setCurrentIndex(index);
        show_question();
    });
    connect(&ThemeKeeper::instance(), &ThemeKeeper::changed, this, [this] {
        show_question();
        update();
    });
}

void Views::add(const QString& name, const QString& question, QWidget* view) {
    questions_ << question;
    view->setAccessibleName(name + ": " + question);
    stack_->addWidget(view);
    tabs_->addTab(name);
    show_question();
}

bool Views::show_view(const QString& name) {
    for (int i = 0; i < tabs_->count(); ++i) {
        if (tabs_->tabText(i) != name) continue;
        tabs_->setCurrentIndex(i);
        return true;
    }
    return false;
}

QString Views::shown() const { return tabs_->tabText(tabs_->currentIndex()); }

void Views::show_question() {
    question_->setFont(theme().font(Theme::question_px, QFont::DemiBold));
    question_->setText(questions_.value(tabs_->currentIndex()));
}

void Views::paintEvent(QPaintEvent*) { QPainter(this).fillRect(rect(), theme().panel); }

} // namespace sinewright::ui
