#include "core/analysis/pencil_reduction.hpp"
#include <Eigen/Eigenvalues>
#include <Eigen/LU>
#include <Eigen/QR>
#include <algorithm>
#include <cmath>

namespace sinewright {

namespace {

/// A column counts as dependent on the ones before it when what is left of it falls below this part of its own norm:
/// far above rounding (1e-16 a step), far below the ratio of the smallest to the largest useful capacitor in one row.
constexpr double dependent_column = 1e-12;

double middle(std::vector<double>& rates) {
    std::nth_element(rates.begin(), rates.begin() + rates.size() / 2, rates.end());
    return rates[rates.size() / 2];
}

/// Middle of |G|/|C| over the diagonal (a net's own R and C), else over rows.
double middle_rate(const Pencil& pencil) {
    std::vector<double> own, by_row;
    for (int k = 0; k < pencil.size(); ++k) {
        if (pencil.G(k, k) != 0 && pencil.C(k, k) != 0) own.push_back(std::abs(pencil.G(k, k) / pencil.C(k, k)));
        const double g = pencil.G.row(k).cwiseAbs().maxCoeff(), c = pencil.C.row(k).cwiseAbs().maxCoeff();
        if (g > 0 && c > 0) by_row.push_back(g / c);
    }
    if (!own.empty()) return middle(own);
    return by_row.empty() ? 1 : middle(by_row);
}

double power_of_two(double x) { return std::exp2(std::round(std::log2(x))); }

/// Rank by column-pivoted QR, each column judged against its own size before elimination.
int rank_by_own_columns(const Eigen::ColPivHouseholderQR<Matrix>& qr, const Vector& column_norms) {
    const int limit = static_cast<int>(std::min(qr.rows(), qr.cols()));
    int rank = 0;
    for (; rank < limit; ++rank) {
        const double own = column_norms[qr.colsPermutation().indices()[rank]];
        if (!(std::abs(qr.matrixQR()(rank, rank)) > dependent_column * own)) break;
    }
    return rank;
}

} // namespace

PencilScaling equilibrate(Pencil& pencil, double w0_rad_per_s, int tie_a, int tie_b) {
    const int n = pencil.size();
    PencilScaling scaling{Vector::Ones(n), Vector::Ones(n), w0_rad_per_s > 0 ? w0_rad_per_s : middle_rate(pencil)};
    pencil.C *= scaling.w0_rad_per_s;
    const auto tie = [&](Vector& factor) {
        if (tie_a >= 0) factor[tie_a] = factor[tie_b] = power_of_two(std::sqrt(factor[tie_a] * factor[tie_b]));
    };
    // Three rounds bring circuits of pF to GΩ within a factor of a few, which is all that pivoting needs.
    for (int round = 0; round < 3; ++round) {
        const Matrix size = pencil.G.cwiseAbs() + pencil.C.cwiseAbs();
        Vector row(n), column(n);
        for (int k = 0; k < n; ++k) {
            const double r = size.row(k).maxCoeff(), c = size.col(k).maxCoeff();
            row[k] = r > 0 ? power_of_two(1 / std::sqrt(r)) : 1;
            column[k] = c > 0 ? power_of_two(1 / std::sqrt(c)) : 1;
        }
        tie(row), tie(column);
        pencil.G = row.asDiagonal() * pencil.G * column.asDiagonal();
        pencil.C = row.asDiagonal() * pencil.C * column.asDiagonal();
        scaling.row.array() *= row.array();
        scaling.column.array() *= column.array();
    }
    return scaling;
}

std::optional<Pencil> without_infinite_roots(Pencil pencil) {
    while (pencil.size() > 0) {
        const int n = pencil.size();
        // 1. Row compression of C: QᵀC = [C1; 0].
        const Vector norms = pencil.C.colwise().norm();
        const Eigen::ColPivHouseholderQR<Matrix> rows(pencil.C);
        const int r = rank_by_own_columns(rows, norms);
        if (r == n) return pencil;
        const Matrix g = rows.householderQ().adjoint() * pencil.G;
        const Matrix c1 =
            Matrix(rows.matrixQR().topRows(r).triangularView<Eigen::Upper>()) * rows.colsPermutation().transpose();
        // 2. The other rows are constraints G2 x = 0: column compression G2 Z = [0 T], T regular, removes n − r
        // unknowns.
        const Matrix constraints = g.bottomRows(n - r).transpose();
        const Vector constraint_norms = constraints.colwise().norm();
        const Eigen::ColPivHouseholderQR<Matrix> columns(constraints);
        if (rank_by_own_columns(columns, constraint_norms) < n - r) return std::nullopt;
        Matrix free = Matrix::Zero(n, r);
        free.bottomRows(r).setIdentity();
        free.applyOnTheLeft(columns.householderQ());
        pencil = Pencil{g.topRows(r) * free, c1 * free};
    }
    return pencil;
}

std::optional<std::vector<Complex>> finite_roots(const Pencil& equilibrated) {
    const auto reduced = without_infinite_roots(equilibrated);
    if (!reduced) return std::nullopt;
    const int r = reduced->size();
    std::vector<Complex> roots;
    if (r == 0) return roots;
    // (G + sC)v = 0 ⇔ (G + σC)⁻¹C v = v/(σ − s). Any shift that is no root does; the second is for the unlucky case.
    for (const double shift : {0.8125, 1.4375, 0.2109375}) {
        const Eigen::PartialPivLU<Matrix> lu(reduced->G + shift * reduced->C);
        const Vector pivots = lu.matrixLU().diagonal().cwiseAbs();
        if (!(pivots.minCoeff() > 1e-13 * pivots.maxCoeff())) continue;
        const Eigen::EigenSolver<Matrix> solver(lu.solve(reduced->C), false);
        if (solver.info() != Eigen::Success) continue;
        roots.reserve(r);
        for (int k = 0; k < r; ++k) roots.push_back(shift - 1.0 / Complex(solver.eigenvalues()[k]));
        return roots;
    }
    return std::nullopt;
}

Complex polish_root(const Pencil& equilibrated, Complex root) {
    const int n = equilibrated.size();
    Eigen::VectorXcd v(n);
    for (int k = 0; k < n; ++k) v[k] = Complex(1, 0.25 * ((k * 7) % 5 - 2)); // any vector not orthogonal to the mode
    Complex s = root;
    double last_step = std::abs(root) * 3e-3; // further away it may be another root's ground
    for (int step = 0; step < 5; ++step) {
        const Eigen::PartialPivLU<Eigen::MatrixXcd> lu(equilibrated.G.cast<Complex>() + s * equilibrated.C);
        // With (G + s*C)v = 0, (G + sC)z = Cv gives z = v/(s − s*).
        if (step == 0) v = lu.solve(equilibrated.C * v), v.normalize();
        const Eigen::VectorXcd z = lu.solve(equilibrated.C * v);
        const Complex update = 1.0 / v.dot(z);
        const double size = std::abs(update);
        if (!std::isfinite(size) || size > last_step) return s;
        s -= update;
        last_step = size;
        v = z.normalized();
        if (size <= 1e-15 * std::abs(s)) break;
    }
    return root.imag() == 0 ? Complex(s.real(), 0) : s;
}

double scale_of_interest(const std::vector<Complex>& roots) {
    const Complex* best = nullptr;
    for (const Complex& s : roots)
        if (s.imag() > 0 && (!best || s.real() > best->real())) best = &s;
    return best ? std::abs(*best) : 1;
}

void sort_right_most_first(std::vector<Complex>& roots) {
    std::sort(roots.begin(), roots.end(), [](Complex a, Complex b) {
        if (a.real() != b.real()) return a.real() > b.real();
        if (std::abs(a.imag()) != std::abs(b.imag())) return std::abs(a.imag()) < std::abs(b.imag());
        return a.imag() > b.imag();
    });
}

} // namespace sinewright
