#include "core/analysis/operating_point.hpp"
#include "core/analysis/newton.hpp"
#include <cmath>
#include <optional>

namespace sinewright {

namespace {

Vector power_up(const Circuit& circuit) {
    Vector x(circuit.size());
    for (int k = 0; k < circuit.size(); ++k) x[k] = circuit.unknowns[k].start;
    return x;
}

/// Follows a parameter from 1 to 0 with steps that shrink on failure and grow on success; `extra(p)` is what is added
/// to the equations at p.
template <class Extra> NewtonEnd follow(NewtonSolver& solver, Vector& x, Extra extra) {
    Vector reached = x;
    double p = 1, step = 0.25;
    NewtonEnd end = solver.solve(reached, extra(p));
    if (end != NewtonEnd::converged) return end;
    while (p > 0) {
        if (step < 1e-5) return NewtonEnd::stuck;
        const double next = std::max(0.0, p - step);
        Vector trial = reached;
        end = solver.solve(trial, extra(next));
        if (end == NewtonEnd::cancelled) return end;
        if (end == NewtonEnd::converged) {
            reached = trial, p = next, step *= 2;
        } else {
            step /= 4;
        }
    }
    x = reached;
    return NewtonEnd::converged;
}

/// All sources rise together: f + p·s, so that p = 1 is the circuit without sources.
NewtonEnd step_sources(NewtonSolver& solver, const Circuit& circuit, Vector& x) {
    return follow(solver, x, [&](double p) -> AddedTerms {
        return [&circuit, p](const Vector&, Vector& f, Matrix*) { f += p * circuit.s; };
    });
}

/// A conductance from every net to gnd, from 10 mS down over ten decades and then away.
NewtonEnd step_conductance(NewtonSolver& solver, const Circuit& circuit, Vector& x) {
    return follow(solver, x, [&](double p) -> AddedTerms {
        const double siemens = p > 0 ? 1e-2 * std::pow(10.0, -10 * (1 - p)) : 0;
        return [&circuit, siemens](const Vector& at, Vector& f, Matrix* jacobian) {
            for (int k = 0; k < circuit.net_count; ++k) {
                f[k] += siemens * at[k];
                if (jacobian) (*jacobian)(k, k) += siemens;
            }
        };
    });
}

/// Implicit Euler on an artificial lag of every unknown, with growing steps: from rest to rest however far.
NewtonEnd pseudo_transient(NewtonSolver& solver, const Circuit& circuit, Vector& x) {
    const Vector rates = circuit.G.cwiseAbs().rowwise().maxCoeff();
    double step = 1e-3;
    for (int round = 0; round < 400; ++round) {
        const Vector from = x;
        const AddedTerms lag = [&](const Vector& at, Vector& f, Matrix* jacobian) {
            for (int k = 0; k < circuit.size(); ++k) {
                const double weight = (rates[k] > 0 ? rates[k] : 1) / step;
                f[k] += weight * (at[k] - from[k]);
                if (jacobian) (*jacobian)(k, k) += weight;
            }
        };
        Vector trial = x;
        const NewtonEnd end = solver.solve(trial, lag);
        if (end == NewtonEnd::cancelled) return end;
        if (end != NewtonEnd::converged) {
            step /= 8;
            if (step < 1e-12) return NewtonEnd::stuck;
            continue;
        }
        x = trial;
        step *= 2;
        if (step > 1e9) return solver.solve(x);
    }
    return NewtonEnd::stuck;
}

Fault singular_fault(const Circuit& circuit, int k) {
    const Unknown& unknown = circuit.unknowns[k];
    return {FaultKind::singular_pencil, unknown.part.empty() ? unknown.name : unknown.part,
            "At DC no equation determines " + unknown.name + ".",
            "Look for a net held only by capacitors or by two ideal op-amps in one loop, or for an op-amp without "
            "feedback at DC."};
}

} // namespace

Result<OperatingPoint> find_operating_point(const Circuit& circuit, const OperatingPointOptions& options,
                                            std::stop_token stop) {
    NewtonSolver solver(circuit, options, stop);
    NewtonEnd end = NewtonEnd::stuck;
    int undetermined = -1, worst = 0;
    const auto attempt = [&](const char* method, auto how) -> std::optional<OperatingPoint> {
        Vector x = power_up(circuit);
        end = how(x);
        if (end == NewtonEnd::singular && undetermined < 0) undetermined = solver.undetermined();
        if (end == NewtonEnd::stuck) worst = solver.worst_equation();
        if (end != NewtonEnd::converged) return std::nullopt;
        return OperatingPoint{x, solver.iterations(), solver.last_step(), method, {}};
    };
    const auto cancelled = [] {
        return Fault{FaultKind::cancelled, "", "Stopped while looking for the operating point.", ""};
    };

    if (auto found = attempt("Newton", [&](Vector& x) { return solver.solve(x); })) return *found;
    if (end == NewtonEnd::cancelled) return cancelled();
    if (end == NewtonEnd::singular && circuit.elements.empty()) return singular_fault(circuit, undetermined);
    if (auto found = attempt("source stepping", [&](Vector& x) { return step_sources(solver, circuit, x); }))
        return *found;
    if (end == NewtonEnd::cancelled) return cancelled();
    if (auto found = attempt("conductance stepping", [&](Vector& x) { return step_conductance(solver, circuit, x); }))
        return *found;
    if (end == NewtonEnd::cancelled) return cancelled();
    if (auto found = attempt("pseudo-transient", [&](Vector& x) { return pseudo_transient(solver, circuit, x); }))
        return *found;
    if (end == NewtonEnd::cancelled) return cancelled();
    if (undetermined >= 0) return singular_fault(circuit, undetermined);
    const Unknown& unknown = circuit.unknowns[worst];
    return Fault{
        FaultKind::not_converged, unknown.part.empty() ? unknown.name : unknown.part,
        "No DC operating point found; the balance at " + unknown.name +
            " would not close. Tried Newton, source stepping, conductance stepping and pseudo-transient continuation.",
        "Check the values round it."};
}

} // namespace sinewright
