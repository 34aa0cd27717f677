#include "ui/values/design_form.hpp"
#include "ui/document/document.hpp"
#include "ui/values/changes.hpp"
#include "ui/values/choice_box.hpp"
#include "ui/values/quantity_field.hpp"
#include "ui/values/target_rows.hpp"

#include <QEvent>
#include <QLabel>
#include <QPlainTextEdit>
#include <QVBoxLayout>

namespace sinewright::ui {
namespace {

QLabel* soft_label(const QString& text, QWidget* buddy) {
    auto* label = new QLabel(text, buddy->parentWidget());
    label->setProperty("role", "soft");
    label->setBuddy(buddy);
    return label;
}

} // namespace

DesignForm::DesignForm(Document& document, QWidget* parent)
    : QWidget(parent),
      document_(document),
      output_(new ChoiceBox(this)),
      temperature_(new QuantityField("", this)),
      temperature_fault_(new QLabel(this)),
      notes_(new QPlainTextEdit(this)),
      targets_(new TargetRows(document, this)) {
    setObjectName("design_form");
    setAccessibleName(tr("The design as a whole"));
    output_->setObjectName("output_net");
    output_->setAccessibleName(tr("Output net"));
    output_->setToolTip(tr("The net whose level and purity count"));
    temperature_->setObjectName("temperature");
    temperature_->setAccessibleName(tr("Temperature in degrees Celsius"));
    temperature_fault_->setProperty("role", "fault");
    temperature_fault_->setWordWrap(true);
    temperature_fault_->hide();
    notes_->setObjectName("notes");
    notes_->setAccessibleName(tr("Notes"));
    notes_->setPlaceholderText(tr("What this source is for, and why it is as it is"));
    notes_->setTabChangesFocus(true);
    notes_->setFixedHeight(76);
    notes_->installEventFilter(this);

    auto* column = new QVBoxLayout(this);
    column->setContentsMargins(16, 2, 12, 12);
    column->setSpacing(4);
    column->addWidget(soft_label(tr("targets"), targets_));
    column->addWidget(targets_);
    column->addSpacing(4);
    column->addWidget(soft_label(tr("output net"), output_));
    column->addWidget(output_);
    column->addWidget(soft_label(tr("temperature, °C"), temperature_));
    column->addWidget(temperature_);
    column->addWidget(temperature_fault_);
    column->addWidget(soft_label(tr("notes"), notes_));
    column->addWidget(notes_);
    column->addStretch(1);

    connect(output_, &QComboBox::textActivated, this, [this](const QString& net) {
        document_.edit(tr("Output at %1").arg(net), [&](Design& design) { design.output = net.toStdString(); });
    });
    connect(temperature_, &QuantityField::accepted, this, [this](const Value& v) { set_temperature(v.si, false); });
    connect(temperature_, &QuantityField::stepped, this, [this](const Value& v) { set_temperature(v.si, true); });
    connect(temperature_, &QuantityField::steps_ended, &document_, &Document::end_merge);
    connect(temperature_, &QuantityField::fault_changed, this, [this](const QString& sentence) {
        temperature_fault_->setText(sentence);
        temperature_fault_->setVisible(!sentence.isEmpty());
    });
    connect(notes_, &QPlainTextEdit::textChanged, this, [this] {
        if (showing_) return;
        document_.edit(
            tr("Notes"), [this](Design& design) { design.notes = notes_->toPlainText().toStdString(); }, "notes");
    });
    take_over();
}

void DesignForm::take_over() {
    showing_ = true;
    const Design& design = document_.design();
    QStringList nets;
    for (const std::string& net : nets_of(design))
        if (net != ground_net) nets << QString::fromStdString(net);
    const QString output = QString::fromStdString(design.output);
    if (!nets.contains(output)) nets.prepend(output);
    output_->clear();
    output_->addItems(nets);
    output_->setCurrentText(output);
    temperature_->show_value(Value{design.temperature_c, QString::number(design.temperature_c).toStdString()});
    const QString notes = QString::fromStdString(design.notes);
    if (notes_->toPlainText() != notes) notes_->setPlainText(notes);
    targets_->take_over();
    showing_ = false;
}

bool DesignForm::eventFilter(QObject* watched, QEvent* event) {
    if (watched == notes_ && event->type() == QEvent::FocusOut) document_.end_merge();
    return QWidget::eventFilter(watched, event);
}

void DesignForm::set_temperature(double celsius, bool go_on) {
    const auto change = [&](Design& design) { design.temperature_c = celsius; };
    const QString fault = fault_of(document_.design(), change);
    temperature_->show_fault(fault);
    if (fault.isEmpty()) document_.edit(tr("Temperature"), change, go_on ? "temperature" : QString());
}

} // namespace sinewright::ui
