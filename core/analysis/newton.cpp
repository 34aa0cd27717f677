#include "core/analysis/newton.hpp"
#include "core/circuit/element.hpp"
#include <Eigen/LU>
#include <algorithm>
#include <cmath>
#include <limits>

namespace sinewright {
namespace {

constexpr double epsilon = std::numeric_limits<double>::epsilon();
/// Equilibrated pivots below this are looked at by full pivoting; regular circuits of 60 unknowns stay far above.
constexpr double suspicious_pivot = 1e-12;
/// Halvings of an element's step before it is taken as it is; 2⁻⁶⁰ of any voltage is nothing.
constexpr int max_halvings = 60;
/// Rounding leaves a step of this size at most where conductances of one row differ by nine decades.
constexpr double rounding_step = 1e-6;

/// Place of one element's numbers in the flat arrays.
struct Slot {
    int controls, outputs;
    int u, out, slopes;
};

/// Nearest power of two to 1/size, so that scaling does not round.
double inverse_power_of_two(double size) {
    return size > 0 && std::isfinite(size) ? std::ldexp(1.0, -std::ilogb(size)) : 1;
}

} // namespace

struct LimitedNewton::State {
    const Circuit* circuit = nullptr;
    std::vector<Slot> slots;
    std::vector<double> u, out, slopes; ///< at ũ
    std::vector<double> u_wanted, u_try, out_try, predicted;
    Vector typical, f, right_side, step, row_scale, column_scale, row_size;
    Matrix jacobian, scaled;
    Eigen::PartialPivLU<Matrix> lu;
    int iterations = 0, worst_row = 0;
    const Element* not_finite = nullptr;
    double residual = 0, last_step = 0;
    std::vector<int> free_unknowns;

