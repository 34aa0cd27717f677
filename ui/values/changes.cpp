#include "ui/values/changes.hpp"
#include "core/design/file.hpp"
#include "core/quantity/quantity.hpp"
#include <algorithm>
#include <cmath>

namespace sinewright::ui {
namespace {

constexpr int dial_digits = 3; // what a hand can set on a slider

} // namespace

std::optional<ParameterRef> parameter_ref(const std::string& text) {
    const auto dot = text.rfind('.');
    if (dot == std::string::npos) return {};
    return ParameterRef{text.substr(0, dot), text.substr(dot + 1)};
}

const ParameterInfo* find_info(const Design& design, const ParameterRef& ref) {
    const Part* part = design.find(ref.part);
    const PartKind* kind = part ? find_part_kind(part->kind) : nullptr;
    const int index = kind ? kind->parameter(ref.parameter) : -1;
    return index < 0 ? nullptr : &kind->parameters[static_cast<std::size_t>(index)];
}

std::optional<Value> value_of(const Design& design, const ParameterRef& ref) {
    const Part* part = design.find(ref.part);
    const ParameterValue* value = part ? part->find(ref.parameter) : nullptr;
    if (!value || !std::holds_alternative<Value>(*value)) return {};
    return std::get<Value>(*value);
}

void set_parameter(Part& part, const std::string& name, std::optional<ParameterValue> value) {
    auto& given = part.parameters;
    const auto at = std::find_if(given.begin(), given.end(), [&](const Parameter& p) { return p.name == name; });
    if (at != given.end()) {
        if (value)
            at->value = std::move(*value);
        else
            given.erase(at);
        return;
    }
    if (!value) return;
    const PartKind* kind = find_part_kind(part.kind);
    const auto order = [&](const std::string& parameter) { return kind ? kind->parameter(parameter) : 0; };
    const auto before =
        std::find_if(given.begin(), given.end(), [&](const Parameter& p) { return order(p.name) > order(name); });
    given.insert(before, Parameter{name, std::move(*value)});
}

double fraction_of(const Dial& dial) {
    const double at = dial.at ? dial.at->si : dial.from.si;
    const bool log = dial.law == DialLaw::log && dial.from.si > 0 && dial.to.si > 0 && at > 0;
    const auto scale = [&](double value) { return log ? std::log(value) : value; };
    const double span = scale(dial.to.si) - scale(dial.from.si);
    if (span == 0) return 0;
    return std::clamp((scale(at) - scale(dial.from.si)) / span, 0.0, 1.0);
}

Value value_at(const Dial& dial, double fraction, const std::string& unit) {
    if (fraction <= 0) return dial.from;
    if (fraction >= 1) return dial.to;
    const bool log = dial.law == DialLaw::log && dial.from.si > 0 && dial.to.si > 0;
    const double exact = log ? dial.from.si * std::pow(dial.to.si / dial.from.si, fraction)
                             : dial.from.si + (dial.to.si - dial.from.si) * fraction;
    const double value = QString::number(exact, 'g', dial_digits).toDouble();
    return {value, letter_code(value, unit)};
}

void turn_dial(Design& design, const std::string& dial_name, const Value& value) {
    for (Dial& dial : design.dials) {
        if (dial.name != dial_name) continue;
        dial.at = value;
        for (const std::string& set : dial.sets)
            if (const auto ref = parameter_ref(set))
                if (Part* part = design.find(ref->part)) set_parameter(*part, ref->parameter, value);
    }
}

Dial dial_for(const Design& design, const ParameterRef& ref) {
    const ParameterInfo* info = find_info(design, ref);
    const std::string unit = info ? std::string(info->unit) : std::string();
    const double at = value_of(design, ref).value_or(Value{1, ""}).si;
    Dial dial;
    dial.name = ref.part;
    const auto taken = [&](const std::string& name) {
        return std::any_of(design.dials.begin(), design.dials.end(), [&](const Dial& d) { return d.name == name; });
    };
    for (int number = 2; taken(dial.name); ++number) dial.name = ref.part + " " + std::to_string(number);
    dial.sets = {ref.text()};
    const auto value = [&](double si) { return Value{si, letter_code(si, unit)}; };
    if (info && info->range == Range::from_0_to_1) {
        dial.from = value(0), dial.to = value(1), dial.law = DialLaw::linear;
    } else if (at > 0) {
        const auto rounded = [](double si) { return QString::number(si, 'g', 2).toDouble(); };
        dial.from = value(rounded(at / 3)), dial.to = value(rounded(at * 3)), dial.law = DialLaw::log;
    } else {
        dial.from = value(at - std::max(1.0, std::abs(at))), dial.to = value(at + std::max(1.0, std::abs(at)));
    }
    dial.at = value_of(design, ref);
    return dial;
}

QString fault_of(const Design& design, const std::function<void(Design&)>& change) {
    Design after = design;
    change(after);
    const Faults before = validate(design);
    for (const Fault& fault : validate(after))
        if (std::find(before.begin(), before.end(), fault) == before.end())
            return QString::fromStdString(fault.remedy.empty() ? fault.sentence : fault.sentence + " " + fault.remedy);
    return {};
}

QString words_of(std::string_view name) {
    return QString::fromUtf8(name.data(), qsizetype(name.size())).replace('_', ' ');
}

} // namespace sinewright::ui
