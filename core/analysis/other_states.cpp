#include "core/analysis/natural_frequencies.hpp"
#include "core/analysis/newton.hpp"
#include "core/analysis/operating_point.hpp"
#include <Eigen/LU>
#include <algorithm>
#include <cmath>

namespace sinewright {
namespace {

/// Two states are one when no unknown differs by more than this share of its usual size.
constexpr double same_state = 1e-5;
/// First push off an unstable state, as a share of the unknowns' usual size: small enough to stay linear.
constexpr double first_push = 1e-3;
/// Step of the slide against the time constant of the instability; implicit Euler with a step above one would run back.
constexpr double slide_step = 0.2;
constexpr int slide_steps = 600;
/// Moves within one step, as shares of each unknown's size: shorter ones let the step grow, longer ones are taken in
/// halves, and a run of the shortest under ever longer steps is rest.
constexpr double short_move = 0.1, long_move = 0.5, no_move = 1e-3;
constexpr int step_iterations = 30;
constexpr double step_tolerance = 1e-6;

class StateSearch {
  public:
    StateSearch(const Circuit& circuit, const Vector& x, const OperatingPointOptions& options, std::stop_token stop)
        : circuit_(circuit), options_(options), stop_(std::move(stop)), known_{x}, typical_(circuit.size()) {
        for (int k = 0; k < circuit.size(); ++k) typical_[k] = circuit.unknowns[k].typical;
        newton_.prepare(circuit);
    }

    std::vector<Vector> run() {
        for (const auto& [rate_per_s, direction] : real_unstable_directions(known_.front()))
            for (double sign : {1.0, -1.0}) {
                Vector x = known_.front() + sign * direction;
                if (wanted() && slide(x, slide_step / rate_per_s)) polish_and_keep(x);
            }
        const std::size_t slid_to = known_.size();
        for (std::size_t k = 0; k < slid_to; ++k)
            while (wanted() && deflate_from(known_[k])) {
            }
        if (stop_.stop_requested()) return {};
        return {known_.begin() + 1, known_.end()};
    }

  private:
    struct Direction {
        double rate_per_s;
        Vector push;
    };

    bool wanted() const { return static_cast<int>(known_.size()) < options_.max_states && !stop_.stop_requested(); }

    /// Each real root s > 0 of the linearised circuit with its mode, by inverse iteration a little beside the root.
    std::vector<Direction> real_unstable_directions(const Vector& x) const {
        const Pencil pencil = linearise(circuit_, x);
        const auto roots = natural_frequencies(pencil);
        std::vector<Direction> found;
        if (!roots) return found;
        for (const Complex root : *roots) {
            if (root.imag() != 0 || !(root.real() > 0)) continue;
            const Eigen::PartialPivLU<Matrix> lu(pencil.G + root.real() * (1 + 1e-7) * pencil.C);
            Vector mode = Vector::Ones(pencil.size());
            for (int round = 0; round < 4; ++round) mode = lu.solve(pencil.C * mode).normalized();
            mode *= first_push / mode.cwiseAbs().cwiseQuotient(typical_).maxCoeff();
            found.push_back({root.real(), std::move(mode)});
        }
        return found;
    }

    /// Implicit Euler from x until it rests: first in steps short against the instability, then ever longer.
    bool slide(Vector& x, double step_s) {
        Matrix capacitance, extra;
        Vector q, next;
        int resting = 0;
        for (int k = 0; k < slide_steps && !stop_.stop_requested(); ++k) {
            evaluate_charge(circuit_, x, q, &capacitance);
            extra = capacitance / step_s;
            next = x;
            const Modification euler{.extra = &extra, .reference = &x};
            if (newton_.solve(next, euler, step_iterations, step_tolerance, stop_) != NewtonEnd::converged) {
                step_s /= 4;
                continue;
            }
            const double moved = distance(next, x);
            if (moved > long_move) {
                step_s /= 2;
                continue;
            }
            x = next;
            const bool left = distance(x, known_.front()) > 100 * first_push;
            if (left && moved < short_move) step_s *= 1.5;
            resting = left && moved < no_move ? resting + 1 : 0;
            if (resting > 30) return true;
        }
        return false;
    }

    bool deflate_from(const Vector& start) {
        // On a known state itself the deflated step is undefined: start a little beside it.
        Vector x = start + 0.1 * typical_;
        const Modification away{.deflated = &known_};
        const NewtonEnd end = newton_.solve(x, away, options_.max_iterations, step_tolerance, stop_);
        return end == NewtonEnd::converged && polish_and_keep(x);
    }

    bool polish_and_keep(Vector& x) {
        if (newton_.solve(x, {}, options_.max_iterations, options_.relative_tolerance, stop_) != NewtonEnd::converged)
            return false;
        for (const Vector& other : known_)
            if (distance(x, other) < same_state) return false;
        known_.push_back(x);
        return true;
    }

    double distance(const Vector& a, const Vector& b) const {
        return (a - b).cwiseAbs().cwiseQuotient(a.cwiseAbs().cwiseMax(typical_)).maxCoeff();
    }

    const Circuit& circuit_;
    const OperatingPointOptions& options_;
    std::stop_token stop_;
    std::vector<Vector> known_; ///< x first
    Vector typical_;
    LimitedNewton newton_;
};

} // namespace

std::vector<Vector> find_other_states(const Circuit& circuit, const Vector& x, const OperatingPointOptions& options,
                                      std::stop_token stop) {
    return StateSearch(circuit, x, options, std::move(stop)).run();
}

} // namespace sinewright
