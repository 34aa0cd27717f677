#pragma once
/// DC operating point: f(x) = 0. An oscillator's is an unstable equilibrium, which is fine for Newton.
#include "core/circuit/circuit.hpp"
#include <memory>
#include <stop_token>

namespace sinewright {

struct OperatingPointOptions {
    int max_iterations = 100;          ///< Newton steps before and after a continuation
    double relative_tolerance = 1e-12; ///< last step of each unknown against its size (or typical size, if larger)
    int max_states = 5;                ///< of find_other_states: how many to know, the given one included
};

struct OperatingPoint {
    Vector x;                   ///< closed circuit's unknowns
    int iterations = 0;         ///< Newton steps in all
    double last_step = 0;       ///< largest relative step of the last iteration
    std::string method;         ///< "Newton", "source stepping", "conductance stepping", "pseudo-transient"
    std::vector<Vector> others; ///< further DC states, where they were looked for and found
};

/// Newton with exact Jacobian, each law linearised at control values that keep it near its linear prediction; where
/// that fails source stepping, conductance stepping to gnd, pseudo-transient continuation, each from `start`.
/// @error singular_pencil naming the unknown no equation determines; not_converged naming the worst equation and what
///        was tried; cancelled.
/// Use: auto rest = find_operating_point(circuit); rest->x[circuit.net("out")]
Result<OperatingPoint> find_operating_point(const Circuit& circuit, const OperatingPointOptions& options = {},
                                            std::stop_token stop = {});

/// The same for many circuits, one after another: keeps its workspaces, so that equal sizes cost no new matrices.
/// One object a thread.
class OperatingPointSolver {
  public:
    OperatingPointSolver();
    ~OperatingPointSolver();
    OperatingPointSolver(OperatingPointSolver&&) noexcept;
    OperatingPointSolver& operator=(OperatingPointSolver&&) noexcept;

    /// As find_operating_point.
    Result<OperatingPoint> solve(const Circuit& circuit, const OperatingPointOptions& options = {},
                                 std::stop_token stop = {});
    /// From a neighbouring solution (size n); falls back to power-up when it leads nowhere.
    Result<OperatingPoint> solve_from(const Circuit& circuit, const Vector& start,
                                      const OperatingPointOptions& options = {}, std::stop_token stop = {});

  private:
    struct Workspace;
    std::unique_ptr<Workspace> workspace_;
};

/// The DC states a latching circuit leaves `x` for: it is nudged both ways along its growing real modes and followed in
/// time (implicit Euler, growing steps) until it rests; then Newton with the known states deflated looks for more
/// (Brown & Gearhart 1971; Farrell, Birkisson & Funke 2015). Each is refined by Newton; states equal to x or to each
/// other are dropped. Empty when there are none, none was found, or the search was stopped.
/// Worth asking when a real natural frequency at x lies in the right half plane. Cost: some hundred LU of size n.
std::vector<Vector> find_other_states(const Circuit& circuit, const Vector& x,
                                      const OperatingPointOptions& options = {}, std::stop_token stop = {});

} // namespace sinewright
