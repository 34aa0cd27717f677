#pragma once
/// How an element reads its controls from x and adds its outputs to the equations; shared by all that evaluate
/// circuits.
#include "core/circuit/circuit.hpp"

namespace sinewright {

/// Σ weight·x[index]
inline double value_at(const Combination& terms, const Vector& x) {
    double sum = 0;
    for (const Weighted& term : terms) sum += term.weight * x[term.index];
    return sum;
}

/// y += B·outputs
inline void add_outputs(const Element& element, const double* outputs, Vector& y) {
    for (std::size_t o = 0; o < element.injections.size(); ++o)
        for (const Weighted& row : element.injections[o]) y[row.index] += row.weight * outputs[o];
}

/// jacobian += B·slopes·Aᵀ, slopes[o * controls + c] = ∂output_o/∂u_c
inline void add_slopes(const Element& element, const double* slopes, Matrix& jacobian) {
    const std::size_t controls = element.controls.size();
    for (std::size_t o = 0; o < element.injections.size(); ++o)
        for (const Weighted& row : element.injections[o])
            for (std::size_t c = 0; c < controls; ++c)
                for (const Weighted& column : element.controls[c])
                    jacobian(row.index, column.index) += row.weight * column.weight * slopes[o * controls + c];
}

} // namespace sinewright
