#include "core/parts/kinds.hpp"

namespace sinewright {

namespace {

enum { resistance, position, end_resistance };

/// v_a − v_b − R·j = 0: holds at the stop, where R may be zero, so that turning the wiper never changes which unknowns
/// there are.
void track(PartStamp& s, int a, int b, double r_ohm, std::string_view name) {
    const int j = s.branch_current(name);
    if (a == b) return s.g(j, j, 1); // wired as a rheostat: the track joins a net to itself, and nothing flows
    s.branch(j, a, b);
    s.g(j, a, 1);
    s.g(j, b, -1);
    s.g(j, j, -r_ohm);
    s.tie(r_ohm > 0 ? Tie::conducts : Tie::forces_voltage, a, b);
}

/// R_aw = end + R·position, R_wb = end + R·(1 − position)
void stamp(const PartValues& p, PartStamp& s) {
    const int a = s.net(0), w = s.net(1), b = s.net(2);
    track(s, a, w, p[end_resistance] + p[resistance] * p[position], "current a to w");
    track(s, w, b, p[end_resistance] + p[resistance] * (1 - p[position]), "current w to b");
}

} // namespace

const PartKind potentiometer_kind{
    .name = "potentiometer",
    .title = "potentiometer",
    .ref_prefix = "P",
    .terminals = {{"a", "start of the track"}, {"w", "wiper"}, {"b", "end of the track"}},
    .parameters = {{.name = "resistance",
                    .unit = "Ω",
                    .required = true,
                    .range = Range::positive,
                    .help = "Resistance of the whole track."},
                   {.name = "position",
                    .unit = "",
                    .fallback = 0.5,
                    .range = Range::from_0_to_1,
                    .help = "Where the wiper stands, from 0 at a to 1 at b."},
                   {.name = "end_resistance",
                    .unit = "Ω",
                    .fallback = 0,
                    .range = Range::not_negative,
                    .help = "What remains between wiper and either end at the stop."}},
    .stamp = stamp,
};

} // namespace sinewright
