#include "core/analysis/natural_frequencies.hpp"
#include "core/analysis/pencil_reduction.hpp"
#include <Eigen/LU>
#include <algorithm>
#include <cmath>
#include <numbers>

namespace sinewright {

namespace {

/// A complex pair whose real part is below this part of its size is on the axis: it grows by less than 1e-8 a cycle.
constexpr double on_axis = 1e-10;
/// A real root this small against the largest one is zero to rounding.
constexpr double zero_root = 1e-13;

/// The unknown that takes the largest part in a solution of (G + sC)x = 0 that exists for every s.
int undetermined_unknown(const Pencil& equilibrated) {
    const Eigen::FullPivLU<Matrix> lu(equilibrated.G + 0.8125 * equilibrated.C);
    int index = 0;
    lu.kernel().col(0).cwiseAbs().maxCoeff(&index);
    return index;
}

Fault singular(const Pencil& equilibrated, std::span<const std::string> names) {
    const int k = undetermined_unknown(equilibrated);
    const std::string name = k < static_cast<int>(names.size()) ? names[k] : "unknown " + std::to_string(k + 1);
    return Fault{FaultKind::singular_pencil, name, "No equation determines " + name + ", at any frequency.",
                 "Check what drives it: two ideal op-amps may act on the same loop, or none on this one."};
}

/// Eigenvalues carry an error relative to the whole matrix; on the full equations each root keeps its own accuracy. A
/// root that runs into another one on the way stays as it was.
void polish_all(const Pencil& equilibrated, std::vector<Complex>& roots) {
    const std::vector<Complex> raw = roots;
    const auto taken = [&](Complex s, std::size_t own) {
        for (std::size_t k = 0; k < own; ++k)
            if (std::abs(roots[k] - s) < 1e-9 * std::abs(s) && std::abs(raw[k] - raw[own]) > 1e-9 * std::abs(s))
                return true;
        return false;
    };
    for (std::size_t k = 0; k < roots.size(); ++k) {
        const bool lower_of_pair = raw[k].imag() < 0 && k > 0 && raw[k - 1] == std::conj(raw[k]);
        const Complex polished = lower_of_pair ? std::conj(roots[k - 1]) : polish_root(equilibrated, raw[k]);
        if (!taken(polished, k)) roots[k] = polished;
    }
}

} // namespace

Result<std::vector<Complex>> natural_frequencies(const Pencil& pencil, std::span<const std::string> names) {
    if (pencil.size() == 0) return std::vector<Complex>{};
    double w0 = 0;
    for (int attempt = 0;; ++attempt) {
        Pencil scaled = pencil;
        const PencilScaling scaling = equilibrate(scaled, w0);
        auto roots = finite_roots(scaled);
        if (!roots) return singular(scaled, names);
        sort_right_most_first(*roots);
        polish_all(scaled, *roots);
        sort_right_most_first(*roots);
        // Once more on the scale of the pair that matters, where the first guess of that scale was far off.
        const double size = scale_of_interest(*roots);
        if (attempt == 0 && poor_scale(size)) {
            w0 = size * scaling.w0_rad_per_s;
            continue;
        }
        for (Complex& s : *roots) s *= scaling.w0_rad_per_s;
        return *roots;
    }
}

SmallSignal judge_start(std::vector<Complex> roots) {
    SmallSignal found;
    double largest = 0;
    for (const Complex s : roots) largest = std::max(largest, std::abs(s));
    const auto pair = std::find_if(roots.begin(), roots.end(), [](Complex s) { return s.imag() > 0; });
    for (const Complex s : roots) {
        const bool real = s.imag() == 0;
        if (s.real() <= (real ? zero_root * largest : on_axis * std::abs(s))) continue;
        ++found.right_half_plane;
        found.right_half_plane_real += real;
    }
    if (found.right_half_plane_real % 2 == 1)
        found.outcome = Outcome::latches;
    else if (found.right_half_plane > 0)
        found.outcome = Outcome::starts;
    else
        found.outcome = Outcome::decays;

    const bool overdriven = found.outcome == Outcome::starts && found.right_half_plane == found.right_half_plane_real;
    if (pair != roots.end()) {
        found.growth_per_s = pair->real();
        found.growth_per_cycle = std::expm1(2 * std::numbers::pi * pair->real() / pair->imag());
        found.frequency_hz = pair->imag() / (2 * std::numbers::pi);
    } else if (!roots.empty()) {
        found.growth_per_s = roots.front().real();
    }
    if (found.outcome == Outcome::latches) {
        found.frequency_hz.reset();
        found.growth_per_cycle.reset();
        found.growth_per_s = roots.front().real();
        found.frequency_reason = "It latches: positive feedback wins at DC, so nothing oscillates.";
    } else if (overdriven) {
        found.frequency_hz.reset();
        found.growth_per_cycle.reset();
        found.growth_per_s = roots.front().real();
        found.frequency_reason = "It starts, but so overdriven that growth is not oscillatory.";
    } else if (pair == roots.end()) {
        found.frequency_reason = roots.empty() ? "The circuit has no natural frequency: nothing in it stores energy."
                                               : "All natural frequencies are real: nothing in it rings.";
    }
    found.natural_frequencies = std::move(roots);
    return found;
}

} // namespace sinewright
