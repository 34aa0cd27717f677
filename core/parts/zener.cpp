#include "core/parts/junction.hpp"
#include "core/parts/kinds.hpp"
#include <algorithm>

namespace sinewright {

namespace {

enum {
    breakdown_voltage,
    breakdown_current,
    breakdown_ideality,
    saturation_current,
    ideality,
    series_resistance,
    junction_capacitance,
    transit_time,
    bandgap
};

/// The diode's current, and −Iz·exp(−(v_j + Vz)/(nz·kT/q)); stored charge tt·i. Cj is a constant stamp.
template <bool StoresCharge> struct Breakdown {
    static constexpr int controls = 1, outputs = 1;
    static constexpr bool stores_charge = StoresCharge;
    Junction junction;
    double tt_s, vz_v, iz_a, breakdown_scale_v;
    template <class T> void operator()(const std::array<T, 1>& v, std::array<T, 1>& i, std::array<T, 1>& q) const {
        i[0] = junction.current(v[0]) - iz_a * limited_exp(T(-(v[0] + vz_v) / breakdown_scale_v));
        if constexpr (StoresCharge) q[0] = tt_s * i[0];
    }
    double limiting_scale_v(int) const { return std::min(junction.scale_v, breakdown_scale_v); }
};

template <bool StoresCharge> LawPtr breakdown_law(const PartValues& p) {
    const double vt_v = thermal_voltage_v(p.temperature_k);
    const Junction junction{saturation_current_at(p[saturation_current], p[ideality], p[bandgap], p.temperature_k),
                            p[ideality] * vt_v};
    return law_of(Breakdown<StoresCharge>{junction, p[transit_time], p[breakdown_voltage], p[breakdown_current],
                                          p[breakdown_ideality] * vt_v});
}

void stamp(const PartValues& p, PartStamp& s) {
    stamp_junction(s, p[transit_time] > 0 ? breakdown_law<true>(p) : breakdown_law<false>(p), p[series_resistance],
                   p[junction_capacitance]);
}

} // namespace

const PartKind zener_kind{
    .name = "zener",
    .title = "zener diode",
    .ref_prefix = "Z",
    .terminals = {{"a", "anode"}, {"k", "cathode"}},
    .parameters = {{.name = "breakdown_voltage",
                    .unit = "V",
                    .required = true,
                    .range = Range::positive,
                    .help = "Reverse voltage at the breakdown current."},
                   {.name = "breakdown_current",
                    .unit = "A",
                    .fallback = 1e-3,
                    .range = Range::positive,
                    .help = "Reverse current at which the breakdown voltage is stated."},
                   {.name = "breakdown_ideality",
                    .unit = "",
                    .fallback = 2,
                    .range = Range::positive,
                    .help = "Softness of the knee: larger is softer."},
                   {.name = "saturation_current",
                    .unit = "A",
                    .fallback = 4e-9,
                    .range = Range::positive,
                    .help = "Forward saturation current at 25 °C."},
                   {.name = "ideality",
                    .unit = "",
                    .fallback = 1.9,
                    .range = Range::positive,
                    .help = "Slope of the forward exponential."},
                   {.name = "series_resistance",
                    .unit = "Ω",
                    .fallback = 0,
                    .range = Range::not_negative,
                    .help = "Resistance in series with the junction."},
                   {.name = "junction_capacitance",
                    .unit = "F",
                    .fallback = 0,
                    .range = Range::not_negative,
                    .help = "Capacitance across the junction."},
                   {.name = "transit_time",
                    .unit = "s",
                    .fallback = 0,
                    .range = Range::not_negative,
                    .help = "Stored charge per ampere."},
                   {.name = "bandgap",
                    .unit = "eV",
                    .fallback = 1.11,
                    .range = Range::positive,
                    .help = "Band gap: sets how the saturation current rises with temperature."}},
    .main = breakdown_voltage,
    .stamp = stamp,
};

} // namespace sinewright
