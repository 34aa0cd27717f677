#include "core/analysis/newton.hpp"
#include <cmath>

namespace sinewright {

namespace {

/// Pivots below this part of the largest, after scaling rows to one and columns to typical sizes, are checked more
/// closely: an op-amp of gain 1e5 between gigohms and ohms still lies above.
constexpr double suspicious_pivot = 1e-11;
/// Smallest singular value over largest at which an unknown counts as undetermined.
constexpr double singular_ratio = 1e-17;

} // namespace

NewtonSolver::NewtonSolver(const Circuit& circuit, const OperatingPointOptions& options, std::stop_token stop)
    : circuit_(circuit), options_(options), stop_(std::move(stop)), typical_(circuit.size()) {
    for (int k = 0; k < circuit.size(); ++k) typical_[k] = circuit.unknowns[k].typical;
}

void NewtonSolver::evaluate(const Vector& x, Vector& f, Matrix* jacobian, const AddedTerms& extra) {
    evaluate_static(circuit_, x, f, jacobian);
    if (extra) extra(x, f, jacobian);
}

bool NewtonSolver::factorise() {
    jacobian_ = jacobian_ * typical_.asDiagonal();
    row_scale_ = jacobian_.cwiseAbs().rowwise().maxCoeff().unaryExpr([](double r) { return r > 0 ? 1 / r : 1; });
    jacobian_ = row_scale_.asDiagonal() * jacobian_;
    if (!jacobian_.allFinite()) return false;
    lu_.compute(jacobian_);
    const auto pivots = lu_.matrixLU().diagonal().cwiseAbs();
    if (pivots.minCoeff() > suspicious_pivot * pivots.maxCoeff()) return true;
    // Rare: look again without trusting one elimination order. Columns in their own scale first.
    const Vector columns =
        jacobian_.cwiseAbs().colwise().maxCoeff().transpose().unaryExpr([](double c) { return c > 0 ? 1 / c : 1; });
    Eigen::FullPivLU<Matrix> full(jacobian_ * columns.asDiagonal());
    full.setThreshold(singular_ratio * 1e3 * circuit_.size());
    if (full.isInvertible()) return true;
    full.kernel().col(0).cwiseAbs().maxCoeff(&undetermined_);
    return false;
}

double NewtonSolver::size_of_step(const Vector& step, const Vector& x) const {
    double size = 0;
    for (int k = 0; k < circuit_.size(); ++k)
        size = std::max(size, std::abs(step[k]) / std::max(std::abs(x[k]), typical_[k]));
    return std::isfinite(size) ? size : INFINITY;
}

double NewtonSolver::junction_limit(const Vector& step) const {
    double factor = 1;
    for (const Element& element : circuit_.elements)
        for (int c = 0; c < element.law->controls(); ++c) {
            const double scale = element.law->limiting_scale_v(c);
            if (!(scale > 0)) continue;
            double change = 0;
            for (const auto& [index, weight] : element.controls[c]) change += weight * step[index];
            const double allowed = scale * (2 + std::log1p(std::abs(change) / scale));
            if (std::abs(change) > allowed) factor = std::min(factor, allowed / std::abs(change));
        }
    return factor;
}

bool NewtonSolver::step_once(Vector& x, const AddedTerms& extra) {
    const double full_size = size_of_step(step_, x);
    const double limited = junction_limit(step_);
    double t = 1;
    for (int attempt = 0; attempt < 24; ++attempt) {
        trial_ = x + t * step_;
        evaluate(trial_, f_trial_, nullptr, extra);
        // Natural monotonicity: the next correction with the present Jacobian must be shorter.
        const Vector next = typical_.cwiseProduct(lu_.solve(row_scale_.cwiseProduct(f_trial_)));
        if (size_of_step(next, x) <= (1 - t / 4) * full_size) {
            x = trial_;
            last_step_ = t * full_size;
            return true;
        }
        t = t == 1 && limited < 0.5 ? limited : t / 2;
    }
    return false;
}

NewtonEnd NewtonSolver::solve(Vector& x, const AddedTerms& extra) {
    jacobian_.resize(circuit_.size(), circuit_.size());
    for (int round = 0; round < options_.max_iterations; ++round) {
        if (stop_.stop_requested()) return NewtonEnd::cancelled;
        evaluate(x, f_, &jacobian_, extra);
        if (!f_.allFinite()) return NewtonEnd::stuck;
        if (!factorise()) return NewtonEnd::singular;
        ++iterations_;
        step_ = -typical_.cwiseProduct(lu_.solve(row_scale_.cwiseProduct(f_)));
        const double size = size_of_step(step_, x);
        if (size <= options_.relative_tolerance) {
            x += step_;
            last_step_ = size;
            return NewtonEnd::converged;
        }
        if (!step_once(x, extra)) {
            // Rounding in f, not the path, may be what is left of the step.
            if (size < 1e-9) {
                last_step_ = size;
                return NewtonEnd::converged;
            }
            row_scale_.cwiseProduct(f_).cwiseAbs().maxCoeff(&worst_);
            return NewtonEnd::stuck;
        }
    }
    row_scale_.cwiseProduct(f_).cwiseAbs().maxCoeff(&worst_);
    return NewtonEnd::stuck;
}

} // namespace sinewright
