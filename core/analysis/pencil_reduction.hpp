#pragma once
/// Groundwork on linearised circuits shared by natural frequencies and loop gain: scaling, removal of infinite roots.
#include "core/circuit/circuit.hpp"
#include <complex>
#include <optional>
#include <span>

namespace sinewright {

using Complex = std::complex<double>;

/// Powers of two by which rows and columns were multiplied, and the frequency that C was multiplied by.
struct PencilScaling {
    Vector row, column;
    double w0_rad_per_s = 1;
};

/// Scales the pencil in place so that every row and column of |G| + w0·|C| has its largest entry near one
/// (Ruiz-type iteration, powers of two only, so no digit is lost). Afterwards G + (s/w0)·C stands for G + s·C.
/// @param w0_rad_per_s  0: taken from the circuit, as the middle of the ratios |G|/|C| of the unknowns that have both.
/// @param tie_a, tie_b  two indices that must keep equal scales (the two sides of a cut); −1: none.
/// Source: Ruiz, A scaling algorithm to equilibrate both rows and columns norms in matrices, 2001.
PencilScaling equilibrate(Pencil& pencil, double w0_rad_per_s = 0, int tie_a = -1, int tie_b = -1);

/// The pencil without its infinite roots: r×r with regular C and the same finite roots. Nothing when det(G + sC)
/// vanishes for every s. Rows where C has rank 0 are constraints; they and as many columns are removed by orthogonal
/// row and column compression, again and again, until C is regular: this covers any index (ideal op-amps give 2).
/// Source: Golub & Van Loan, Matrix Computations, section 7.7 (deflation of infinite eigenvalues).
std::optional<Pencil> without_infinite_roots(Pencil pencil);

/// All finite roots of an equilibrated pencil in units of w0, unsorted; nothing when singular for every s or when the
/// eigenvalue iteration does not converge.
std::optional<std::vector<Complex>> finite_roots(const Pencil& equilibrated);

/// Size of the right-most complex root in units of w0; 1 when all are real. Far from 1, w0 was a poor guess: roots keep
/// their digits best when those of interest are near w0.
double scale_of_interest(const std::vector<Complex>& roots);
constexpr bool poor_scale(double scale) { return scale > 30 || scale < 1 / 30.0; }

/// One root of the equilibrated pencil improved by inverse iteration on the full, unreduced equations (each entry keeps
/// its own relative accuracy there). Returns the start when that does not contract.
Complex polish_root(const Pencil& equilibrated, Complex root);

/// Right-most first, then by size of the imaginary part; of a pair the upper one first.
void sort_right_most_first(std::vector<Complex>& roots);

} // namespace sinewright
