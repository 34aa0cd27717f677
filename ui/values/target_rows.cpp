#include "ui/values/target_rows.hpp"
#include "ui/document/document.hpp"
#include "ui/values/changes.hpp"
#include "ui/values/quantity_field.hpp"
#include "ui/verdict/gauge_reading.hpp"
#include <QHBoxLayout>
#include <QLabel>
#include <QMenu>
#include <QToolButton>
#include <algorithm>

namespace sinewright::ui {
namespace {

/// Results that can be given a target, with a useful start.
struct Wanted {
    const char* name;
    const char* unit;
    std::optional<double> nominal, within, min, max;
};
const Wanted wanted_results[] = {
    {"startup_margin_db", "dB", {}, {}, 0.3, 3.0},
    {"frequency_hz", "Hz", 1000.0, 0.01, {}, {}},
    {"growth_per_cycle", "", {}, {}, 0.01, {}},
};

const Wanted* find_wanted(const std::string& name) {
    const auto found = std::find_if(std::begin(wanted_results), std::end(wanted_results),
                                    [&](const Wanted& wanted) { return name == wanted.name; });
    return found == std::end(wanted_results) ? nullptr : found;
}

/// dB have no letter code: written as plain numbers.
QString field_unit(const std::string& name) {
    const Wanted* wanted = find_wanted(name);
    return wanted && QString(wanted->unit) != "dB" ? wanted->unit : "";
}

} // namespace

TargetRows::TargetRows(Document& document, QWidget* parent)
    : QWidget(parent), document_(document), column_(new QVBoxLayout(this)), add_(new QToolButton(this)) {
    setObjectName("targets");
    setAccessibleName(tr("Targets"));
    column_->setContentsMargins(0, 0, 0, 0);
    column_->setSpacing(4);
    add_->setText(tr("Add a target"));
    add_->setObjectName("add_target");
    add_->setAccessibleName(tr("Add a target"));
    add_->setPopupMode(QToolButton::InstantPopup);
    add_->setMenu(new QMenu(add_));
    column_->addWidget(add_, 0, Qt::AlignLeft);
    build();
}

void TargetRows::take_over() {
    std::vector<std::pair<std::string, bool>> wanted, shown;
    for (const Target& target : document_.design().targets)
        wanted.emplace_back(target.name, target.nominal.has_value());
    for (const Row& row : rows_) shown.emplace_back(row.name, row.nominal);
    if (wanted != shown) {
        QMetaObject::invokeMethod(this, &TargetRows::build, Qt::QueuedConnection);
        return;
    }
    for (std::size_t i = 0; i < rows_.size(); ++i) {
        const Target& target = document_.design().targets[i];
        rows_[i].first->show_value(rows_[i].nominal ? target.nominal : target.min);
        rows_[i].second->show_value(rows_[i].nominal ? target.within : target.max);
    }
}

void TargetRows::build() {
    delete list_;
    rows_.clear();
    list_ = new QWidget(this);
    auto* column = new QVBoxLayout(list_);
    column->setContentsMargins(0, 0, 0, 0);
    column->setSpacing(6);
    column_->insertWidget(0, list_);
    for (const Target& target : document_.design().targets) add_row(target);
    take_over();
    fill_add_menu();
}

void TargetRows::add_row(const Target& target) {
    auto* whole = new QWidget(list_);
    auto* column = new QVBoxLayout(whole);
    column->setContentsMargins(0, 0, 0, 0);
    column->setSpacing(2);
    auto* line = new QHBoxLayout;
    line->setSpacing(4);
    const QString title = result_title(target.name);
    auto* head = new QLabel(title, whole);
    head->setProperty("role", "soft");
    auto* remove = new QToolButton(whole);
    remove->setText(QChar(0x00D7));
    remove->setProperty("role", "small");
    remove->setAccessibleName(tr("Remove target %1").arg(title));
    auto* fault = new QLabel(whole);
    fault->setProperty("role", "fault");
    fault->setWordWrap(true);
    fault->hide();

    Row row{target.name, target.nominal.has_value(), new QuantityField(field_unit(target.name), whole),
            new QuantityField(target.nominal ? "" : field_unit(target.name), whole)};
    row.first->setPlaceholderText(row.nominal ? tr("nominal") : tr("at least"));
    row.second->setPlaceholderText(row.nominal ? tr("within") : tr("at most"));
    row.first->setAccessibleName((row.nominal ? tr("%1, nominal") : tr("%1, at least")).arg(title));
    row.second->setAccessibleName((row.nominal ? tr("%1, within") : tr("%1, at most")).arg(title));
    line->addWidget(row.first);
    line->addWidget(new QLabel(row.nominal ? QString(QChar(0x00B1)) : QString(QChar(0x2026)), whole));
    line->addWidget(row.second);
    line->addWidget(remove);
    column->addWidget(head);
    column->addLayout(line);
    column->addWidget(fault);
    list_->layout()->addWidget(whole);
    rows_.push_back(row);
    for (const bool second : {false, true}) {
        QuantityField* field = second ? row.second : row.first;
        connect(field, &QuantityField::accepted, this, [=, this](const Value& v) { set_limit(row, second, v); });
        connect(field, &QuantityField::stepped, this, [=, this](const Value& v) { set_limit(row, second, v); });
        connect(field, &QuantityField::emptied, this, [=, this] { set_limit(row, second, {}); });
        connect(field, &QuantityField::fault_changed, fault, [fault](const QString& sentence) {
            fault->setText(sentence);
            fault->setVisible(!sentence.isEmpty());
        });
    }
    connect(remove, &QToolButton::clicked, this, [this, name = target.name, title] {
        document_.edit(tr("Remove target %1").arg(title), [&](Design& design) {
            std::erase_if(design.targets, [&](const Target& t) { return t.name == name; });
        });
    });
}

void TargetRows::set_limit(const Row& row, bool second, const std::optional<Value>& value) {
    const auto change = [&](Design& design) {
        for (Target& target : design.targets) {
            if (target.name != row.name) continue;
            auto& limit = row.nominal ? (second ? target.within : target.nominal) : (second ? target.max : target.min);
            limit = value;
        }
    };
    const QString fault = fault_of(document_.design(), change);
    (second ? row.second : row.first)->show_fault(fault);
    if (fault.isEmpty()) document_.edit(tr("Target %1").arg(result_title(row.name)), change);
}

void TargetRows::fill_add_menu() {
    add_->menu()->clear();
    for (const Wanted& wanted : wanted_results) {
        const auto& targets = document_.design().targets;
        if (std::any_of(targets.begin(), targets.end(), [&](const Target& t) { return t.name == wanted.name; }))
            continue;
        add_->menu()->addAction(result_title(wanted.name), this, [this, &wanted] {
            const auto value = [](std::optional<double> si) {
                return si ? std::optional<Value>(Value{*si, ""}) : std::nullopt;
            };
            document_.edit(tr("Add target %1").arg(result_title(wanted.name)), [&](Design& design) {
                design.targets.push_back(
                    {wanted.name, value(wanted.nominal), value(wanted.within), value(wanted.min), value(wanted.max)});
            });
        });
    }
    add_->setVisible(!add_->menu()->isEmpty());
}

} // namespace sinewright::ui
