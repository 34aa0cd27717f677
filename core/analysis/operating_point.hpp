#pragma once
/// DC operating point: f(x) = 0. An oscillator's is an unstable equilibrium, which is fine for Newton.
#include "core/circuit/circuit.hpp"
#include <stop_token>

namespace sinewright {

struct OperatingPointOptions {
    int max_iterations = 100;          ///< Newton steps per continuation stage
    double relative_tolerance = 1e-12; ///< last step against each unknown's size
    int max_states = 5;                ///< how many DC states to look for
};

struct OperatingPoint {
    Vector x;            ///< closed circuit's unknowns
    int iterations = 0;  ///< Newton steps in all
    double residual = 0; ///< largest |f| scaled by each row's size
    std::string method;  ///< "Newton", "source stepping", "conductance stepping", "pseudo-transient"
    /// Further DC states, where the loop can latch; x is the one nearest power-up (all sources rising from zero).
    std::vector<Vector> others;
};

/// Newton with exact Jacobian and junction step limits; then source stepping, conductance stepping to gnd and
/// pseudo-transient continuation. Further states by deflation (Brown & Gearhart 1971; Farrell, Birkisson, Funke 2015)
/// and from starts at the swing limits.
/// @error singular_pencil naming the unknown no equation determines; not_converged naming the worst equation.
Result<OperatingPoint> find_operating_point(const Circuit& circuit, const OperatingPointOptions& options = {},
                                            std::stop_token stop = {});

} // namespace sinewright
