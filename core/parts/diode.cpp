#include "core/parts/junction.hpp"
#include "core/parts/kinds.hpp"

namespace sinewright {

namespace {

enum { saturation_current, ideality, series_resistance, junction_capacitance, transit_time, bandgap };

/// i = Is·(exp(v_j/(n·kT/q)) − 1); stored charge tt·i. Cj is a constant stamp.
template <bool StoresCharge> struct Forward {
    static constexpr int controls = 1, outputs = 1;
    static constexpr bool stores_charge = StoresCharge;
    Junction junction;
    double tt_s;
    template <class T> void operator()(const std::array<T, 1>& v, std::array<T, 1>& i, std::array<T, 1>& q) const {
        i[0] = junction.current(v[0]);
        if constexpr (StoresCharge) q[0] = tt_s * i[0];
    }
    double limiting_scale_v(int) const { return junction.scale_v; }
};

void stamp(const PartValues& p, PartStamp& s) {
    const Junction junction{saturation_current_at(p[saturation_current], p[ideality], p[bandgap], p.temperature_k),
                            p[ideality] * thermal_voltage_v(p.temperature_k)};
    const double tt_s = p[transit_time];
    stamp_junction(s, tt_s > 0 ? law_of(Forward<true>{junction, tt_s}) : law_of(Forward<false>{junction, tt_s}),
                   p[series_resistance], p[junction_capacitance]);
}

} // namespace

const PartKind diode_kind{
    .name = "diode",
    .title = "diode",
    .ref_prefix = "D",
    .terminals = {{"a", "anode"}, {"k", "cathode"}},
    .parameters = {{.name = "saturation_current",
                    .unit = "A",
                    .fallback = 4e-9,
                    .range = Range::positive,
                    .help = "Saturation current at 25 °C: decides at which voltage it conducts."},
                   {.name = "ideality",
                    .unit = "",
                    .fallback = 1.9,
                    .range = Range::positive,
                    .help = "Slope of the exponential: 1 is an ideal junction, small-signal diodes lie near 1.9."},
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
                    .help = "Stored charge per ampere of forward current."},
                   {.name = "bandgap",
                    .unit = "eV",
                    .fallback = 1.11,
                    .range = Range::positive,
                    .help = "Band gap: sets how the saturation current rises with temperature."}},
    .main = saturation_current,
    .tempco_applies = false,
    .stamp = stamp,
};

} // namespace sinewright
