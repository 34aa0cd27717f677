#include "core/parts/kinds.hpp"

namespace sinewright {

namespace {

enum { resistance, voltage_coefficient_2 };

/// i = (v/R)/(1 + κ·v²)
struct Bending {
    static constexpr int controls = 1, outputs = 1;
    static constexpr bool stores_charge = false;
    double r_ohm, kappa_per_v2;
    template <class T> void operator()(const std::array<T, 1>& v, std::array<T, 1>& i, std::array<T, 1>&) const {
        i[0] = v[0] / r_ohm / (1.0 + kappa_per_v2 * v[0] * v[0]);
    }
};

void stamp(const PartValues& p, PartStamp& s) {
    const int a = s.net(0), b = s.net(1);
    if (p[voltage_coefficient_2] == 0) {
        s.conductance(a, b, 1 / p[resistance]);
        return;
    }
    s.nonlinear(law_of(Bending{p[resistance], p[voltage_coefficient_2]}), {{{a, 1}, {b, -1}}}, {{{a, 1}, {b, -1}}});
    s.tie(Tie::conducts, a, b);
}

} // namespace

const PartKind resistor_kind{
    .name = "resistor",
    .title = "resistor",
    .ref_prefix = "R",
    .terminals = {{"a", "left end"}, {"b", "right end"}},
    .parameters = {{.name = "resistance",
                    .unit = "Ω",
                    .required = true,
                    .range = Range::positive,
                    .help = "Resistance at 25 °C and low voltage."},
                   {.name = "voltage_coefficient_2",
                    .unit = "1/V²",
                    .fallback = 0,
                    .help =
                        "Relative rise of the resistance per volt squared; makes the resistor's own third harmonic."}},
    .stamp = stamp,
};

} // namespace sinewright
