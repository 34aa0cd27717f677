#pragma once
/// Small designs the tests of the sheet share.
#include "ui/sheet/editing.hpp"

namespace sinewright::ui::test {

inline Part at(Part part, double x, double y, int turn = 0) {
    part.place = Place{x, y, turn, false};
    return part;
}

/// Three resistors in a row, 160 apart, all ends free.
inline Design three_resistors() {
    Design d;
    for (int i = 0; i < 3; ++i) d.parts.push_back(starting_part(d, "resistor", {160.0 * i, 0, 0, false}));
    return d;
}

/// A Wien loop, placed by hand: the loop round the upper side, the limiting divider below.
inline Design wien_loop() {
    Design d;
    d.output = "out";
    const auto add = [&](const char* ref, const char* kind, double x, double y, int turn,
                         std::vector<std::string> nets) {
        Part part = starting_part(d, kind, {x, y, turn, false});
        part.ref = ref;
        for (std::size_t i = 0; i < nets.size(); ++i) part.terminals[i].net = nets[i];
        d.parts.push_back(part);
    };
    add("R1", "resistor", 580, 0, 180, {"out", "s"});
    add("C1", "capacitor", 400, 0, 180, {"s", "p"});
    add("R2", "resistor", 140, 140, 90, {"p", "gnd"});
    add("C2", "capacitor", 240, 140, 90, {"p", "gnd"});
    add("U1", "opamp", 540, 240, 0, {"p", "m", "out"});
    add("R3", "resistor", 600, 400, 180, {"out", "x"});
    add("R5", "resistor", 440, 400, 180, {"x", "m"});
    add("D1", "diode", 440, 340, 180, {"x", "m"});
    add("D2", "diode", 440, 460, 0, {"m", "x"});
    add("R4", "resistor", 360, 560, 90, {"m", "gnd"});
    d.cut = TerminalRef{"U1", "plus"};
    return d;
}

} // namespace sinewright::ui::test
