#pragma once
/// DC operating point: f(x) = 0. An oscillator's is an unstable equilibrium, which is fine for Newton.
#include "core/circuit/circuit.hpp"
#include <stop_token>

namespace sinewright {

struct OperatingPointOptions {
    int max_iterations = 60;           ///< Newton steps per stage of a continuation
    double relative_tolerance = 1e-12; ///< last step of each unknown against its size (or typical size, if larger)
};

struct OperatingPoint {
    Vector x;                   ///< closed circuit's unknowns
    int iterations = 0;         ///< Newton steps in all
    double last_step = 0;       ///< largest relative step of the last iteration
    std::string method;         ///< "Newton", "source stepping", "conductance stepping", "pseudo-transient"
    std::vector<Vector> others; ///< further DC states, where they were looked for and found
};

/// Newton with exact Jacobian, accepted by natural monotonicity (Deuflhard, Newton Methods for Nonlinear Problems,
/// 2004); where that fails source stepping, conductance stepping to gnd, pseudo-transient continuation, each from
/// `start`.
/// @error singular_pencil naming the unknown no equation determines; not_converged naming the worst equation and what
///        was tried; cancelled.
/// Use: auto rest = find_operating_point(circuit); rest->x[circuit.net("out")]
Result<OperatingPoint> find_operating_point(const Circuit& circuit, const OperatingPointOptions& options = {},
                                            std::stop_token stop = {});

/// The DC states a latching circuit leaves `x` for: it is nudged both ways along its growing real modes and followed in
/// time (implicit Euler, growing steps) until it rests; each rest is refined by Newton. States equal to x or to each
/// other are dropped. Empty when x is not left or nothing rests.
std::vector<Vector> find_other_states(const Circuit& circuit, const Vector& x,
                                      const OperatingPointOptions& options = {}, std::stop_token stop = {});

} // namespace sinewright
