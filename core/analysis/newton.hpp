#pragma once
/// Damped Newton on the circuit's equations with something added: the engine of operating point and latched states.
#include "core/analysis/operating_point.hpp"
#include <Eigen/LU>
#include <functional>

namespace sinewright {

/// What is solved: f(x) of the circuit plus what `extra` adds to f and its Jacobian (sources scaled, conductance to
/// gnd, charge over a time step).
using AddedTerms = std::function<void(const Vector& x, Vector& f, Matrix* jacobian)>;

enum class NewtonEnd { converged, singular, stuck, cancelled };

class NewtonSolver {
  public:
    NewtonSolver(const Circuit& circuit, const OperatingPointOptions& options, std::stop_token stop);
    /// Improves x in place. Returns why it stopped.
    NewtonEnd solve(Vector& x, const AddedTerms& extra = {});

    int iterations() const { return iterations_; }
    double last_step() const { return last_step_; }
    /// After `singular`: the unknown with the largest part in a solution of the homogeneous equations.
    int undetermined() const { return undetermined_; }
    /// After `stuck`: the equation with the largest residual against its own terms.
    int worst_equation() const { return worst_; }

  private:
    void evaluate(const Vector& x, Vector& f, Matrix* jacobian, const AddedTerms& extra);
    bool factorise();
    double size_of_step(const Vector& step, const Vector& x) const;
    bool step_once(Vector& x, const AddedTerms& extra);
    double junction_limit(const Vector& step) const;

    const Circuit& circuit_;
    OperatingPointOptions options_;
    std::stop_token stop_;
    Vector f_, f_trial_, step_, trial_, row_scale_, typical_;
    Matrix jacobian_;
    Eigen::PartialPivLU<Matrix> lu_;
    int iterations_ = 0, undetermined_ = 0, worst_ = 0;
    double last_step_ = 0;
};

} // namespace sinewright
