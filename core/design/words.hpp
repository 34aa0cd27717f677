#pragma once
/// Words shared by reading and validating: lists of the right names for messages.
#include "core/design/design.hpp"
#include "core/parts/part_kind.hpp"

namespace sinewright {

/// "`fb`, `gnd` and `out`"; at most 12 names, then "…".
std::string quoted_list(const std::vector<std::string>& names);
/// "an op-amp", "a resistor".
std::string with_article(std::string_view noun);
/// Text from a file made fit for a message or a terminal: control characters become "?".
std::string printable(std::string_view text);

Fault unknown_kind(const std::string& ref, const std::string& kind);
Fault unknown_parameter(const std::string& ref, const PartKind& kind, const std::string& parameter);

/// Result names a target may have, with the unit its values are written in.
struct TargetName {
    std::string_view name, unit;
};
std::span<const TargetName> target_names();

} // namespace sinewright
