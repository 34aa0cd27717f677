#pragma once
/// Newton's method and path following (pseudo-arclength, Keller 1977) on the harmonic balance.
#include "core/analysis/harmonic_balance.hpp"
#include <stop_token>

namespace sinewright {

/// Sizes that make the unknowns [u, ln a, ln ω, excess] comparable.
Vector path_scale(const HarmonicBalance& balance, const CyclePoint& point);

struct NewtonResult {
    bool converged = false;
    int iterations = 0;
    double residual = 0; ///< largest, each port relative to its own size
    double step = 0;     ///< last step, likewise
};

/// What is held while the equations (one fewer than unknowns) are solved: a direction d in scaled unknowns along which
/// the point must not move.
struct Hold {
    Vector direction;
    static Hold amplitude(const HarmonicBalance& balance);
    static Hold excess(const HarmonicBalance& balance);
};

struct NewtonLimits {
    int max_iterations = 12;
    /// Last step relative to each unknown's size. Newton converges quadratically: what remains is its square.
    double tolerance = 1e-9;
    /// Halvings of a step that does not reduce the residual; 0 takes every step whole.
    int halvings = 0;
};

NewtonResult solve(HarmonicBalance& balance, CyclePoint& point, const Hold& hold, const NewtonLimits& limits,
                   std::stop_token stop = {});

/// Unit tangent of the path in scaled unknowns, oriented along `previous`.
/// @return false when the Jacobian has lost rank by more than one there.
bool tangent_of(HarmonicBalance& balance, const CyclePoint& point, const Vector& scale, const Vector& previous,
                Vector& tangent);

/// point + length·(scale ∘ direction)
CyclePoint moved(const CyclePoint& point, const Vector& scale, const Vector& direction, double length);

} // namespace sinewright
