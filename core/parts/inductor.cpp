#include "core/parts/kinds.hpp"

namespace sinewright {

namespace {

enum { inductance, series_resistance };

/// v_ab = Rs·j + L·dj/dt
void stamp(const PartValues& p, PartStamp& s) {
    const int a = s.net(0), b = s.net(1), j = s.branch_current("current");
    s.branch(j, a, b);
    s.g(j, a, 1);
    s.g(j, b, -1);
    s.g(j, j, -p[series_resistance]);
    s.c(j, j, -p[inductance]);
    s.tie(p[series_resistance] > 0 ? Tie::conducts : Tie::forces_voltage, a, b);
}

} // namespace

const PartKind inductor_kind{
    .name = "inductor",
    .title = "inductor",
    .ref_prefix = "L",
    .terminals = {{"a", "left end"}, {"b", "right end"}},
    .parameters = {{.name = "inductance",
                    .unit = "H",
                    .required = true,
                    .range = Range::positive,
                    .help = "Inductance at 25 °C."},
                   {.name = "series_resistance",
                    .unit = "Ω",
                    .fallback = 0,
                    .range = Range::not_negative,
                    .help = "Resistance of the winding."}},
    .stamp = stamp,
};

} // namespace sinewright
