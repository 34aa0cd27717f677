/// f(x), q(x) and their derivatives, and the linearised circuit.
#include "core/circuit/circuit.hpp"
#include <array>

namespace sinewright {

namespace {

/// Room for one sample of any law: the largest kinds have three controls and two outputs.
constexpr int most_controls = 4, most_outputs = 4;

struct OneSample {
    std::array<double, most_controls> u{};
    std::array<double, most_outputs> i, q;
    std::array<double, most_outputs * most_controls> di, dq;

    void evaluate(const Element& element, const Vector& x, bool derivatives) {
        const int controls = element.law->controls();
        assert(controls <= most_controls && element.law->outputs() <= most_outputs);
#ifndef NDEBUG
        i.fill(std::numeric_limits<double>::quiet_NaN()); // an entry not written shows
        di.fill(std::numeric_limits<double>::quiet_NaN());
#endif
        q.fill(0), dq.fill(0);
        for (int c = 0; c < controls; ++c) {
            u[c] = 0;
            for (const auto& [index, weight] : element.controls[c]) u[c] += weight * x[index];
        }
        LawSamples samples{1, u.data(), i.data(), derivatives ? di.data() : nullptr, nullptr, nullptr};
        if (element.law->stores_charge()) samples.q = q.data(), samples.dq = derivatives ? dq.data() : nullptr;
        element.law->evaluate(samples);
    }
};

void add_jacobian(const Element& element, const std::array<double, most_outputs * most_controls>& slope,
                  Matrix& jacobian) {
    const int controls = element.law->controls(), outputs = element.law->outputs();
    for (int o = 0; o < outputs; ++o)
        for (int c = 0; c < controls; ++c) {
            const double d = slope[o * controls + c];
            if (d == 0) continue;
            for (const auto& [row, weight_out] : element.injections[o])
                for (const auto& [column, weight_in] : element.controls[c])
                    jacobian(row, column) += weight_out * d * weight_in;
        }
}

} // namespace

void evaluate_static(const Circuit& circuit, const Vector& x, Vector& f, Matrix* jacobian) {
    f.noalias() = circuit.G * x;
    f -= circuit.s;
    if (jacobian) *jacobian = circuit.G;
    OneSample sample;
    for (const Element& element : circuit.elements) {
        sample.evaluate(element, x, jacobian != nullptr);
        for (int o = 0; o < element.law->outputs(); ++o)
            for (const auto& [row, weight] : element.injections[o]) f[row] += weight * sample.i[o];
        if (jacobian) add_jacobian(element, sample.di, *jacobian);
    }
}

void evaluate_charge(const Circuit& circuit, const Vector& x, Vector& q, Matrix* jacobian) {
    q.noalias() = circuit.C * x;
    if (jacobian) *jacobian = circuit.C;
    OneSample sample;
    for (const Element& element : circuit.elements) {
        if (!element.law->stores_charge()) continue;
        sample.evaluate(element, x, jacobian != nullptr);
        for (int o = 0; o < element.law->outputs(); ++o)
            for (const auto& [row, weight] : element.injections[o]) q[row] += weight * sample.q[o];
        if (jacobian) add_jacobian(element, sample.dq, *jacobian);
    }
}

Pencil linearise(const Circuit& circuit, const Vector& x) {
    Pencil pencil{circuit.G, circuit.C};
    OneSample sample;
    for (const Element& element : circuit.elements) {
        sample.evaluate(element, x, true);
        add_jacobian(element, sample.di, pencil.G);
        if (element.law->stores_charge()) add_jacobian(element, sample.dq, pencil.C);
    }
    return pencil;
}

Vector extend_to_opened(const Circuit& opened, const Vector& x_closed) {
    Vector x(opened.size());
    x.head(x_closed.size()) = x_closed;
    if (opened.opened >= 0) x[opened.opened] = opened.rest >= 0 ? x_closed[opened.rest] : 0;
    return x;
}

} // namespace sinewright
