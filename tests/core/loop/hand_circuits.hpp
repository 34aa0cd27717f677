#pragma once
/// Small linear circuits written down by hand as G + sC, with their exact answers, for tests of the linear analyses.
#include "core/circuit/circuit.hpp"

namespace sinewright::test {

/// Builds G and C entry by entry; index −1 is gnd.
struct HandCircuit {
    Pencil pencil;
    explicit HandCircuit(int unknowns) : pencil{Matrix::Zero(unknowns, unknowns), Matrix::Zero(unknowns, unknowns)} {}
    void admittance(Matrix& m, int a, int b, double value) {
        if (a >= 0) m(a, a) += value;
        if (b >= 0) m(b, b) += value;
        if (a >= 0 && b >= 0) m(a, b) -= value, m(b, a) -= value;
    }
    HandCircuit& resistor(int a, int b, double ohm) { return admittance(pencil.G, a, b, 1 / ohm), *this; }
    HandCircuit& capacitor(int a, int b, double farad) { return admittance(pencil.C, a, b, farad), *this; }
    /// v(out) = gain·v(in), ideal source at out; `branch` is its current's unknown.
    HandCircuit& amplifier(int in, int out, double gain, int branch) {
        pencil.G(out, branch) += 1;
        pencil.G(branch, out) += 1;
        if (in >= 0) pencil.G(branch, in) -= gain;
        return *this;
    }
    /// Ideal op-amp: v(plus) = v(minus), the output supplies any current.
    HandCircuit& nullor(int plus, int minus, int out, int branch) {
        pencil.G(out, branch) += 1;
        if (plus >= 0) pencil.G(branch, plus) += 1;
        if (minus >= 0) pencil.G(branch, minus) -= 1;
        return *this;
    }
    /// current(out) leaves net `out` = transconductance·v(in).
    HandCircuit& transconductance(int in, int out, double siemens) {
        pencil.G(out, in) += siemens;
        return *this;
    }
};

/// Series-parallel RC bridge with an ideal amplifier of gain A, opened at the amplifier's input.
/// Nets: 0 out, 1 between R and C, 2 network output (side y), 3 branch, 4 amplifier input (side x).
inline HandCircuit opened_bridge(double gain, double r_ohm = 10e3, double c_f = 10e-9) {
    HandCircuit h(5);
    h.resistor(0, 1, r_ohm).capacitor(1, 2, c_f).resistor(2, -1, r_ohm).capacitor(2, -1, c_f).amplifier(4, 0, gain, 3);
    return h;
}

/// Three equal loaded CR high-pass sections driven by an inverting amplifier of gain −A, opened at its input.
/// Nets: 0 out, 1, 2, 3 (side y), 4 branch, 5 amplifier input (side x).
inline HandCircuit opened_phase_shift(double gain, double r_ohm = 10e3, double c_f = 10e-9) {
    HandCircuit h(6);
    for (int k = 0; k < 3; ++k) h.capacitor(k, k + 1, c_f).resistor(k + 1, -1, r_ohm);
    h.amplifier(5, 0, -gain, 4);
    return h;
}

/// The circuit with x joined to y; x must be the last unknown.
inline Pencil joined(const HandCircuit& opened, int y) {
    const int x = opened.pencil.size() - 1;
    const auto fold = [&](Matrix m) {
        m.row(y) += m.row(x);
        m.col(y) += m.col(x);
        return Matrix(m.topLeftCorner(x, x));
    };
    return {fold(opened.pencil.G), fold(opened.pencil.C)};
}

} // namespace sinewright::test
