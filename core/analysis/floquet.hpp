#pragma once
/// The envelope of a periodic solution: Floquet exponents λ of perturbations e^{λt}·periodic.
#include "core/analysis/harmonic_ports.hpp"
#include <complex>
#include <optional>
#include <stop_token>

namespace sinewright {

using Complex = std::complex<double>;

enum class EnvelopeManner {
    settles, ///< all exponents real or damped well
    bounces, ///< the slowest exponents are a pair with a damping ratio below 0.3: overshoot above a third
    squegs   ///< unstable: the envelope leaves this solution
};

struct EnvelopeModes {
    /// 1/s, without the zero one (phase), right-most first, |Im| ≤ π·frequency; exponents faster than 20 × frequency
    /// are left out.
    std::vector<Complex> exponents;
    bool stable = false; ///< none in the right half plane
    EnvelopeManner manner = EnvelopeManner::settles;
    std::optional<double> damping_ratio; ///< of the slowest exponent when it is one of a pair
    std::optional<double> settling_1_percent_s, settling_0_1_percent_s; ///< ln 100 and ln 1000 over its decay rate;
                                                                        ///< nothing when unstable
    double phase_error_per_s = 0; ///< how far the exponent that must be zero is from it: the accuracy of all
    int steps = 0;                ///< per period
};

/// Integrates the variational equation d/dt[(C + B c(t) Aᵀ) y] + (G + B g(t) Aᵀ) y = 0 over one period with the
/// three-stage Radau IIA method (order 5; Hairer & Wanner II, IV.8, suits algebraic unknowns of index 2) and takes the
/// eigenvalues of the map of charges. Steps are doubled until the phase exponent is zero to `tolerance` of the slowest
/// other one and all have settled to ten times that (so to about a third of it, at order 5).
/// The phase's own perturbation C ẋ is known and taken out before the eigenvalues are formed.
/// @param ports     of the closed circuit.
/// @param unknowns  (K + 1)×n: harmonics of all unknowns, deviations from rest.
/// @return nothing when a step can't be solved or the caller asked to stop.
std::optional<EnvelopeModes> envelope_modes(const Ports& ports, const Eigen::MatrixXcd& unknowns, double w_rad_per_s,
                                            double tolerance = 1e-6, std::stop_token stop = {});

} // namespace sinewright