    void prepare(const Circuit& c);
    bool linearise_elements();
    void form_equations(const Vector& x, const Modification& modification);
    void equilibrate();
    bool factorise();
    void find_free_unknowns();
    void measure_residual(const Vector& x);
    bool follow_controls(const Vector& x);
    double share_to_take(const Element& element, const Slot& slot);
    bool within_prediction(const Element& element, const Slot& slot, double share);
    double size_of_step(const Vector& x) const;
    double deflation(const Vector& x, const std::vector<Vector>& known) const;
};

void LimitedNewton::State::prepare(const Circuit& c) {
    circuit = &c;
    slots.clear();
    int controls = 0, outputs = 0, slope_count = 0, widest_u = 0, widest_out = 0;
    for (const Element& element : c.elements) {
        const Slot slot{element.law->controls(), element.law->outputs(), controls, outputs, slope_count};
        slots.push_back(slot);
        controls += slot.controls, outputs += slot.outputs, slope_count += slot.controls * slot.outputs;
        widest_u = std::max(widest_u, slot.controls), widest_out = std::max(widest_out, slot.outputs);
    }
    u.resize(controls), u_wanted.resize(controls), out.resize(outputs), slopes.resize(slope_count);
    u_try.resize(widest_u), out_try.resize(widest_out), predicted.resize(widest_out);
    typical.resize(c.size()), row_scale.resize(c.size()), column_scale.resize(c.size()), row_size.resize(c.size());
    for (int k = 0; k < c.size(); ++k) typical[k] = c.unknowns[k].typical;
    iterations = 0, not_finite = nullptr;
}

/// Values and slopes of all laws at ũ; false when one is not finite.
bool LimitedNewton::State::linearise_elements() {
    for (std::size_t e = 0; e < slots.size(); ++e) {
        const Slot& slot = slots[e];
        circuit->elements[e].law->evaluate(
            {.count = 1, .u = &u[slot.u], .i = &out[slot.out], .di = &slopes[slot.slopes]});
        const auto finite = [](const double* values, int count) {
            return std::all_of(values, values + count, [](double v) { return std::isfinite(v); });
        };
        if (finite(&out[slot.out], slot.outputs) && finite(&slopes[slot.slopes], slot.outputs * slot.controls))
            continue;
        not_finite = &circuit->elements[e];
        return false;
    }
    return true;
}

/// f = G x − s + B·(i(ũ) + D·(Aᵀx − ũ)) − shift + M·(x − reference), and its Jacobian.
void LimitedNewton::State::form_equations(const Vector& x, const Modification& modification) {
    f.noalias() = circuit->G * x;
    f -= circuit->s;
    jacobian = circuit->G;
    for (std::size_t e = 0; e < slots.size(); ++e) {
        const Slot& slot = slots[e];
        const Element& element = circuit->elements[e];
        for (int o = 0; o < slot.outputs; ++o) {
            double value = out[slot.out + o];
            for (int c = 0; c < slot.controls; ++c)
                value +=
                    slopes[slot.slopes + o * slot.controls + c] * (value_at(element.controls[c], x) - u[slot.u + c]);
            out_try[o] = value;
        }
        add_outputs(element, out_try.data(), f);
        add_slopes(element, &slopes[slot.slopes], jacobian);
    }
    if (modification.shift) f -= *modification.shift;
    if (modification.extra) {
        f.noalias() += *modification.extra * (x - *modification.reference);
        jacobian += *modification.extra;
    }
}

/// Rows and columns to order one: columns by the usual size of the unknown, then rows, then columns again.
void LimitedNewton::State::equilibrate() {
    const int n = circuit->size();
    row_size = jacobian.cwiseAbs() * typical;
    for (int k = 0; k < n; ++k) row_scale[k] = inverse_power_of_two(row_size[k]);
    for (int k = 0; k < n; ++k)
        column_scale[k] = inverse_power_of_two(jacobian.col(k).cwiseAbs().cwiseProduct(row_scale).maxCoeff());
    scaled = row_scale.asDiagonal() * jacobian * column_scale.asDiagonal();
}

/// False when the Jacobian is singular to rounding; then the free unknowns are known.
bool LimitedNewton::State::factorise() {
    equilibrate();
    lu.compute(scaled);
    const double smallest = lu.matrixLU().diagonal().cwiseAbs().minCoeff();
    if (smallest > suspicious_pivot) return true;
    find_free_unknowns();
    return free_unknowns.empty();
}

void LimitedNewton::State::find_free_unknowns() {
    free_unknowns.clear();
    Eigen::FullPivLU<Matrix> full(scaled);
    full.setThreshold(4 * epsilon * static_cast<double>(circuit->size()));
    if (full.isInvertible()) return;
    const Vector free = full.kernel().col(0).cwiseAbs();
    for (int k = 0; k < circuit->size(); ++k)
        if (free[k] > 0.3 * free.maxCoeff()) free_unknowns.push_back(k);
    std::stable_sort(free_unknowns.begin(), free_unknowns.end(), [&](int a, int b) { return free[a] > free[b]; });
}

void LimitedNewton::State::measure_residual(const Vector& x) {
    const Vector size = jacobian.cwiseAbs() * x.cwiseAbs().cwiseMax(typical);
    residual = 0, worst_row = 0;
    for (int k = 0; k < circuit->size(); ++k) {
        const double relative = size[k] > 0 ? std::abs(f[k]) / size[k] : std::abs(f[k]);
        if (relative > residual) residual = relative, worst_row = k;
    }
}

/// Does the law at ũ + share·(u − ũ) stay near the linear prediction? Near: within the change predicted for the whole
/// step, or within what moves its equations by the usual size of their unknowns.
bool LimitedNewton::State::within_prediction(const Element& element, const Slot& slot, double share) {
    for (int c = 0; c < slot.controls; ++c) {
        const double from = u[slot.u + c];
        u_try[c] = from + share * (u_wanted[slot.u + c] - from);
    }
    element.law->evaluate({.count = 1, .u = u_try.data(), .i = out_try.data()});
    for (int o = 0; o < slot.outputs; ++o) {
        double harmless = std::abs(predicted[o]);
        double floor = std::numeric_limits<double>::infinity();
        for (const Weighted& row : element.injections[o])
            floor = std::min(floor, row_size[row.index] / std::abs(row.weight));
        harmless = std::max(harmless, floor);
        if (!(std::abs(out_try[o] - out[slot.out + o] - share * predicted[o]) <= harmless)) return false;
    }
    return true;
}

/// Largest share of the wanted step of this element's controls, to within a few per cent, that follows the prediction.
double LimitedNewton::State::share_to_take(const Element& element, const Slot& slot) {
    for (int o = 0; o < slot.outputs; ++o) {
        predicted[o] = 0;
        for (int c = 0; c < slot.controls; ++c)
            predicted[o] += slopes[slot.slopes + o * slot.controls + c] * (u_wanted[slot.u + c] - u[slot.u + c]);
    }
    if (within_prediction(element, slot, 1)) return 1;
    double good = 0, bad = 1;
    for (int k = 0; k < max_halvings && (good == 0 || bad - good > 0.02 * good); ++k) {
        const double middle = good == 0 && k > 6 ? bad / 16 : (good + bad) / 2;
        (within_prediction(element, slot, middle) ? good : bad) = middle;
    }
    return good;
}

/// Moves ũ after Aᵀx; false when some element could not follow all the way.
bool LimitedNewton::State::follow_controls(const Vector& x) {
    bool all_the_way = true;
    for (std::size_t e = 0; e < slots.size(); ++e) {
        const Slot& slot = slots[e];
        const Element& element = circuit->elements[e];
        bool moved = false;
        for (int c = 0; c < slot.controls; ++c) {
            u_wanted[slot.u + c] = value_at(element.controls[c], x);
            moved |= u_wanted[slot.u + c] != u[slot.u + c];
        }
        if (!moved) continue;
        const double share = share_to_take(element, slot);
        all_the_way &= share == 1;
        for (int c = 0; c < slot.controls; ++c)
            u[slot.u + c] =
                share == 1 ? u_wanted[slot.u + c] : u[slot.u + c] + share * (u_wanted[slot.u + c] - u[slot.u + c]);
    }
    return all_the_way;
}

double LimitedNewton::State::size_of_step(const Vector& x) const {
    return step.cwiseAbs().cwiseQuotient(x.cwiseAbs().cwiseMax(typical)).maxCoeff();
}

/// Share of Newton's step that the deflated system takes: with M(x) = Π(1/‖x − x_k‖² + 1) the deflated step is
/// d/(1 + g), g = ∇(log M)ᵀd, for the Newton step d (Farrell, Birkisson & Funke 2015, by Sherman & Morrison).
double LimitedNewton::State::deflation(const Vector& x, const std::vector<Vector>& known) const {
    double g = 0;
    for (const Vector& other : known) {
        const Vector away = (x - other).cwiseQuotient(typical);
        const double square = std::max(away.squaredNorm(), 1e-30);
        g -= 2 * away.dot(step.cwiseQuotient(typical)) / (square * square * (1 / square + 1));
    }
    const double divisor = 1 - g;
    return 1 / (std::abs(divisor) < 1e-3 ? std::copysign(1e-3, divisor) : divisor);
}

LimitedNewton::LimitedNewton() : state_(std::make_unique<State>()) {}
LimitedNewton::~LimitedNewton() = default;
LimitedNewton::LimitedNewton(LimitedNewton&&) noexcept = default;
LimitedNewton& LimitedNewton::operator=(LimitedNewton&&) noexcept = default;

void LimitedNewton::prepare(const Circuit& circuit) { state_->prepare(circuit); }
int LimitedNewton::iterations() const { return state_->iterations; }
double LimitedNewton::last_step() const { return state_->last_step; }
int LimitedNewton::worst_row() const { return state_->worst_row; }
const Element* LimitedNewton::not_finite() const { return state_->not_finite; }
std::vector<int> LimitedNewton::free_unknowns() const { return state_->free_unknowns; }

NewtonEnd LimitedNewton::solve(Vector& x, const Modification& modification, int max_iterations,
                               double relative_tolerance, const std::stop_token& stop) {
    State& s = *state_;
    for (std::size_t e = 0; e < s.slots.size(); ++e)
        for (int c = 0; c < s.slots[e].controls; ++c)
            s.u[s.slots[e].u + c] = value_at(s.circuit->elements[e].controls[c], x);
    s.not_finite = nullptr;
    bool followed = true;
    double share = 1;
    s.last_step = std::numeric_limits<double>::infinity();
    for (int k = 0; k < max_iterations; ++k) {
        if (stop.stop_requested()) return NewtonEnd::cancelled;
        if (!s.linearise_elements()) return NewtonEnd::not_finite;
        ++s.iterations;
        s.form_equations(x, modification);
        if (!s.f.allFinite() || !s.jacobian.allFinite()) return NewtonEnd::not_finite;
        if (!s.factorise()) return NewtonEnd::singular;
        s.measure_residual(x);
        s.right_side = -s.f.cwiseProduct(s.row_scale);
        s.step = s.lu.solve(s.right_side);
        s.step.array() *= s.column_scale.array();
        if (!s.step.allFinite()) return NewtonEnd::not_finite;
        if (modification.deflated) s.step *= s.deflation(x, *modification.deflated);
        const double size = s.size_of_step(x);
        const bool at_rounding = size < rounding_step && size > 0.5 * s.last_step && s.residual < 64 * epsilon;
        // Damp when steps do not shrink although every element follows: a law with a fold makes Newton circle.
        if (followed && k > 4)
            share = size > 0.7 * s.last_step ? std::max(share / 2, 1.0 / 64) : std::min(1.0, 2 * share);
        x += share * s.step;
        s.last_step = size;
        const bool reached = followed && share == 1 && (size <= relative_tolerance || at_rounding);
        if (reached) return NewtonEnd::converged;
        followed = s.follow_controls(x);
    }
    return NewtonEnd::stalled;
}

} // namespace sinewright
