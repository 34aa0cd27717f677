#pragma once
/// Half-wave symmetry: x(t + T/2) = S x(t) about the rest, with a sign for each unknown.
#include "core/analysis/harmonic_ports.hpp"
#include <algorithm>

namespace sinewright {

/// A port of sign −1 has odd harmonics only, one of sign +1 even ones only (DC among them).
struct HalfWave {
    bool holds = false;
    std::vector<int> control, output; ///< ±1 each; empty when it does not hold

    bool allows(int port, int harmonic) const { return !holds || (harmonic % 2 == 0) == (control[port] > 0); }
    bool all_odd() const { return holds && std::find(output.begin(), output.end(), 1) == output.end(); }
};

/// Detects it: unknowns that G and C tie together share a sign; every assignment of signs to the pieces in which the
/// observed unknown is odd is tried against the elements themselves, over many sizes of deviation.
/// An antiparallel pair, a filament (even) in an odd loop, a servo (even) are found; an offset, a single diode or
/// unequal swing limits are told apart, down to a part in 10¹² of the element's response.
/// @param joined_a, joined_b  two unknowns that are joined (an opened cut's sides); −1: none.
HalfWave find_half_wave_symmetry(const Ports& ports, int observed, int joined_a = -1, int joined_b = -1);

} // namespace sinewright
