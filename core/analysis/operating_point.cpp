#include "core/analysis/operating_point.hpp"
#include "core/analysis/newton.hpp"
#include <algorithm>
#include <cmath>
#include <fmt/format.h>

namespace sinewright {
namespace {

/// Source stepping gives up when a step is smaller than this share of the whole.
constexpr double smallest_source_step = 1e-6;
/// Conductance stepping: from far above any circuit's conductances to below what any notices.
constexpr double largest_conductance_s = 1, smallest_conductance_s = 1e-13;
/// Stages lead to a start for the next; only the last must be sharp.
constexpr double stage_tolerance = 1e-6;
constexpr int stage_iterations = 30;
constexpr int pseudo_transient_steps = 200;

std::string name_of_quantity(const Unknown& unknown) {
    return unknown.kind == UnknownKind::net_voltage ? "the voltage of " + unknown.name : unknown.name;
}

std::string name_of_equation(const Unknown& unknown) {
    return unknown.kind == UnknownKind::net_voltage ? "the current balance of " + unknown.name
                                                    : "the equation of " + unknown.name;
}

std::string where_of(const Unknown& unknown) { return unknown.part.empty() ? unknown.name : unknown.part; }

Fault singular_fault(const Circuit& circuit, const std::vector<int>& free) {
    constexpr std::size_t most_named = 3;
    std::string names;
    for (std::size_t k = 0; k < std::min(free.size(), most_named); ++k)
        names += fmt::format("{}{}", k == 0 ? "" : ", ", name_of_quantity(circuit.unknowns[free[k]]));
    const Unknown& first = circuit.unknowns[free.front()];
    const bool more = free.size() > most_named;
    return {FaultKind::singular_pencil, where_of(first),
            free.size() == 1 ? fmt::format("At DC nothing determines {}.", names)
                             : fmt::format("At DC nothing determines these together: {}{}.", names, more ? ", …" : ""),
            fmt::format("Give {} a resistor to a net with a DC path, or change a value that cancels exactly.",
                        where_of(first))};
}

const Fault cancelled_fault{FaultKind::cancelled, "", "The search for the DC operating point was stopped.", ""};

} // namespace

/// Newton and the continuations that help it to a start.
struct OperatingPointSolver::Workspace {
    LimitedNewton newton;
    Vector start, shift, f, q;
    Matrix extra;

    Result<OperatingPoint> solve(const Circuit& circuit, const Vector* near, const OperatingPointOptions& options,
                                 const std::stop_token& stop);

