#include "ui/shell/empty_sheet.hpp"
#include "ui/shell/samples.hpp"
#include "ui/theme/theme.hpp"
#include <QLabel>
#include <QMenu>
#include <QPushButton>
#include <QVBoxLayout>

namespace sinewright::ui {

EmptySheet::EmptySheet(QWidget* parent) : QWidget(parent) {
    setObjectName("empty_sheet");
    setAccessibleName(tr("How to begin"));
    auto* column = new QVBoxLayout(this);
    column->setSpacing(10);
    auto* first = new QLabel(tr("A sine source is a loop."), this);
    first->setFont(theme().font(Theme::gauge_px, QFont::DemiBold));
    auto* second = new QLabel(tr("Drop an amplifier, lead its output through a network back to its input."), this);
    auto* third = new QLabel(tr("From the first closed loop on, the strip below says whether it starts."), this);
    for (QLabel* label : {second, third}) label->setProperty("role", "soft");
    for (QLabel* label : {first, second, third}) {
        label->setAlignment(Qt::AlignHCenter);
        label->setWordWrap(true);
        column->addWidget(label);
    }
    column->addSpacing(10);
    auto* row = new QHBoxLayout;
    row->setSpacing(8);
    row->addStretch(1);
    auto* starter = add_button(tr("Drop an amplifier and a network"), "begin_starter");
    starter->setProperty("role", "primary");
    row->addWidget(starter);
    connect(starter, &QPushButton::clicked, this, &EmptySheet::starter_wanted);
    auto* sample = add_button(tr("Open a sample"), "begin_sample");
    auto* menu = new QMenu(sample);
    for (const Sample& found : find_samples())
        menu->addAction(found.title, this, [this, path = found.path] { emit sample_wanted(path); });
    sample->setMenu(menu);
    sample->setEnabled(!menu->isEmpty());
    row->addWidget(sample);
    auto* type = add_button(tr("Type 10k"), "begin_typing");
    row->addWidget(type);
    connect(type, &QPushButton::clicked, this, [this] { emit typing_wanted("10k"); });
    row->addStretch(1);
    column->addLayout(row);
}

QPushButton* EmptySheet::add_button(const QString& text, const QString& name) {
    auto* button = new QPushButton(text, this);
    button->setObjectName(name);
    button->setAccessibleName(text);
    return button;
}

} // namespace sinewright::ui
