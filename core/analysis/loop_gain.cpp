#include "core/analysis/loop_gain.hpp"
#include "core/analysis/pencil_reduction.hpp"
#include <Eigen/LU>
#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>

namespace sinewright {

namespace {

using ComplexMatrix = Eigen::MatrixXcd;
constexpr double two_pi = 2 * std::numbers::pi;

/// Fast and plain form may differ by this much, relative to |L| (methods: "fall back when they differ by 1e-9").
constexpr double fast_form_tolerance = 1e-9;
/// y11 + y22 is nothing but rounding below this part of the terms it is the difference of.
constexpr double no_admittance = 1e-12;

/// The joined circuit (sign +1: v_x = v_y) or the sides joined in opposition (sign −1: v_x = −v_y); x is folded into y.
Matrix fold(const Matrix& opened, int x, int y, double sign) {
    Matrix m = opened;
    m.row(y) += sign * m.row(x);
    m.col(y) += sign * m.col(x);
    const int last = static_cast<int>(m.rows()) - 1;
    if (x != last) m.row(x) = m.row(last).eval(), m.col(x) = m.col(last).eval();
    return m.topLeftCorner(last, last);
}
Pencil fold(const Pencil& opened, int x, int y, double sign) {
    return {fold(opened.G, x, y, sign), fold(opened.C, x, y, sign)};
}

/// The opened circuit with the given unknowns grounded (their rows and columns removed).
Pencil ground(const Pencil& opened, std::vector<int> grounded) {
    std::vector<int> keep;
    for (int k = 0; k < opened.size(); ++k)
        if (std::find(grounded.begin(), grounded.end(), k) == grounded.end()) keep.push_back(k);
    return {opened.G(keep, keep), opened.C(keep, keep)};
}

/// ln of a determinant from its LU, as log magnitude and phase.
Complex log_determinant(const ComplexMatrix& m) {
    const Eigen::PartialPivLU<ComplexMatrix> lu(m);
    Complex sum = lu.permutationP().determinant() < 0 ? Complex(0, std::numbers::pi) : Complex(0, 0);
    for (int k = 0; k < m.rows(); ++k) sum += std::log(lu.matrixLU()(k, k));
    return sum;
}

/// Impedances of the opened circuit seen at x and y, each loaded with one scaled siemens so that even an ideal output
/// or an input that draws nothing has finite entries: Z = (Y + 1)⁻¹, hence
/// L = −(y12 + y21)/(y11 + y22) = (z12 + z21)/(z11 + z22 − 2 det Z).
struct Loaded {
    Complex z11, z12, z21, z22;
    bool regular = true;
    Complex determinant() const { return z11 * z22 - z12 * z21; }
    Complex numerator() const { return z12 + z21; }
    Complex denominator() const { return z11 + z22 - 2.0 * determinant(); }
    double denominator_size() const { return std::abs(z11) + std::abs(z22) + 2 * std::abs(determinant()); }
    Complex gain() const { return numerator() / denominator(); }
};

Loaded loaded_impedances(const Pencil& opened, int x, int y, Complex s) {
    ComplexMatrix m = opened.G.cast<Complex>() + s * opened.C;
    m(x, x) += 1.0;
    m(y, y) += 1.0;
    const Eigen::PartialPivLU<ComplexMatrix> lu(m);
    Eigen::MatrixXcd drive = Eigen::MatrixXcd::Zero(opened.size(), 2);
    drive(x, 0) = drive(y, 1) = 1;
    const Eigen::MatrixXcd v = lu.solve(drive);
    Loaded z{v(x, 0), v(x, 1), v(y, 0), v(y, 1)};
    const auto pivots = lu.matrixLU().diagonal().cwiseAbs();
    z.regular = pivots.minCoeff() > 1e-15 * pivots.maxCoeff() && v.allFinite();
    return z;
}

Complex product_over_roots(Complex s, const std::vector<Complex>& above, const std::vector<Complex>& below) {
    // Numerator and denominator grow together; dividing every few factors keeps both in range.
    constexpr std::size_t chunk = 6;
    Complex product = 1;
    for (std::size_t from = 0; from < std::max(above.size(), below.size()); from += chunk) {
        Complex up = 1, down = 1;
        for (std::size_t k = from; k < std::min(from + chunk, above.size()); ++k) up *= s - above[k];
        for (std::size_t k = from; k < std::min(from + chunk, below.size()); ++k) down *= s - below[k];
        product *= up * std::conj(down) / std::norm(down);
    }
    return product;
}

std::vector<Complex> in_rad_per_s(std::vector<Complex> roots, double w0_rad_per_s) {
    for (Complex& root : roots) root *= w0_rad_per_s;
    return roots;
}

} // namespace

double Crossing::startup_margin_db() const { return (falls ? 20 : -20) * std::log10(gain); }

Complex LoopGain::ratio(Complex s) const {
    return scale_sign_ * std::exp(log_scale_) * product_over_roots(s / w0_rad_per_s_, opposed_roots_, joined_roots_);
}

Result<LoopGain> LoopGain::prepare(const Pencil& opened, int x, int y) { return prepare_at_scale(opened, x, y, 0); }

Result<LoopGain> LoopGain::prepare_at_scale(const Pencil& opened, int x, int y, double w0_rad_per_s) {
    LoopGain loop;
    loop.x_ = x, loop.y_ = y;
    loop.scaled_ = opened;
    loop.w0_rad_per_s_ = equilibrate(loop.scaled_, w0_rad_per_s, x, y).w0_rad_per_s;

    const std::array<Complex, 4> probes{Complex(0, 1.37), Complex(0, 0.0721), Complex(0, 31.3), Complex(0.43, 2.9)};
    const bool none = std::all_of(probes.begin(), probes.end(), [&](Complex s) {
        const Loaded z = loaded_impedances(loop.scaled_, x, y, s);
        return !z.regular || std::abs(z.denominator()) < no_admittance * z.denominator_size();
    });
    if (none)
        return Fault{FaultKind::no_loop_gain, "cut",
                     "At this cut the loop gain has no end: all the gain is inside the part.",
                     "Cut at an input of the amplifier or in the network instead."};

    const Pencil joined = fold(loop.scaled_, x, y, 1), opposed = fold(loop.scaled_, x, y, -1);
    auto joined_roots = finite_roots(joined);
    if (!joined_roots)
        return Fault{FaultKind::singular_pencil, "", "The circuit has no solution at any frequency.",
                     "Look for a net that nothing drives."};
    const double scale = scale_of_interest(*joined_roots);
    if (w0_rad_per_s == 0 && poor_scale(scale)) return prepare_at_scale(opened, x, y, scale * loop.w0_rad_per_s_);
    auto opposed_roots = finite_roots(opposed);
    loop.falls_back_ = !opposed_roots.has_value();
    loop.joined_roots_ = std::move(*joined_roots);
    if (opposed_roots) loop.opposed_roots_ = std::move(*opposed_roots);

    if (!loop.falls_back_) {
        const Complex s = probes[0];
        const Complex log_k = log_determinant(opposed.G.cast<Complex>() + s * opposed.C) -
                              log_determinant(joined.G.cast<Complex>() + s * joined.C) -
                              std::log(product_over_roots(s, loop.opposed_roots_, loop.joined_roots_));
        loop.log_scale_ = log_k.real();
        loop.scale_sign_ = std::cos(log_k.imag()) < 0 ? -1 : 1;
        for (const Complex probe : probes) {
            const Complex plain = loop.at_by_lu(probe * loop.w0_rad_per_s_), fast = loop.at(probe * loop.w0_rad_per_s_);
            if (!(std::abs(fast - plain) <= fast_form_tolerance * std::abs(plain))) loop.falls_back_ = true;
        }
    }
    return loop;
}

Complex LoopGain::at(Complex s, double smallest_difference) const {
    if (falls_back_) return at_by_lu(s);
    const Complex r = ratio(s), difference = r - 1.0, sum = r + 1.0;
    if (std::abs(difference) < smallest_difference) return at_by_lu(s);
    return difference * std::conj(sum) / std::norm(sum);
}

Complex LoopGain::at_by_lu(Complex s) const { return loaded_impedances(scaled_, x_, y_, s / w0_rad_per_s_).gain(); }

Complex LoopGain::slope_of_log_ratio(Complex s) const {
    const Complex u = s / w0_rad_per_s_;
    Complex sum = 0;
    for (const Complex a : opposed_roots_) sum += 1.0 / (u - a);
    for (const Complex c : joined_roots_) sum -= 1.0 / (u - c);
    return sum / w0_rad_per_s_;
}

LoopCurve LoopGain::at(std::vector<double> frequencies_hz) const {
    LoopCurve curve{std::move(frequencies_hz), {}};
    curve.gain.reserve(curve.frequency_hz.size());
    for (const double f_hz : curve.frequency_hz) curve.gain.push_back(at(Complex(0, two_pi * f_hz)));
    return curve;
}

LoopCurve LoopGain::sweep(double from_hz, double to_hz, int points) const {
    std::vector<double> frequencies_hz(static_cast<std::size_t>(std::max(points, 1)));
    const double span = std::log(to_hz / from_hz);
    for (int k = 0; k < points; ++k)
        frequencies_hz[k] =
            k + 1 == points && points > 1 ? to_hz : from_hz * std::exp(span * k / std::max(points - 1, 1));
    return at(std::move(frequencies_hz));
}

std::vector<Complex> LoopGain::joined_roots() const { return in_rad_per_s(joined_roots_, w0_rad_per_s_); }

std::vector<Complex> LoopGain::opposed_roots() const { return in_rad_per_s(opposed_roots_, w0_rad_per_s_); }

std::optional<int> LoopGain::opened_right_half_plane() const {
    // D_x|x + D_y|y is the opened circuit's polynomial. Where one side draws nothing (or is an ideal source, whose
    // current then has no row when it is grounded) one term vanishes and the other is a determinant of its own.
    const Complex probe(0.43, 2.9);
    const Loaded z = loaded_impedances(scaled_, x_, y_, probe);
    const Complex load = z.determinant();
    const double y11 = std::abs(z.z22 - load), y22 = std::abs(z.z11 - load), size = z.denominator_size();
    // Integrators put poles at the origin, where rounding may push a double one apart by the root of its size.
    const auto count = [](const Pencil& pencil) -> std::optional<int> {
        const auto roots = finite_roots(pencil);
        if (!roots) return std::nullopt;
        return static_cast<int>(std::count_if(roots->begin(), roots->end(),
                                              [](Complex r) { return r.real() > 1e-6 * std::max(1.0, std::abs(r)); }));
    };
    if (y11 < no_admittance * size) return count(ground(scaled_, {x_}));
    if (y22 < no_admittance * size) return count(ground(scaled_, {y_}));
    // Both matter: two copies, one with x and one with y grounded, driven together so that their currents sum to zero:
    // the determinant is det(rest)²·(y11 + y22), so the roots of the rest are counted once too often.
    const auto rest = count(ground(scaled_, {x_, y_}));
    if (!rest) return std::nullopt;
    const Pencil a = ground(scaled_, {y_}), b = ground(scaled_, {x_});
    const int n = a.size(), at_a = x_ < y_ ? x_ : x_ - 1, at_b = y_ < x_ ? y_ : y_ - 1;
    const auto both = [&](const Matrix& ma, const Matrix& mb) {
        Matrix m = Matrix::Zero(2 * n, 2 * n);
        m.topLeftCorner(n, n) = ma;
        m.bottomRightCorner(n, n) = mb;
        return fold(m, n + at_b, at_a, 1);
    };
    const auto together = count({both(a.G, b.G), both(a.C, b.C)});
    if (!together) return std::nullopt;
    return *together - *rest;
}

} // namespace sinewright