  private:
    NewtonEnd polish(Vector& x, const OperatingPointOptions& options, const std::stop_token& stop) {
        return newton.solve(x, {}, options.max_iterations, options.relative_tolerance, stop);
    }
    NewtonEnd step_sources(const Circuit& circuit, Vector& x, const OperatingPointOptions& options,
                           const std::stop_token& stop);
    NewtonEnd step_conductance(const Circuit& circuit, Vector& x, const OperatingPointOptions& options,
                               const std::stop_token& stop);
    NewtonEnd follow_pseudo_transient(const Circuit& circuit, Vector& x, const OperatingPointOptions& options,
                                      const std::stop_token& stop);
    Fault not_converged_fault(const Circuit& circuit) const;
};

/// f(x) = (1 − α)·f(x_start), α from 0 to 1: x_start solves the first, and α raises all sources together, since at
/// power-up nothing but the sources is out of balance.
NewtonEnd OperatingPointSolver::Workspace::step_sources(const Circuit& circuit, Vector& x,
                                                        const OperatingPointOptions& options,
                                                        const std::stop_token& stop) {
    evaluate_static(circuit, start, f, nullptr);
    if (!f.allFinite()) return NewtonEnd::not_finite;
    x = start;
    Vector trial = x;
    for (double alpha = 0, step = 0.1; alpha < 1;) {
        const double next = std::min(1.0, alpha + step);
        shift = (1 - next) * f;
        trial = x;
        const NewtonEnd end = newton.solve(trial, {.shift = &shift}, stage_iterations, stage_tolerance, stop);
        if (end == NewtonEnd::cancelled) return end;
        if (end == NewtonEnd::converged) {
            x = trial, alpha = next, step *= 2;
            continue;
        }
        step /= 4;
        if (step < smallest_source_step) return end;
    }
    return polish(x, options, stop);
}

/// A conductance from every net to its voltage at power-up, taken away decade by decade.
NewtonEnd OperatingPointSolver::Workspace::step_conductance(const Circuit& circuit, Vector& x,
                                                            const OperatingPointOptions& options,
                                                            const std::stop_token& stop) {
    x = start;
    Vector trial = x;
    double factor = 10;
    for (double conductance = largest_conductance_s; conductance > smallest_conductance_s;) {
        extra.setZero(circuit.size(), circuit.size());
        extra.diagonal().head(circuit.net_count).setConstant(conductance);
        trial = x;
        const NewtonEnd end =
            newton.solve(trial, {.extra = &extra, .reference = &start}, stage_iterations, stage_tolerance, stop);
        if (end == NewtonEnd::cancelled) return end;
        if (end == NewtonEnd::converged) {
            x = trial, factor = std::min(10.0, factor * factor), conductance /= factor;
            continue;
        }
        conductance *= factor, factor = std::sqrt(factor), conductance /= factor;
        if (conductance >= largest_conductance_s || factor < 1.01) return end;
    }
    return polish(x, options, stop);
}

/// Lets the circuit settle in time by implicit Euler with growing steps (Kelley & Keyes 1998). Ends in a stable state.
NewtonEnd OperatingPointSolver::Workspace::follow_pseudo_transient(const Circuit& circuit, Vector& x,
                                                                   const OperatingPointOptions& options,
                                                                   const std::stop_token& stop) {
    x = start;
    Vector trial = x;
    Matrix capacitance;
    double step_s = 1e-9;
    constexpr double longest_step_s = 1e6, shortest_step_s = 1e-15;
    for (int k = 0; k < pseudo_transient_steps && step_s < longest_step_s; ++k) {
        evaluate_charge(circuit, x, q, &capacitance);
        extra = capacitance / step_s;
        trial = x;
        const NewtonEnd end =
            newton.solve(trial, {.extra = &extra, .reference = &x}, stage_iterations, stage_tolerance, stop);
        if (end == NewtonEnd::cancelled) return end;
        if (end == NewtonEnd::converged)
            x = trial, step_s *= 2;
        else if ((step_s /= 8) < shortest_step_s)
            return end;
    }
    return polish(x, options, stop);
}

Fault OperatingPointSolver::Workspace::not_converged_fault(const Circuit& circuit) const {
    const Unknown& worst = circuit.unknowns[newton.worst_row()];
    const std::string tried = fmt::format(" Tried Newton, source stepping, conductance stepping and pseudo-transient "
                                          "continuation, {} iterations in all.",
                                          newton.iterations());
    if (const Element* element = newton.not_finite())
        return {FaultKind::not_converged, element->ref,
                fmt::format("No DC operating point found: the equations of {} gave a value that is not finite.{}",
                            element->ref, tried),
                fmt::format("Look at the values of {}.", element->ref)};
    return {FaultKind::not_converged, where_of(worst),
            fmt::format("No DC operating point found: {} stays out of balance.{}", name_of_equation(worst), tried),
            fmt::format("Look at the values around {}.", where_of(worst))};
}

Result<OperatingPoint> OperatingPointSolver::Workspace::solve(const Circuit& circuit, const Vector* near,
                                                              const OperatingPointOptions& options,
                                                              const std::stop_token& stop) {
    newton.prepare(circuit);
    start.resize(circuit.size());
    for (int k = 0; k < circuit.size(); ++k) start[k] = circuit.unknowns[k].start;
    Vector x = near ? *near : start;
    const auto answer = [&](const char* method) {
        return OperatingPoint{std::move(x), newton.iterations(), newton.last_step(), method, {}};
    };
    NewtonEnd end = polish(x, options, stop);
    if (near && end != NewtonEnd::converged && end != NewtonEnd::cancelled) x = start, end = polish(x, options, stop);
    if (end == NewtonEnd::converged) return answer("Newton");
    if (end == NewtonEnd::singular && circuit.elements.empty()) return singular_fault(circuit, newton.free_unknowns());
    // Singular at power-up already: likely for good. Later on a path may just fold back there.
    const bool singular_first = end == NewtonEnd::singular && newton.iterations() == 1;
    const std::vector<int> free_first = newton.free_unknowns();
    using Stage =
        NewtonEnd (Workspace::*)(const Circuit&, Vector&, const OperatingPointOptions&, const std::stop_token&);
    constexpr std::pair<Stage, const char*> stages[] = {{&Workspace::step_sources, "source stepping"},
                                                        {&Workspace::step_conductance, "conductance stepping"},
                                                        {&Workspace::follow_pseudo_transient, "pseudo-transient"}};
    for (const auto& [stage, method] : stages) {
        if (end == NewtonEnd::cancelled) break;
        end = (this->*stage)(circuit, x, options, stop);
        if (end == NewtonEnd::converged) return answer(method);
    }
    if (end == NewtonEnd::cancelled) return cancelled_fault;
    if (singular_first) return singular_fault(circuit, free_first);
    return not_converged_fault(circuit);
}

OperatingPointSolver::OperatingPointSolver() : workspace_(std::make_unique<Workspace>()) {}
OperatingPointSolver::~OperatingPointSolver() = default;
OperatingPointSolver::OperatingPointSolver(OperatingPointSolver&&) noexcept = default;
OperatingPointSolver& OperatingPointSolver::operator=(OperatingPointSolver&&) noexcept = default;

Result<OperatingPoint> OperatingPointSolver::solve(const Circuit& circuit, const OperatingPointOptions& options,
                                                   std::stop_token stop) {
    return workspace_->solve(circuit, nullptr, options, stop);
}

Result<OperatingPoint> OperatingPointSolver::solve_from(const Circuit& circuit, const Vector& start,
                                                        const OperatingPointOptions& options, std::stop_token stop) {
    return workspace_->solve(circuit, &start, options, stop);
}

Result<OperatingPoint> find_operating_point(const Circuit& circuit, const OperatingPointOptions& options,
                                            std::stop_token stop) {
    return OperatingPointSolver().solve(circuit, options, stop);
}

} // namespace sinewright
