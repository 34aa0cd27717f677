/// f(x), q(x) and their derivatives, and the linearised circuit.
#include "core/circuit/element.hpp"
#include <algorithm>
#include <array>
#include <bit>
#include <cassert>
#include <cstdint>

namespace sinewright {

namespace {

/// Room for one sample of any law: the largest kinds have three controls and two outputs.
constexpr int most_controls = 4, most_outputs = 4;

/// A NaN no arithmetic produces: in debug builds an entry that still holds it was never written.
constexpr std::uint64_t unwritten_bits = 0x7ff8'dead'beef'0001;

void mark_unwritten([[maybe_unused]] double* values, [[maybe_unused]] int count) {
#ifndef NDEBUG
    std::fill_n(values, count, std::bit_cast<double>(unwritten_bits));
#endif
}
void assert_written([[maybe_unused]] const double* values, [[maybe_unused]] int count) {
    assert(std::none_of(values, values + count,
                        [](double v) { return std::bit_cast<std::uint64_t>(v) == unwritten_bits; }) &&
           "a law left an entry unwritten");
}

struct OneSample {
    std::array<double, most_controls> u;
    std::array<double, most_outputs> i, q;
    std::array<double, most_outputs * most_controls> di, dq;

    void evaluate(const Element& element, const Vector& x, bool derivatives) {
        const Law& law = *element.law;
        const int controls = law.controls(), outputs = law.outputs(), slopes = outputs * controls;
        assert(controls <= most_controls && outputs <= most_outputs);
        mark_unwritten(i.data(), outputs), mark_unwritten(di.data(), slopes);
        mark_unwritten(q.data(), outputs), mark_unwritten(dq.data(), slopes);
        for (int c = 0; c < controls; ++c) u[c] = value_at(element.controls[c], x);
        LawSamples samples{1, u.data(), i.data(), derivatives ? di.data() : nullptr, nullptr, nullptr};
        if (law.stores_charge()) samples.q = q.data(), samples.dq = derivatives ? dq.data() : nullptr;
        law.evaluate(samples);
        assert_written(i.data(), outputs);
        if (derivatives) assert_written(di.data(), slopes);
        if (samples.q) assert_written(q.data(), outputs);
        if (samples.dq) assert_written(dq.data(), slopes);
    }
};

} // namespace

void evaluate_static(const Circuit& circuit, const Vector& x, Vector& f, Matrix* jacobian) {
    f.noalias() = circuit.G * x;
    f -= circuit.s;
    if (jacobian) *jacobian = circuit.G;
    OneSample sample;
    for (const Element& element : circuit.elements) {
        sample.evaluate(element, x, jacobian != nullptr);
        add_outputs(element, sample.i.data(), f);
        if (jacobian) add_slopes(element, sample.di.data(), *jacobian);
    }
}

void evaluate_charge(const Circuit& circuit, const Vector& x, Vector& q, Matrix* jacobian) {
    q.noalias() = circuit.C * x;
    if (jacobian) *jacobian = circuit.C;
    OneSample sample;
    for (const Element& element : circuit.elements) {
        if (!element.law->stores_charge()) continue;
        sample.evaluate(element, x, jacobian != nullptr);
        add_outputs(element, sample.q.data(), q);
        if (jacobian) add_slopes(element, sample.dq.data(), *jacobian);
    }
}

Pencil linearise(const Circuit& circuit, const Vector& x) {
    Pencil pencil{circuit.G, circuit.C};
    OneSample sample;
    for (const Element& element : circuit.elements) {
        sample.evaluate(element, x, true);
        add_slopes(element, sample.di.data(), pencil.G);
        if (element.law->stores_charge()) add_slopes(element, sample.dq.data(), pencil.C);
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
