#pragma once
/// The periodic steady state of an oscillator: frequency, harmonics of every net, distortion, and whether it holds.
///
/// What it answers: where the loop rests, how clean it is there, how its envelope settles.
/// How: harmonic balance with the frequency as an unknown (harmonic_balance.hpp), started from the amplitude map
/// (amplitude_map.hpp); the envelope's exponents by the monodromy of the periodic solution (floquet.hpp).
/// Sources: Nakhla & Vlach 1976; Kundert & Sangiovanni-Vincentelli 1986; Ngoya et al. 1995; Keller 1977.
#include "core/analysis/amplitude_map.hpp"
#include "core/analysis/floquet.hpp"
#include "core/analysis/loop_gain.hpp"

namespace sinewright {

struct SteadyStateOptions {
    /// Harmonics are added until those left out are below this part of the output's fundamental in every net
    /// (0 < tail). Smaller costs harmonics where limiting is sharp.
    double tail = 1e-10;
    int most_harmonics = 400; ///< K is capped here; laws with corners reach it, and the tail is then extrapolated
    MapLimits map;
};

/// What is asked. All references must outlive the call.
struct OscillatorLoop {
    const Circuit& closed;
    const Circuit* opened = nullptr;          ///< at the cut; null: the map is traced by growth rate
    const Vector& rest;                       ///< operating point of the closed circuit
    std::vector<Complex> natural_frequencies; ///< rad/s, right-most first
    std::optional<BarkhausenPoint> barkhausen;
    std::vector<Crossing> crossings;
    int output = 0; ///< index of the net whose amplitude is reported
};

struct Harmonic {
    int order = 0;
    double peak_v = 0;
    double phase_deg = 0; ///< as cosine, relative to order × phase of the fundamental
};

/// Another periodic solution of the same circuit.
struct OtherState {
    double frequency_hz = 0, amplitude_v = 0;
    std::optional<bool> stable;
};

struct SteadyState {
    double frequency_hz = 0;
    double amplitude_v = 0; ///< peak of the fundamental at the output
    double dc_v = 0, rms_v = 0;
    double thd_ratio = 0, thd_db = 0;
    std::vector<Harmonic> harmonics; ///< at the output, from order 1
    Eigen::MatrixXcd spectrum;       ///< (K + 1)×n: peak phasors of every unknown of the closed circuit, DC in row 0;
                                     ///< time zero is the output's fundamental at its peak
    std::optional<EnvelopeModes> envelope;
    std::string envelope_reason; ///< why there is none
    std::vector<OtherState> others;
    bool needs_kick = false; ///< small signals die out; only a larger start reaches this state
    AmplitudeMap map;

    std::string method;           ///< how it was reached, in words
    int iterations = 0;           ///< Newton steps in all, map included
    int highest = 0, samples = 0; ///< K and N
    double residual = 0;          ///< of the last iterate, relative to each quantity's size
    double left_out = 0;          ///< largest harmonic beyond K in any net, part of the fundamental
    double aliasing = 0;          ///< largest change of any net's harmonic with twice the samples, likewise
    std::string accuracy_note;    ///< empty when the wanted tail was reached

    std::vector<Harmonic> harmonics_of(int unknown) const;
};

/// @return the state reached from small amplitude where there is one, else one that needs a kick.
/// @error not_converged: no periodic solution found, saying what range of amplitudes was searched and how.
/// Use: auto rest = find_steady_state({closed, &opened, x, roots, point, crossings, closed.net("out")});
Result<SteadyState> find_steady_state(const OscillatorLoop& loop, const SteadyStateOptions& options = {},
                                      const SteadyState* previous = nullptr, std::stop_token stop = {});

} // namespace sinewright
