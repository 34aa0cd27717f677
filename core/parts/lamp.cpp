#include "core/parts/kinds.hpp"
#include "core/parts/thermal.hpp"

namespace sinewright {

namespace {

enum { cold_resistance, exponent, heat_capacity, conduction, radiation };

/// R = R0·(θ/T)^exponent; heat_capacity·dθ/dt = v·i − conduction·(θ − T) − radiation·(θ⁴ − T⁴)
struct Filament {
    static constexpr int controls = 2, outputs = 2;
    static constexpr bool stores_charge = false;
    double r0_ohm, exponent_n, ambient_k, conductance, conduction_w_per_k, radiation_w_per_k4;
    template <class T> void operator()(const std::array<T, 2>& u, std::array<T, 2>& out, std::array<T, 2>&) const {
        using std::pow;
        const T theta = at_least(u[1], lowest_temperature_k);
        const T i = u[0] / (r0_ohm * pow(T(theta / ambient_k), exponent_n));
        const T square = theta * theta, fourth = square * square;
        const double ambient_fourth = ambient_k * ambient_k * ambient_k * ambient_k;
        const T loss =
            (conduction_w_per_k - conductance) * (theta - ambient_k) + radiation_w_per_k4 * (fourth - ambient_fourth);
        out[0] = i;
        out[1] = (loss - u[0] * i) / conductance;
    }
};

void stamp(const PartValues& p, PartStamp& s) {
    const double t_k = p.temperature_k;
    // Conduction and the slope of radiation at T together: positive even for a filament that only radiates.
    const double conductance = p[conduction] + 4 * p[radiation] * t_k * t_k * t_k;
    thermal_resistor(s, p[heat_capacity], conductance, t_k,
                     law_of(Filament{p[cold_resistance], p[exponent], t_k, conductance, p[conduction], p[radiation]}));
}

std::string check(const PartValues& p) {
    return p[conduction] > 0 || p[radiation] > 0
               ? ""
               : "conduction and radiation are both zero: the filament would never cool";
}

} // namespace

const PartKind lamp_kind{
    .name = "lamp",
    .title = "lamp",
    .ref_prefix = "LA",
    .terminals = {{"a", "left end"}, {"b", "right end"}},
    .parameters = {{.name = "cold_resistance",
                    .unit = "Ω",
                    .required = true,
                    .range = Range::positive,
                    .help = "Resistance of the filament at the ambient temperature."},
                   {.name = "exponent",
                    .unit = "",
                    .fallback = 1.2,
                    .range = Range::not_negative,
                    .help = "Resistance follows absolute temperature to this power; tungsten 1.2."},
                   {.name = "heat_capacity",
                    .unit = "J/K",
                    .required = true,
                    .range = Range::positive,
                    .help = "Heat the filament takes per kelvin: with the losses it sets the thermal lag."},
                   {.name = "conduction",
                    .unit = "W/K",
                    .required = true,
                    .range = Range::not_negative,
                    .help = "Heat lost per kelvin through leads and gas."},
                   {.name = "radiation",
                    .unit = "W/K⁴",
                    .fallback = 0,
                    .range = Range::not_negative,
                    .help = "Heat radiated per fourth power of temperature."}},
    .check = check,
    .stamp = stamp,
};

} // namespace sinewright
