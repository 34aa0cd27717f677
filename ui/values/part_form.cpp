#include "ui/values/part_form.hpp"
#include "core/quantity/quantity.hpp"
#include "ui/document/document.hpp"
#include "ui/sheet/editing.hpp"
#include "ui/values/changes.hpp"
#include "ui/values/choice_box.hpp"
#include "ui/values/quantity_field.hpp"

#include <QHBoxLayout>
#include <QLabel>
#include <QPushButton>
#include <QToolButton>
#include <QVBoxLayout>
#include <algorithm>
#include <cmath>

namespace sinewright::ui {
namespace {

constexpr int label_width = 108, unit_width = 28, dial_width = 40;

QString text(std::string_view view) { return QString::fromUtf8(view.data(), qsizetype(view.size())); }

QString range_words(Range range) {
    switch (range) {
    case Range::positive:
        return PartForm::tr("above zero");
    case Range::not_negative:
        return PartForm::tr("zero or more");
    case Range::negative:
        return PartForm::tr("below zero");
    case Range::from_0_to_1:
        return PartForm::tr("0 … 1");
    case Range::any:
        break;
    }
    return {};
}

QString help_text(const ParameterInfo& info) {
    QStringList lines{text(info.help)};
    if (const QString range = range_words(info.range); !range.isEmpty()) lines << PartForm::tr("Range: %1").arg(range);
    return lines.join("\n");
}

} // namespace

PartForm::PartForm(Document& document, const QString& ref, QWidget* parent)
    : QWidget(parent),
      document_(document),
      ref_(ref),
      column_(new QVBoxLayout(this)),
      name_(new QLineEdit(this)),
      name_fault_(new QLabel(this)) {
    const Part* shown = part();
    kind_ = shown ? find_part_kind(shown->kind) : nullptr;
    setObjectName("part_form");
    setAccessibleName(tr("Values of %1").arg(ref));
    column_->setContentsMargins(16, 2, 14, 12);
    column_->setSpacing(4);
    add_head();
    if (kind_) {
        for (std::size_t i = 0; i < kind_->parameters.size(); ++i) {
            const ParameterInfo& info = kind_->parameters[i];
            const bool main = int(i) == kind_->main;
            add_parameter(info, !main && !info.required && info.choices.empty());
        }
        if (kind_->main >= 0) {
            const QString of = words_of(kind_->parameters[static_cast<std::size_t>(kind_->main)].name);
            add_part_value("tolerance", tr("tolerance"), "",
                           tr("How far the %1 of a bought part may be off: 1%").arg(of));
            if (kind_->tempco_applies)
                add_part_value("tempco", tr("tempco"), "1/K", tr("Change of the %1 per kelvin: 50ppm").arg(of));
        }
    }
    more_ = new QToolButton(this);
    more_->setObjectName("more_parameters");
    more_->setProperty("role", "link");
    more_->setCheckable(true);
    connect(more_, &QToolButton::toggled, this, &PartForm::show_rare);
    column_->addWidget(more_, 0, Qt::AlignLeft);
    column_->addStretch(1);
    show_part();
    show_rare(false);
}

const Part* PartForm::part() const { return document_.design().find(ref_.toStdString()); }

void PartForm::add_head() {
    auto* row = new QHBoxLayout;
    name_->setText(ref_);
    name_->setObjectName("reference");
    name_->setAccessibleName(tr("Reference of the part"));
    name_->setToolTip(tr("The part's name in the drawing; type another to rename it"));
    name_->setMaximumWidth(90);
    auto* remove = new QPushButton(tr("Delete"), this);
    remove->setObjectName("delete_part");
    remove->setProperty("role", "link");
    remove->setAccessibleName(tr("Delete %1").arg(ref_));
    row->addWidget(name_);
    row->addStretch(1);
    row->addWidget(remove);
    column_->addLayout(row);
    name_fault_->setProperty("role", "fault");
    name_fault_->setWordWrap(true);
    name_fault_->hide();
    column_->addWidget(name_fault_);
    connect(name_, &QLineEdit::editingFinished, this, &PartForm::rename);
    connect(remove, &QPushButton::clicked, this, [this] {
        document_.edit(tr("Delete %1").arg(ref_),
                       [this](Design& design) { remove_parts(design, {ref_.toStdString()}); });
    });
}

PartForm::Row& PartForm::add_row(const std::string& name, const QString& title, const QString& help) {
    auto* whole = new QWidget(this);
    auto* column = new QVBoxLayout(whole);
    column->setContentsMargins(0, 0, 0, 0);
    column->setSpacing(2);
    auto* row = new QHBoxLayout;
    row->setSpacing(6);
    auto* label = new QLabel(title, whole);
    label->setProperty("role", "soft");
    label->setToolTip(help);
    label->setFixedWidth(label_width);
    label->setWordWrap(true);
    row->addWidget(label);
    column->addLayout(row);
    column_->addWidget(whole);
    rows_.push_back({name, nullptr, nullptr, nullptr, whole, false});
    whole->setObjectName("row_" + QString::fromStdString(name));
    return rows_.back();
}

void PartForm::add_field(Row& row, const QString& unit, const QString& placeholder) {
    auto* column = static_cast<QVBoxLayout*>(row.whole->layout());
    auto* line = static_cast<QHBoxLayout*>(column->itemAt(0)->layout());
    auto* label = static_cast<QLabel*>(line->itemAt(0)->widget());
    auto* field = row.field = new QuantityField(unit, row.whole);
    field->setObjectName(QString::fromStdString(row.name));
    field->setAccessibleName(tr("%1 of %2").arg(label->text(), ref_));
    field->setToolTip(label->toolTip());
    field->setPlaceholderText(placeholder);
    label->setBuddy(field);
    auto* unit_label = new QLabel(unit, row.whole);
    unit_label->setProperty("role", "soft");
    unit_label->setFixedWidth(unit_width);
    field->setMinimumWidth(60);
    line->addWidget(field, 1);
    line->addWidget(unit_label);
    auto* fault = new QLabel(row.whole);
    fault->setProperty("role", "fault");
    fault->setWordWrap(true);
    fault->hide();
    column->addWidget(fault);
    const std::string name = row.name;
    connect(field, &QuantityField::accepted, this, [=, this](const Value& v) { set_value(name, &v, false, field); });
    connect(field, &QuantityField::stepped, this, [=, this](const Value& v) { set_value(name, &v, true, field); });
    connect(field, &QuantityField::emptied, this, [=, this] { set_value(name, nullptr, false, field); });
    connect(field, &QuantityField::steps_ended, &document_, &Document::end_merge);
    connect(field, &QuantityField::fault_changed, fault, [fault](const QString& sentence) {
        fault->setText(sentence);
        fault->setVisible(!sentence.isEmpty());
    });
}

void PartForm::add_parameter(const ParameterInfo& info, bool rare) {
    Row& row = add_row(std::string(info.name), words_of(info.name), help_text(info));
    row.rare = rare;
    auto* line = static_cast<QHBoxLayout*>(row.whole->layout()->itemAt(0)->layout());
    if (!info.choices.empty()) {
        row.words = new ChoiceBox(row.whole);
        row.words->setObjectName(QString::fromStdString(row.name));
        row.words->setAccessibleName(tr("%1 of %2").arg(words_of(info.name), ref_));
        row.words->setToolTip(help_text(info));
        for (std::string_view choice : info.choices) row.words->addItem(text(choice));
        line->addWidget(row.words, 1);
        connect(row.words, &QComboBox::textActivated, this,
                [this, name = row.name](const QString& word) { set_word(name, word); });
        return;
    }
    const QString fallback = std::isnan(info.fallback) ? (info.required ? tr("needed") : tr("none"))
                                                       : QString::fromStdString(letter_code(info.fallback, info.unit));
    add_field(row, text(info.unit), fallback);
    row.dial = new QToolButton(row.whole);
    row.dial->setObjectName("dial_for_" + QString::fromStdString(row.name));
    row.dial->setProperty("role", "small");
    row.dial->setText(tr("dial"));
    row.dial->setCheckable(true);
    row.dial->setAccessibleName(tr("Dial for %1 of %2").arg(words_of(info.name), ref_));
    row.dial->setToolTip(tr("A slider on the sheet for this value"));
    row.dial->setFixedWidth(dial_width);
    line->addWidget(row.dial);
    connect(row.dial, &QToolButton::clicked, this, [this, name = row.name] { toggle_dial(name); });
}

void PartForm::add_part_value(const char* name, const QString& title, const QString& unit, const QString& help) {
    Row& row = add_row(name, title, help);
    add_field(row, unit, "0");
    static_cast<QHBoxLayout*>(row.whole->layout()->itemAt(0)->layout())->addSpacing(dial_width + 6);
}

void PartForm::show_part() {
    const Part* shown = part();
    if (!shown || !kind_) return;
    if (!name_->hasFocus()) name_->setText(ref_);
    const Series series = series_for_tolerance(shown->tolerance ? shown->tolerance->si : 0);
    for (Row& row : rows_) {
        const ParameterValue* given = shown->find(row.name);
        if (row.words) {
            const auto* word = given ? std::get_if<std::string>(given) : nullptr;
            row.words->setCurrentIndex(word ? std::max(0, row.words->findText(QString::fromStdString(*word))) : 0);
            continue;
        }
        std::optional<Value> value;
        if (row.name == "tolerance")
            value = shown->tolerance;
        else if (row.name == "tempco")
            value = shown->tempco;
        else if (const auto* number = given ? std::get_if<Value>(given) : nullptr)
            value = *number;
        row.field->set_series(series);
        row.field->show_value(value);
        if (!row.dial) continue;
        const std::string target = ref_.toStdString() + "." + row.name;
        const auto& dials = document_.design().dials;
        row.dial->setEnabled(value.has_value());
        row.dial->setChecked(std::any_of(dials.begin(), dials.end(), [&](const Dial& dial) {
            return std::find(dial.sets.begin(), dial.sets.end(), target) != dial.sets.end();
        }));
    }
}

void PartForm::show_rare(bool all) {
    int hidden = 0;
    const Part* shown = part();
    for (Row& row : rows_) {
        const bool visible = all || !row.rare || (shown && shown->find(row.name));
        row.whole->setVisible(visible);
        hidden += visible ? 0 : 1;
    }
    more_->setText(all ? tr("Fewer") : tr("%1 more").arg(hidden));
    more_->setAccessibleName(all ? tr("Show fewer values") : tr("Show %1 more values").arg(hidden));
    more_->setVisible(all || hidden > 0);
}

void PartForm::set_value(const std::string& name, const Value* value, bool go_on, QuantityField* field) {
    const auto change = [&](Design& design) {
        Part* changed = design.find(ref_.toStdString());
        if (!changed) return;
        const std::optional<Value> wanted = value ? std::optional<Value>(*value) : std::nullopt;
        if (name == "tolerance")
            changed->tolerance = wanted;
        else if (name == "tempco")
            changed->tempco = wanted;
        else
            set_parameter(*changed, name, wanted ? std::optional<ParameterValue>(*wanted) : std::nullopt);
    };
    const QString fault = fault_of(document_.design(), change);
    field->show_fault(fault);
    if (!fault.isEmpty()) return;
    const QString step = tr("%1 of %2").arg(words_of(name), ref_);
    document_.edit(step.left(1).toUpper() + step.mid(1), change,
                   go_on ? "step " + ref_ + "." + QString::fromStdString(name) : QString());
}

void PartForm::set_word(const std::string& name, const QString& word) {
    const QString step = tr("%1 of %2").arg(words_of(name), ref_);
    document_.edit(step.left(1).toUpper() + step.mid(1), [&](Design& design) {
        if (Part* changed = design.find(ref_.toStdString())) set_parameter(*changed, name, word.toStdString());
    });
}

void PartForm::toggle_dial(const std::string& name) {
    const ParameterRef target{ref_.toStdString(), name};
    const auto sets_it = [&](const Dial& dial) {
        return std::find(dial.sets.begin(), dial.sets.end(), target.text()) != dial.sets.end();
    };
    const auto& dials = document_.design().dials;
    const bool present = std::any_of(dials.begin(), dials.end(), sets_it);
    document_.edit(present ? tr("Remove dial of %1").arg(ref_) : tr("Add dial for %1").arg(ref_), [&](Design& design) {
        if (!present) {
            design.dials.push_back(dial_for(design, target));
            return;
        }
        for (Dial& dial : design.dials) std::erase(dial.sets, target.text());
        std::erase_if(design.dials, [](const Dial& dial) { return dial.sets.empty(); });
    });
    show_part();
}

void PartForm::rename() {
    const QString wanted = name_->text().trimmed();
    if (wanted == ref_) return;
    Design tried = document_.design();
    const QString fault = rename_part(tried, ref_.toStdString(), wanted.toStdString());
    name_fault_->setText(fault);
    name_fault_->setVisible(!fault.isEmpty());
    if (!fault.isEmpty()) return;
    const QString old = ref_;
    ref_ = wanted;
    document_.edit(tr("Rename %1 to %2").arg(old, wanted), [&](Design& design) { design = std::move(tried); });
    emit renamed(wanted);
}

} // namespace sinewright::ui
