#include "core/analysis/harmonic_newton.hpp"
#include <cmath>

namespace sinewright {

namespace {

/// A single step changes amplitude by at most e-fold and frequency by at most a quarter: beyond that the linearisation
/// says nothing.
constexpr double largest_log_a_step = 1.0, largest_log_w_step = 0.25;

Vector unknowns_of(const CyclePoint& point) {
    const Eigen::Index n = point.u.size();
    Vector z(n + 3);
    z << point.u, point.log_a, point.log_w, point.excess;
    return z;
}

CyclePoint point_of(const Vector& z) {
    const Eigen::Index n = z.size() - 3;
    return {z.head(n), z[n], z[n + 1], z[n + 2]};
}

Hold unit_hold(const HarmonicBalance& balance, int from_end) {
    Vector d = Vector::Zero(balance.packed() + 3);
    d[d.size() - from_end] = 1;
    return {d};
}

/// Scales rows and columns of the Jacobian and appends the held direction.
Matrix bordered(const HarmonicBalance& balance, const Matrix& jacobian, const Vector& scale, const Vector& direction) {
    const int packed = balance.packed(), equations = balance.equations();
    Matrix m(equations + 1, equations + 1);
    m.topRows(equations) = jacobian * scale.asDiagonal();
    m.topRows(packed) = scale.head(packed).cwiseInverse().asDiagonal() * m.topRows(packed);
    m.row(equations) = direction.transpose();
    return m;
}

double scaled_size(const Vector& residual, const Vector& scale) {
    const Eigen::Index packed = scale.size() - 3;
    const double ports = packed ? residual.head(packed).cwiseQuotient(scale.head(packed)).cwiseAbs().maxCoeff() : 0;
    return std::max(ports, residual.tail(2).cwiseAbs().maxCoeff());
}

double step_limit(const Vector& step) {
    const Eigen::Index n = step.size();
    double limit = 1;
    limit = std::min(limit, largest_log_a_step / std::max(1e-300, std::abs(step[n - 3])));
    return std::min(limit, largest_log_w_step / std::max(1e-300, std::abs(step[n - 2])));
}

} // namespace

Hold Hold::amplitude(const HarmonicBalance& balance) { return unit_hold(balance, 3); }
Hold Hold::excess(const HarmonicBalance& balance) { return unit_hold(balance, 1); }

Vector path_scale(const HarmonicBalance& balance, const CyclePoint& point) {
    Vector scale(balance.packed() + 3);
    scale << balance.scale(point), 1, 1, 1;
    return scale;
}

CyclePoint moved(const CyclePoint& point, const Vector& scale, const Vector& direction, double length) {
    return point_of(unknowns_of(point) + length * scale.cwiseProduct(direction));
}

NewtonResult solve(HarmonicBalance& balance, CyclePoint& point, const Hold& hold, const NewtonLimits& limits,
                   std::stop_token stop) {
    NewtonResult result;
    Vector residual;
    Matrix jacobian;
    Vector scale = path_scale(balance, point);
    if (!balance.evaluate(point, residual, &jacobian)) return result;
    result.residual = scaled_size(residual, scale);
    Eigen::PartialPivLU<Matrix> lu;
    while (result.iterations < limits.max_iterations && !stop.stop_requested()) {
        ++result.iterations;
        Vector right = Vector::Zero(balance.equations() + 1);
        right.head(balance.packed()) = -residual.head(balance.packed()).cwiseQuotient(scale.head(balance.packed()));
        right.segment(balance.packed(), 2) = -residual.tail(2);
        lu.compute(bordered(balance, jacobian, scale, hold.direction));
        const Vector step = lu.solve(right);
        if (!step.allFinite()) return result;
        result.step = step.cwiseAbs().maxCoeff();
        double length = step_limit(step);
        CyclePoint next = moved(point, scale, step, length);
        bool finite = balance.evaluate(next, residual, &jacobian);
        for (int h = 0; h < limits.halvings && (!finite || scaled_size(residual, scale) > 1.1 * result.residual); ++h) {
            length /= 2;
            next = moved(point, scale, step, length);
            finite = balance.evaluate(next, residual, &jacobian);
        }
        if (!finite) return result;
        point = std::move(next);
        if (result.step < limits.tolerance) {
            result.residual = scaled_size(residual, scale);
            result.converged = true;
            return result;
        }
        if (result.step > 1e6) return result;
        scale = path_scale(balance, point);
        result.residual = scaled_size(residual, scale);
    }
    return result;
}

bool tangent_of(HarmonicBalance& balance, const CyclePoint& point, const Vector& scale, const Vector& previous,
                Vector& tangent) {
    Vector residual;
    Matrix jacobian;
    if (!balance.evaluate(point, residual, &jacobian)) return false;
    Vector right = Vector::Zero(balance.equations() + 1);
    right[balance.equations()] = 1;
    tangent = bordered(balance, jacobian, scale, previous).partialPivLu().solve(right);
    const double length = tangent.norm();
    if (!std::isfinite(length) || length == 0) return false;
    tangent /= length;
    return true;
}

} // namespace sinewright
