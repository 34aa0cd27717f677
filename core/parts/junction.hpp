#pragma once
/// The junction shared by diode, zener and LED.
#include "core/parts/law.hpp"
#include "core/parts/part_kind.hpp"

namespace sinewright {

inline constexpr double boltzmann_j_per_k = 1.380649e-23;      ///< exact, SI 2019
inline constexpr double elementary_charge_c = 1.602176634e-19; ///< exact, SI 2019
inline double thermal_voltage_v(double temperature_k) {
    return boltzmann_j_per_k * temperature_k / elementary_charge_c;
}

/// i = Is·(exp(v/(n·kT/q)) − 1). Source: Shockley 1949.
struct Junction {
    double saturation_current_a, scale_v; ///< scale: n·kT/q
    template <class T> T current(const T& v) const {
        return saturation_current_a * (limited_exp(T(v / scale_v)) - 1.0);
    }
};

/// Is·(T/298.15)^(3/n)·exp((Eg·q/(n·k))·(1/298.15 − 1/T)), so that the forward drop falls about 2 mV/K.
inline double saturation_current_at(double at_25_c_a, double ideality, double bandgap_ev, double temperature_k) {
    const double steepness_k = bandgap_ev * elementary_charge_c / (ideality * boltzmann_j_per_k);
    return at_25_c_a * std::pow(temperature_k / 298.15, 3 / ideality) *
           std::exp(steepness_k * (1 / 298.15 - 1 / temperature_k));
}

/// Nets of a junction behind its series resistance: an inner node when there is any.
inline int behind_resistance(PartStamp& s, int anode, double series_ohm) {
    if (!(series_ohm > 0)) return anode;
    const int inner = s.internal_voltage("junction");
    s.conductance(anode, inner, 1 / series_ohm);
    return inner;
}

} // namespace sinewright
