#include "core/parts/kinds.hpp"
#include "core/parts/thermal.hpp"

namespace sinewright {

namespace {

enum { resistance_25, beta, heat_capacity, dissipation };

/// R = R25·exp(B·(1/θ − 1/298.15)); heat_capacity·dθ/dt = v·i − dissipation·(θ − T)
struct Bead {
    static constexpr int controls = 2, outputs = 2;
    static constexpr bool stores_charge = false;
    double r25_ohm, b_k, dissipation_w_per_k;
    template <class T> void operator()(const std::array<T, 2>& u, std::array<T, 2>& out, std::array<T, 2>&) const {
        const T theta = at_least(u[1], lowest_temperature_k);
        const T i = u[0] / (r25_ohm * limited_exp(T(b_k * (1.0 / theta - 1 / 298.15))));
        out[0] = i;
        out[1] = -(u[0] * i) / dissipation_w_per_k;
    }
};

void stamp(const PartValues& p, PartStamp& s) {
    thermal_resistor(s, p[heat_capacity], p[dissipation], p.temperature_k,
                     law_of(Bead{p[resistance_25], p[beta], p[dissipation]}));
}

} // namespace

const PartKind thermistor_kind{
    .name = "thermistor",
    .title = "thermistor bead",
    .ref_prefix = "TH",
    .terminals = {{"a", "left end"}, {"b", "right end"}},
    .parameters = {{.name = "resistance_25",
                    .unit = "Ω",
                    .required = true,
                    .range = Range::positive,
                    .help = "Resistance at 25 °C with no power in it."},
                   {.name = "beta",
                    .unit = "K",
                    .required = true,
                    .range = Range::positive,
                    .help = "Material constant B: how steeply the resistance falls with temperature."},
                   {.name = "heat_capacity",
                    .unit = "J/K",
                    .required = true,
                    .range = Range::positive,
                    .help = "Heat the bead takes per kelvin."},
                   {.name = "dissipation",
                    .unit = "W/K",
                    .required = true,
                    .range = Range::positive,
                    .help = "Power that warms the bead by one kelvin."}},
    .stamp = stamp,
};

} // namespace sinewright
