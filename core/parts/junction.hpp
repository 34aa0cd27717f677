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

/// Wires a junction law (control v_j, current and stored charge anode → cathode) with its constant capacitance behind
/// its series resistance, which carries the whole current: v_j = v_ak − i·Rs.
inline void stamp_junction(PartStamp& s, LawPtr law, double series_ohm, double capacitance_f) {
    int anode = s.net(0);
    const int cathode = s.net(1);
    if (series_ohm > 0) {
        const int inner = s.internal_voltage("junction");
        s.conductance(anode, inner, 1 / series_ohm);
        anode = inner;
    }
    s.nonlinear(std::move(law), {{{anode, 1}, {cathode, -1}}}, {{{anode, 1}, {cathode, -1}}});
    s.tie(Tie::conducts, anode, cathode);
    if (capacitance_f > 0) s.capacitance(anode, cathode, capacitance_f);
}

} // namespace sinewright
