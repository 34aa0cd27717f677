#include "ui/shell/starter.hpp"
#include "core/quantity/quantity.hpp"
#include "ui/values/changes.hpp"

namespace sinewright::ui {
namespace {

using Joints = std::vector<TerminalNet>;

Value written(const char* code, const char* unit) { return {parse_quantity(code, unit).value(), code}; }

Part part(const char* ref, const char* kind, Joints joints, Place place) {
    Part p;
    p.ref = ref, p.kind = kind, p.terminals = std::move(joints), p.place = place;
    return p;
}

Part valued(const char* ref, const char* kind, const char* parameter, const Value& value, const char* a, const char* b,
            Place place) {
    Part p = part(ref, kind, {{"a", a}, {"b", b}}, place);
    set_parameter(p, parameter, value);
    return p;
}

Part resistor(const char* ref, const char* value, const char* a, const char* b, Place place) {
    return valued(ref, "resistor", "resistance", written(value, "Ω"), a, b, place);
}

Part capacitor(const char* ref, const char* value, const char* a, const char* b, Place place) {
    return valued(ref, "capacitor", "capacitance", written(value, "F"), a, b, place);
}

Part amplifier() {
    Part u = part("U1", "opamp", {{"plus", "n1"}, {"minus", "fb"}, {"out", "out"}}, {0, 0});
    set_parameter(u, "model", std::string("macro"));
    set_parameter(u, "gbw", written("10M", "Hz"));
    set_parameter(u, "slew_rate", written("20M", "V/s"));
    set_parameter(u, "swing_high", written("13", "V"));
    set_parameter(u, "swing_low", written("-13", "V"));
    return u;
}

} // namespace

Design starter_design() {
    Design d;
    d.title = "First loop, 1 kHz";
    d.output = "out";
    d.parts = {
        amplifier(),
        resistor("R1", "10k", "n2", "out", {20, -200}),
        capacitor("C1", "16n", "n1", "n2", {-120, -200}),
        resistor("R2", "10k", "n1", "gnd", {-360, -60, 90}),
        capacitor("C2", "16n", "n1", "gnd", {-260, -60, 90}),
        resistor("R3", "18k", "n3", "out", {120, 200}),
        resistor("R4", "10k", "fb", "gnd", {-160, 340, 90}),
        resistor("R5", "2k7", "fb", "n3", {-40, 200}),
        part("D1", "diode", {{"a", "n3"}, {"k", "fb"}}, {-40, 140, 180}),
        part("D2", "diode", {{"a", "fb"}, {"k", "n3"}}, {-40, 260}),
    };
    d.dials = {
        {"tune",
         {"R1.resistance", "R2.resistance"},
         written("1k", "Ω"),
         written("100k", "Ω"),
         DialLaw::log,
         written("10k", "Ω")},
        {"excess", {"R3.resistance"}, written("15k", "Ω"), written("22k", "Ω"), DialLaw::linear, written("18k", "Ω")}};
    return d;
}

} // namespace sinewright::ui
