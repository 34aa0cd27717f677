#pragma once
/// A part in words: what stands beside it, and what a screen reader says.
#include "core/design/design.hpp"
#include "core/parts/part_kind.hpp"
#include <QString>

namespace sinewright::ui {

/// The parameter that stands beside a part and is stepped by the wheel; null: the part shows none.
const ParameterInfo* shown_parameter(const Part& part);
/// A value as people type it: as parse_quantity, and with the unit after a letter code ("1m5H").
Result<double> read_value(const std::string& typed, std::string_view unit);
/// "4k7", "15n8", "10 MHz", "ideal"; empty: nothing to show.
QString value_text(const Part& part);
/// "R3, resistor, 18 kilo-ohm, between out and n2".
QString spoken_part(const Part& part);
/// "R3 b", "U1 +": a terminal by name.
QString terminal_text(const TerminalRef& terminal);

} // namespace sinewright::ui
