#pragma once
/// The amplitude map: what the loop makes up at each amplitude, from the Barkhausen point (or the right-most pair of
/// natural frequencies) at vanishing amplitude through the steady states.
#include "core/analysis/harmonic_newton.hpp"
#include <optional>

namespace sinewright {

struct AmplitudePoint {
    double amplitude_v = 0; ///< peak of the fundamental at the observed unknown
    double frequency_hz = 0;
    std::optional<double> loop_gain;    ///< 1/κ of the opened cut: above 1 the amplitude grows
    std::optional<double> growth_per_s; ///< of the envelope, where the map was traced without a cut
};

struct AmplitudeMap {
    std::vector<AmplitudePoint> points; ///< in order of tracing; amplitude may turn back (hysteresis)
    std::string stopped;                ///< why tracing ended, in words
};

/// Start of a map: a mode of the circuit at rest.
struct SmallSignalStart {
    double w_rad_per_s = 0;
    double gain = 1;         ///< κ, for maps at a cut
    double growth_per_s = 0; ///< σ, for maps without
};

struct MapLimits {
    int most_points = 250;
    double longest_step = 0.7;         ///< in scaled arclength; 1 is e-fold in amplitude
    int first_harmonics = 9;           ///< K to begin with; doubled where the waveform needs it
    int most_harmonics = 36;           ///< while tracing; solutions are refined afterwards
    double beyond_solution = 0.35;     ///< |excess| at which tracing past a solution ends (3 dB)
    double beyond_log_amplitude = 1.5; ///< e-folds of amplitude, likewise
    double farthest_excess = 12;       ///< |excess| at which tracing is given up
    double largest_log_growth = 30;    ///< e-folds of amplitude, likewise
};

struct TracedMap {
    AmplitudeMap map;
    std::vector<CyclePoint> solutions; ///< where the excess passes zero, in order
    std::vector<int> harmonics;        ///< K each was found with
    int iterations = 0;
};

/// Follows the map by pseudo-arclength continuation from small amplitude. Folds, clamps and servo walls are passed
/// because every unknown counts in the arclength at its own size.
/// @return nothing when the small-signal mode can't be met.
std::optional<TracedMap> trace_amplitude_map(HarmonicBalance& balance, HarmonicLinear& linear,
                                             const SmallSignalStart& start, int preferred, const MapLimits& limits,
                                             std::stop_token stop);

} // namespace sinewright
