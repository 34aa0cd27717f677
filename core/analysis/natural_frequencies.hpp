#pragma once
/// Natural frequencies of a linearised circuit and what they say about start-up.
#include "core/circuit/circuit.hpp"
#include <complex>
#include <optional>
#include <span>

namespace sinewright {

using Complex = std::complex<double>;

/// Natural frequencies: all finite s with det(G + sC) = 0.
///
/// @param pencil  G [n×n] and C [n×n]; n up to a few hundred; cost O(n³).
/// @param names   of the unknowns, for the fault; may be empty.
/// @return roots in rad/s, right-most first; complex ones as conjugate pairs next to each other, upper one first.
/// @error  singular_pencil when det(G + sC) vanishes for every s.
/// How: equilibrate; deflate infinite roots by orthogonal row and column compression of C's nullspace until C is
/// regular (any index); shift-invert and real Schur form (Golub & Van Loan ch. 7); polish the right-most root by Newton
/// on the bordered system. Use: for (Complex s : *natural_frequencies(linearise(circuit, rest.x))) plot(s);
Result<std::vector<Complex>> natural_frequencies(const Pencil& pencil, std::span<const std::string> names = {});

enum class Outcome { starts, decays, latches };

struct SmallSignal {
    Outcome outcome = Outcome::decays;
    std::optional<double> frequency_hz; ///< of the right-most complex pair
    std::string frequency_reason;       ///< why there is none
    std::optional<double>
        growth_per_s; ///< real part of the right-most complex pair; of the right-most root without one
    std::optional<double> growth_per_cycle;
    std::vector<Complex> natural_frequencies; ///< rad/s, right-most first
    int right_half_plane = 0;                 ///< how many lie there
    int right_half_plane_real = 0;
};

/// Outcome by the contract: `latches` for an odd number of real roots in the right half plane; else `starts` for any
/// root there; else `decays`.
SmallSignal judge_start(std::vector<Complex> natural_frequencies);

} // namespace sinewright
