#pragma once
/// Changes of a design that the value panels make, as plain functions of the design; the document makes steps of them.
#include "core/design/design.hpp"
#include "core/parts/part_kind.hpp"
#include <QString>
#include <functional>
#include <optional>

namespace sinewright::ui {

/// A value that a dial or panel sets: "R1.resistance".
struct ParameterRef {
    std::string part, parameter;
    std::string text() const { return part + "." + parameter; }
    bool operator==(const ParameterRef&) const = default;
};
std::optional<ParameterRef> parameter_ref(const std::string& text);

/// What the kind says of a parameter; null when the part, its kind or the parameter is not there.
const ParameterInfo* find_info(const Design& design, const ParameterRef& ref);
/// The value given; nothing when absent or a word.
std::optional<Value> value_of(const Design& design, const ParameterRef& ref);
/// Puts a parameter in its place in the kind's order; nothing takes it away.
void set_parameter(Part& part, const std::string& name, std::optional<ParameterValue> value);
/// Position of a dial between its ends, 0 … 1, and back. Values are rounded to three digits, ends are exact.
double fraction_of(const Dial& dial);
Value value_at(const Dial& dial, double fraction, const std::string& unit);
/// Sets the dial and everything it sets.
void turn_dial(Design& design, const std::string& dial_name, const Value& value);
/// A dial for one value, from about a third to three times it.
Dial dial_for(const Design& design, const ParameterRef& ref);

/// The first fault the change would bring in, as a sentence; empty: none.
QString fault_of(const Design& design, const std::function<void(Design&)>& change);

/// A file's name of something as people write it: "junction_capacitance" → "junction capacitance".
QString words_of(std::string_view name);

} // namespace sinewright::ui
