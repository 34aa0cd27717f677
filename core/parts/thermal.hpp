#pragma once
/// Heat balance of lamp and thermistor: heat_capacity·dθ/dt = power − loss, the row divided by the heat conductance so
/// that it reads in kelvin.
#include "core/parts/part_kind.hpp"

namespace sinewright {

/// Newton may try a temperature below zero on its way; resistance laws see at least this.
inline constexpr double lowest_temperature_k = 1;
template <class T> T at_least(const T& theta, double floor) { return value_of(theta) > floor ? theta : T(floor); }

/// Adds the state θ with G and C of its row and the ties; `law` has controls (v_ab, θ) and outputs (current, heat row).
inline void thermal_resistor(PartStamp& s, double heat_capacity, double conductance_w_per_k, double ambient_k,
                             LawPtr law) {
    const int a = s.net(0), b = s.net(1), theta = s.state("temperature", "K", ambient_k, ambient_k);
    s.c(theta, theta, heat_capacity / conductance_w_per_k);
    s.g(theta, theta, 1);
    s.source(theta, ambient_k);
    s.nonlinear(std::move(law), {{{a, 1}, {b, -1}}, {{theta, 1}}}, {{{a, 1}, {b, -1}}, {{theta, 1}}});
    s.tie(Tie::conducts, a, b);
}

} // namespace sinewright
