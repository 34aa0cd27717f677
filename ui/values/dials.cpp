#include "ui/values/dials.hpp"
#include "ui/document/document.hpp"
#include "ui/theme/theme.hpp"
#include "ui/values/changes.hpp"
#include "ui/values/quantity_field.hpp"
#include <QAction>
#include <QGridLayout>
#include <QLabel>
#include <QSlider>
#include <QToolButton>
#include <algorithm>

namespace sinewright::ui {
namespace {

constexpr int slider_steps = 1000;
constexpr int card_width = 256;
constexpr int key_pause_ms = 700;

/// "R1 = R2"; a parameter that is not its part's main value is named.
QString sets_text(const Dial& dial, const Design& design) {
    QStringList names;
    for (const std::string& set : dial.sets) {
        const auto ref = parameter_ref(set);
        const Part* part = ref ? design.find(ref->part) : nullptr;
        const PartKind* kind = part ? find_part_kind(part->kind) : nullptr;
        const bool main = kind && kind->main >= 0 && kind->parameter(ref->parameter) == kind->main;
        names << QString::fromStdString(ref ? ref->part : set) + (ref && !main ? " " + words_of(ref->parameter) : "");
    }
    return names.join(" = ");
}

std::string unit_of(const Dial& dial, const Design& design) {
    for (const std::string& set : dial.sets)
        if (const auto ref = parameter_ref(set))
            if (const ParameterInfo* info = find_info(design, *ref)) return std::string(info->unit);
    return {};
}

void make_flat(QWidget* field, const char* role = "flat") { field->setProperty("role", role); }

} // namespace

DialRow::DialRow(Document& document, const Dial& dial, QWidget* parent)
    : QWidget(parent),
      document_(document),
      name_(dial.name),
      unit_(unit_of(dial, document.design())),
      title_(new QLineEdit(this)),
      sets_(new QLabel(this)),
      fault_(new QLabel(this)),
      value_(new QuantityField(QString::fromStdString(unit_), this)),
      from_(new QuantityField(QString::fromStdString(unit_), this)),
      to_(new QuantityField(QString::fromStdString(unit_), this)),
      slider_(new QSlider(Qt::Horizontal, this)),
      law_(new QToolButton(this)) {
    const QString name = QString::fromStdString(name_);
    setObjectName("dial_" + name);
    setAccessibleName(tr("Dial %1").arg(name));
    title_->setAccessibleName(tr("Name of dial %1").arg(name));
    value_->setAccessibleName(tr("Value of dial %1").arg(name));
    value_->setObjectName("value");
    from_->setAccessibleName(tr("Lower end of dial %1").arg(name));
    to_->setAccessibleName(tr("Upper end of dial %1").arg(name));
    slider_->setAccessibleName(tr("Dial %1").arg(name));
    slider_->setObjectName("slider");
    law_->setAccessibleName(tr("Law of dial %1").arg(name));
    fault_->setProperty("role", "fault");
    fault_->setWordWrap(true);
    fault_->hide();
    slider_->setRange(0, slider_steps);
    slider_->setSingleStep(slider_steps / 100);
    slider_->setPageStep(slider_steps / 10);
    pause_.setSingleShot(true);
    pause_.setInterval(key_pause_ms);
    lay_out();
    add_actions();
    show_dial(dial);
}

void DialRow::lay_out() {
    make_flat(title_), make_flat(value_, "flat-value"), make_flat(from_, "flat-small"), make_flat(to_, "flat-small");
    make_flat(law_, "flat-small"), make_flat(sets_, "soft");
    value_->setAlignment(Qt::AlignRight);
    to_->setAlignment(Qt::AlignRight);
    value_->setMaximumWidth(76);
    auto* grid = new QGridLayout(this);
    grid->setContentsMargins(12, 0, 12, 4);
    grid->setHorizontalSpacing(4);
    grid->setVerticalSpacing(0);
    auto* head = new QHBoxLayout;
    head->setSpacing(2);
    head->addWidget(title_);
    head->addWidget(sets_, 1);
    head->addWidget(value_);
    grid->addLayout(head, 0, 0, 1, 3);
    auto* groove = new QHBoxLayout; // its ends in line with the figures below
    groove->setContentsMargins(4, 0, 4, 0);
    groove->addWidget(slider_);
    grid->addLayout(groove, 1, 0, 1, 3);
    grid->addWidget(from_, 2, 0);
    grid->addWidget(law_, 2, 1, Qt::AlignCenter);
    grid->addWidget(to_, 2, 2);
    grid->addWidget(fault_, 3, 0, 1, 3);
    QWidget* const order[] = {title_, value_, slider_, from_, law_, to_};
    for (std::size_t i = 1; i < std::size(order); ++i) setTabOrder(order[i - 1], order[i]);
}

void DialRow::add_actions() {
    connect(slider_, &QSlider::valueChanged, this, [this](int position) {
        if (showing_) return;
        for (const Dial& dial : document_.design().dials)
            if (dial.name == name_) {
                turn_to(value_at(dial, double(position) / slider_steps, unit_), true);
                if (!slider_->isSliderDown()) pause_.start();
                return;
            }
    });
    connect(slider_, &QSlider::sliderPressed, &document_, &Document::end_merge);
    connect(slider_, &QSlider::sliderReleased, &document_, &Document::end_merge);
    connect(&pause_, &QTimer::timeout, &document_, &Document::end_merge);
    connect(value_, &QuantityField::accepted, this, [this](const Value& value) { turn_to(value, false); });
    connect(value_, &QuantityField::stepped, this, [this](const Value& value) { turn_to(value, true); });
    connect(value_, &QuantityField::steps_ended, &document_, &Document::end_merge);
    for (auto* field : {value_, from_, to_})
        connect(field, &QuantityField::fault_changed, this, [this](const QString& sentence) {
            fault_->setText(sentence);
            fault_->setVisible(!sentence.isEmpty());
        });
    for (const bool upper : {false, true}) {
        auto* field = upper ? to_ : from_;
        const auto change = [this, upper](const Value& value) { change_end(upper, value); };
        connect(field, &QuantityField::accepted, this, change);
        connect(field, &QuantityField::stepped, this, change);
    }
    connect(title_, &QLineEdit::editingFinished, this, &DialRow::rename);
    connect(law_, &QToolButton::clicked, this, &DialRow::change_law);
    auto* remove = new QAction(tr("Remove dial %1").arg(QString::fromStdString(name_)), this);
    connect(remove, &QAction::triggered, this, [this] {
        document_.edit(tr("Remove dial %1").arg(QString::fromStdString(name_)), [this](Design& design) {
            std::erase_if(design.dials, [this](const Dial& dial) { return dial.name == name_; });
        });
    });
    addAction(remove);
    setContextMenuPolicy(Qt::ActionsContextMenu);
}

void DialRow::show_dial(const Dial& dial) {
    showing_ = true;
    if (!title_->hasFocus() || !title_->isModified()) title_->setText(QString::fromStdString(dial.name));
    title_->setFixedWidth(std::min(110, title_->fontMetrics().horizontalAdvance(title_->text()) + 14));
    sets_->setText(sets_text(dial, document_.design()));
    sets_->setToolTip(sets_->text());
    value_->show_value(dial.at ? dial.at : std::optional<Value>(dial.from));
    from_->show_value(dial.from);
    to_->show_value(dial.to);
    law_->setText(dial.law == DialLaw::log ? tr("log") : tr("linear"));
    law_->setToolTip(dial.law == DialLaw::log ? tr("Equal turns are equal ratios; click for equal differences")
                                              : tr("Equal turns are equal differences; click for equal ratios"));
    if (!slider_->isSliderDown()) slider_->setValue(int(std::lround(fraction_of(dial) * slider_steps)));
    slider_->setAccessibleDescription(value_->text());
    showing_ = false;
}

void DialRow::turn_to(const Value& value, bool go_on) {
    const QString name = QString::fromStdString(name_);
    const auto change = [&](Design& design) { turn_dial(design, name_, value); };
    const QString fault = fault_of(document_.design(), change);
    value_->show_fault(fault);
    if (fault.isEmpty()) document_.edit(tr("Turn %1").arg(name), change, go_on ? "dial " + name : QString());
}

void DialRow::edit_dial(const QString& step, const std::function<void(Dial&)>& change, const QString& merge) {
    document_.edit(
        step,
        [&](Design& design) {
            for (Dial& dial : design.dials)
                if (dial.name == name_) {
                    change(dial);
                    return;
                }
        },
        merge);
}

void DialRow::rename() {
    const std::string wanted = title_->text().trimmed().toStdString();
    title_->setModified(false);
    const auto& dials = document_.design().dials;
    const bool taken = std::any_of(dials.begin(), dials.end(), [&](const Dial& dial) { return dial.name == wanted; });
    if (wanted.empty() || (taken && wanted != name_)) {
        title_->setText(QString::fromStdString(name_));
        fault_->setText(wanted.empty() ? tr("A dial needs a name.") : tr("Another dial has that name already."));
        fault_->show();
        return;
    }
    edit_dial(tr("Rename dial %1").arg(QString::fromStdString(name_)), [&](Dial& dial) { dial.name = wanted; });
}

void DialRow::change_end(bool upper, const Value& value) {
    const auto change = [&](Dial& dial) { (upper ? dial.to : dial.from) = value; };
    const QString fault = fault_of(document_.design(), [&](Design& design) {
        for (Dial& dial : design.dials)
            if (dial.name == name_) change(dial);
    });
    (upper ? to_ : from_)->show_fault(fault);
    if (fault.isEmpty())
        edit_dial(tr("Range of %1").arg(QString::fromStdString(name_)), change,
                  "range " + QString::fromStdString(name_));
}

void DialRow::change_law() {
    edit_dial(tr("Law of %1").arg(QString::fromStdString(name_)),
              [](Dial& dial) { dial.law = dial.law == DialLaw::log ? DialLaw::linear : DialLaw::log; });
}

Dials::Dials(Document& document, QWidget* parent)
    : FloatingCard("dials", Qt::BottomLeftCorner, parent), document_(document) {
    set_title(tr("Dials"));
    connect(&document_, &Document::changed, this, &Dials::take_over);
    build();
}

void Dials::take_over() {
    decltype(built_for_) wanted;
    for (const Dial& dial : document_.design().dials) wanted.emplace_back(dial.name, dial.sets);
    if (wanted != built_for_) {
        // Not at once: the change may come from a row that would vanish under its own call.
        QTimer::singleShot(0, this, &Dials::build);
        return;
    }
    for (std::size_t i = 0; i < rows_.size(); ++i) rows_[i]->show_dial(document_.design().dials[i]);
}

void Dials::build() {
    built_for_.clear();
    rows_.clear();
    auto* list = new QWidget;
    list->setFixedWidth(card_width);
    auto* column = new QVBoxLayout(list);
    column->setContentsMargins(0, 0, 0, 8);
    column->setSpacing(2);
    for (const Dial& dial : document_.design().dials) {
        built_for_.emplace_back(dial.name, dial.sets);
        rows_.push_back(new DialRow(document_, dial, list));
        column->addWidget(rows_.back());
    }
    set_content(list);
    setVisible(!rows_.empty());
    settle();
}

} // namespace sinewright::ui
