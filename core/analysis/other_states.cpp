/// Where a latching circuit ends up.
#include "core/analysis/natural_frequencies.hpp"
#include "core/analysis/newton.hpp"
#include <cmath>

namespace sinewright {

namespace {

/// Mode of a real root s: v with (G + sC)v ≈ 0, by inverse iteration a little beside the root.
Vector mode_of(const Pencil& pencil, double s) {
    const Eigen::PartialPivLU<Matrix> lu(pencil.G + s * (1 + 1e-7) * pencil.C);
    Vector v = Vector::Ones(pencil.size());
    for (int round = 0; round < 4; ++round) v = lu.solve(pencil.C * v).normalized();
    return v;
}

/// Follows q(x)′ + f(x) = 0 from x until it rests. False when it does not come to rest within the steps allowed.
bool follow_to_rest(const Circuit& circuit, NewtonSolver& solver, Vector& x, double first_step_s) {
    double step_s = first_step_s;
    Vector q_from, q;
    Matrix slope(circuit.size(), circuit.size());
    for (int round = 0; round < 600; ++round) {
        evaluate_charge(circuit, x, q_from, nullptr);
        const AddedTerms charge = [&](const Vector& at, Vector& f, Matrix* jacobian) {
            evaluate_charge(circuit, at, q, jacobian ? &slope : nullptr);
            f += (q - q_from) / step_s;
            if (jacobian) *jacobian += slope / step_s;
        };
        Vector trial = x;
        const NewtonEnd end = solver.solve(trial, charge);
        if (end == NewtonEnd::cancelled) return false;
        if (end != NewtonEnd::converged) {
            step_s /= 4;
            if (step_s < 1e-9 * first_step_s) return false;
            continue;
        }
        x = trial;
        step_s *= 1.5;
        if (step_s > 1e9 * first_step_s) return true;
    }
    return false;
}

bool same_state(const Circuit& circuit, const Vector& a, const Vector& b) {
    for (int k = 0; k < circuit.size(); ++k)
        if (std::abs(a[k] - b[k]) > 1e-6 * std::max({std::abs(a[k]), std::abs(b[k]), circuit.unknowns[k].typical}))
            return false;
    return true;
}

} // namespace

std::vector<Vector> find_other_states(const Circuit& circuit, const Vector& x, const OperatingPointOptions& options,
                                      std::stop_token stop) {
    std::vector<Vector> states;
    const Pencil pencil = linearise(circuit, x);
    const auto roots = natural_frequencies(pencil);
    if (!roots) return states;
    NewtonSolver solver(circuit, options, stop);
    for (const Complex root : *roots) {
        if (!(root.real() > 0) || root.imag() != 0) continue;
        const Vector mode = mode_of(pencil, root.real());
        for (const double side : {1.0, -1.0}) {
            Vector reached = x + side * 1e-3 / mode.cwiseAbs().maxCoeff() * mode;
            if (!follow_to_rest(circuit, solver, reached, 0.1 / root.real())) continue;
            if (solver.solve(reached) != NewtonEnd::converged || same_state(circuit, reached, x)) continue;
            bool known = false;
            for (const Vector& state : states) known = known || same_state(circuit, reached, state);
            if (!known) states.push_back(reached);
        }
    }
    return states;
}

} // namespace sinewright
