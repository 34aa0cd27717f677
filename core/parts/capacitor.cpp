#include "core/parts/kinds.hpp"

namespace sinewright {

namespace {

enum { capacitance, voltage_coefficient_1, voltage_coefficient_2, series_resistance };

/// q = C·(v + vc1·v²/2 + vc2·v³/3)
struct Bending {
    static constexpr int controls = 1, outputs = 1;
    static constexpr bool stores_charge = true;
    double c_f, vc1_per_v, vc2_per_v2;
    template <class T> void operator()(const std::array<T, 1>& v, std::array<T, 1>&, std::array<T, 1>& q) const {
        q[0] = c_f * v[0] * (1.0 + v[0] * (vc1_per_v / 2 + v[0] * (vc2_per_v2 / 3)));
    }
};

void stamp(const PartValues& p, PartStamp& s) {
    int a = s.net(0);
    const int b = s.net(1);
    if (p[series_resistance] > 0) {
        const int plate = s.internal_voltage("plate");
        s.conductance(a, plate, 1 / p[series_resistance]);
        a = plate;
    }
    if (p[voltage_coefficient_1] == 0 && p[voltage_coefficient_2] == 0) {
        s.capacitance(a, b, p[capacitance]);
        return;
    }
    s.nonlinear(law_of(Bending{p[capacitance], p[voltage_coefficient_1], p[voltage_coefficient_2]}),
                {{{a, 1}, {b, -1}}}, {{{a, 1}, {b, -1}}});
    s.tie(Tie::stores, a, b);
}

} // namespace

const PartKind capacitor_kind{
    .name = "capacitor",
    .title = "capacitor",
    .ref_prefix = "C",
    .terminals = {{"a", "left end"}, {"b", "right end"}},
    .parameters = {{.name = "capacitance",
                    .unit = "F",
                    .required = true,
                    .range = Range::positive,
                    .help = "Capacitance at 25 °C and low voltage."},
                   {.name = "voltage_coefficient_1",
                    .unit = "1/V",
                    .fallback = 0,
                    .help = "Relative rise of the capacitance per volt; makes even harmonics."},
                   {.name = "voltage_coefficient_2",
                    .unit = "1/V²",
                    .fallback = 0,
                    .help = "Relative rise of the capacitance per volt squared; makes odd harmonics."},
                   {.name = "series_resistance",
                    .unit = "Ω",
                    .fallback = 0,
                    .range = Range::not_negative,
                    .help = "Resistance in series with the plates: loss tangent divided by ωC."}},
    .stamp = stamp,
};

} // namespace sinewright
