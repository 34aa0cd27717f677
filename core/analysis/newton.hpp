#pragma once
/// Newton's method for f(x) − shift + M·(x − reference) = 0: the one solver under every stage of the operating point.
#include "core/circuit/circuit.hpp"
#include <memory>
#include <stop_token>

namespace sinewright {

/// What a continuation stage adds to f(x) = 0; empty: nothing.
struct Modification {
    const Vector* shift = nullptr;     ///< n, subtracted from f
    const Matrix* extra = nullptr;     ///< M, n×n
    const Vector* reference = nullptr; ///< n; wanted with M
    /// Known solutions to stay away from: the step is deflated (Farrell, Birkisson & Funke 2015).
    const std::vector<Vector>* deflated = nullptr;
};

enum class NewtonEnd { converged, singular, stalled, not_finite, cancelled };

/// Each element is linearised at control values ũ of its own. They follow Aᵀx, but only so far that the element's true
/// output stays near the linear prediction: then a junction reaches the predicted current in one step, a clamp its
/// edge, and nothing overflows. With all ũ = Aᵀx the step is Newton's.
class LimitedNewton {
  public:
    LimitedNewton();
    ~LimitedNewton();
    LimitedNewton(LimitedNewton&&) noexcept;
    LimitedNewton& operator=(LimitedNewton&&) noexcept;

    void prepare(const Circuit& circuit);
    /// Iterates from x in place.
    NewtonEnd solve(Vector& x, const Modification& modification, int max_iterations, double relative_tolerance,
                    const std::stop_token& stop);
    int iterations() const; ///< all since prepare
    /// Largest step of the last iteration, against each unknown's size or usual size.
    double last_step() const;
    /// Row with the largest |f| at the last linearisation against the size of its terms.
    int worst_row() const;
    /// Element whose law gave a value that is not finite in the last solve; null: none.
    const Element* not_finite() const;
    /// Unknowns that the last, singular Jacobian leaves free, the freest first.
    std::vector<int> free_unknowns() const;

  private:
    struct State;
    std::unique_ptr<State> state_;
};

} // namespace sinewright
