#include "core/analysis/floquet.hpp"
#include "core/analysis/harmonic_transform.hpp"
#include "core/analysis/pencil_reduction.hpp"
#include <Eigen/Eigenvalues>
#include <Eigen/LU>
#include <Eigen/QR>
#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>

namespace sinewright {

namespace {

constexpr double two_pi = 2 * std::numbers::pi;
/// Multipliers below e^−20 are near the rounding of the map.
constexpr double fastest_per_cycle = 20;
constexpr double ringing_below = 0.3;
constexpr int most_steps = 8192;

/// Radau IIA, 3 stages (Hairer & Wanner II, table IV.5.6).
struct Radau {
    std::array<double, 3> c;
    std::array<std::array<double, 3>, 3> a;
};
const Radau& radau() {
    static const double r = std::sqrt(6.0);
    static const Radau table{{(4 - r) / 10, (4 + r) / 10, 1},
                             {{{(88 - 7 * r) / 360, (296 - 169 * r) / 1800, (-2 + 3 * r) / 225},
                               {(296 + 169 * r) / 1800, (88 + 7 * r) / 360, (-2 - 3 * r) / 225},
                               {(16 - r) / 36, (16 + r) / 36, 1.0 / 9}}}};
    return table;
}

/// The variational equation in scaled units and in the cycle's angle: d/dθ [C(θ) y] + G(θ) y = 0.
class Variation {
  public:
    Variation(const Ports& ports, const Eigen::MatrixXcd& unknowns, double w_rad_per_s)
        : ports_(ports), controls_(unknowns * ports.A) {
        Pencil pencil{ports.G, ports.C};
        const PencilScaling scaling = equilibrate(pencil, w_rad_per_s);
        G_ = pencil.G, C_ = pencil.C;
        A_ = scaling.column.asDiagonal() * ports.A;
        B_ = scaling.row.asDiagonal() * ports.B;
        charge_factor_ = w_rad_per_s;
        // dx/dθ at θ = 0, in scaled unknowns.
        Eigen::VectorXcd slope = Eigen::VectorXcd::Zero(unknowns.cols());
        for (Eigen::Index k = 1; k < unknowns.rows(); ++k)
            slope += Complex(0, static_cast<double>(k)) * unknowns.row(k).transpose();
        slope_ = scaling.column.cwiseInverse().cwiseProduct(slope.real());
    }

    int size() const { return static_cast<int>(G_.rows()); }
    /// Orthonormal columns that hold every charge the circuit can have.
    Matrix charge_space() const {
        Matrix reach(size(), size() + (ports_.stores_charge() ? B_.cols() : 0));
        reach.leftCols(size()) = C_;
        if (ports_.stores_charge()) reach.rightCols(B_.cols()) = charging_outputs();
        Eigen::ColPivHouseholderQR<Matrix> qr(reach);
        qr.setThreshold(1e-13);
        return qr.householderQ() * Matrix::Identity(size(), qr.rank());
    }
    Vector charge_slope() const { return capacitance(start_, 0) * slope_; }

    /// Map of charges over one period with N steps; nothing when a step is singular.
    std::optional<Matrix> period_map(const Matrix& basis, int steps, std::stop_token stop);

  private:
    Matrix charging_outputs() const {
        Matrix b = Matrix::Zero(size(), B_.cols());
        for (std::size_t k = 0; k < ports_.pairs().size(); ++k)
            if (start_.dq.size() == 0 || start_.dq.col(k).cwiseAbs().maxCoeff() > 0 || ports_.dq_rest[k] != 0)
                b.col(ports_.pairs()[k].output) = B_.col(ports_.pairs()[k].output);
        return b;
    }
    void sample(double shift, int steps, PortSamples& out) const;
    Matrix conductance(const PortSamples& samples, int n) const {
        Matrix g = G_;
        for (std::size_t k = 0; k < ports_.pairs().size(); ++k) {
            const auto [o, c] = ports_.pairs()[k];
            g += samples.di(n, k) * B_.col(o) * A_.col(c).transpose();
        }
        return g;
    }
    Matrix capacitance(const PortSamples& samples, int n) const {
        Matrix m = C_;
        if (!ports_.stores_charge()) return m;
        for (std::size_t k = 0; k < ports_.pairs().size(); ++k) {
            const auto [o, c] = ports_.pairs()[k];
            m += charge_factor_ * samples.dq(n, k) * B_.col(o) * A_.col(c).transpose();
        }
        return m;
    }

    const Ports& ports_;
    Eigen::MatrixXcd controls_;
    Matrix G_, C_, A_, B_;
    double charge_factor_ = 1;
    Vector slope_;
    PortSamples start_; ///< at θ = 0, in row 0
};

/// Derivatives of the elements at θ = (n + shift)·2π/N.
void Variation::sample(double shift, int steps, PortSamples& out) const {
    Eigen::MatrixXcd turned = controls_;
    for (Eigen::Index k = 1; k < turned.rows(); ++k)
        turned.row(k) *= std::polar(1.0, two_pi * shift * static_cast<double>(k) / steps);
    Matrix du;
    CycleTransform(steps).to_samples(turned, du);
    ports_.evaluate(du, steps, true, out);
}

std::optional<Matrix> Variation::period_map(const Matrix& basis, int steps, std::stop_token stop) {
    const Radau& table = radau();
    std::array<PortSamples, 3> stage;
    for (int i = 0; i < 3; ++i) sample(table.c[i], steps, stage[i]);
    sample(0, steps, start_);
    const int n = size();
    const double h = two_pi / steps;
    Matrix charge = basis, system(3 * n, 3 * n), right(3 * n, basis.cols());
    Eigen::PartialPivLU<Matrix> lu(3 * n);
    for (int step = 0; step < steps; ++step) {
        if (step % 64 == 0 && stop.stop_requested()) return std::nullopt;
        Matrix c_end;
        for (int j = 0; j < 3; ++j) {
            const Matrix g = conductance(stage[j], step), c = capacitance(stage[j], step);
            for (int i = 0; i < 3; ++i) system.block(i * n, j * n, n, n) = h * table.a[i][j] * g;
            system.block(j * n, j * n, n, n) += c;
            right.middleRows(j * n, n) = charge;
            if (j == 2) c_end = c;
        }
        lu.compute(system);
        charge = c_end * lu.solve(right).bottomRows(n); // the last stage is the end of the step
        if (!charge.allFinite()) return std::nullopt;
    }
    return basis.transpose() * charge;
}

std::vector<Complex> eigenvalues_of(const Matrix& m) {
    if (m.rows() == 0) return {};
    const auto values = Eigen::EigenSolver<Matrix>(m, false).eigenvalues();
    return {values.data(), values.data() + values.size()};
}

/// Multipliers of the map with the phase's direction v taken out; `phase` is its own multiplier as computed.
/// Taking it out keeps slow exponents apart from the phase's. Whatever v is wrong by enters all that remain as a sum,
/// which fast ones (small multipliers) can't bear: those are read off the whole map.
std::vector<Complex> other_multipliers(const Matrix& map, const Vector& v, double& phase) {
    constexpr double fast = 0.1;
    const Eigen::HouseholderQR<Matrix> turn(v);
    const Matrix q = turn.householderQ();
    const Matrix turned = q.transpose() * map * q;
    phase = turned(0, 0);
    const Eigen::Index r = map.rows() - 1;
    std::vector<Complex> others = eigenvalues_of(turned.bottomRightCorner(r, r));
    const auto size = [](Complex a, Complex b) { return std::abs(a) < std::abs(b); };
    std::vector<Complex> whole = eigenvalues_of(map);
    std::sort(whole.begin(), whole.end(), size);
    std::sort(others.begin(), others.end(), size);
    for (std::size_t k = 0; k < others.size() && std::abs(whole[k]) < fast; ++k) others[k] = whole[k];
    return others;
}

/// Halving the step divides the error by about 32: the exponents are good when they and the phase's have settled.
bool settled(const EnvelopeModes& modes, const std::vector<Complex>& coarser, double per_second, double tolerance) {
    if (modes.exponents.size() != coarser.size()) return false;
    const double slowest = modes.exponents.empty() ? per_second : std::abs(modes.exponents.front());
    const double rounding = 1e-14 * per_second;
    if (modes.phase_error_per_s > std::max(tolerance * slowest, 100 * rounding)) return false;
    for (std::size_t k = 0; k < coarser.size(); ++k) {
        const double per_cycle = -modes.exponents[k].real() / per_second; // rounding weighs more in fast ones
        const double allowed = std::max(10 * tolerance * std::abs(modes.exponents[k]), rounding * std::exp(per_cycle));
        if (std::abs(modes.exponents[k] - coarser[k]) > allowed) return false;
    }
    return true;
}

void judge(EnvelopeModes& modes) {
    modes.stable = true;
    for (const Complex& e : modes.exponents) modes.stable = modes.stable && !(e.real() > 0);
    if (!modes.stable) {
        modes.manner = EnvelopeManner::squegs;
        return;
    }
    if (modes.exponents.empty()) return;
    const Complex slowest = modes.exponents.front();
    if (slowest.imag() != 0) {
        modes.damping_ratio = -slowest.real() / std::abs(slowest);
        if (*modes.damping_ratio < ringing_below) modes.manner = EnvelopeManner::bounces;
    }
    if (slowest.real() < 0) {
        modes.settling_1_percent_s = std::log(100.0) / -slowest.real();
        modes.settling_0_1_percent_s = std::log(1000.0) / -slowest.real();
    }
}

} // namespace

std::optional<EnvelopeModes> envelope_modes(const Ports& ports, const Eigen::MatrixXcd& unknowns, double w_rad_per_s,
                                            double tolerance, std::stop_token stop) {
    Variation variation(ports, unknowns, w_rad_per_s);
    const Matrix basis = variation.charge_space();
    const double per_second = w_rad_per_s / two_pi;
    EnvelopeModes modes;
    std::vector<Complex> coarser;
    const int first = power_of_two_from(std::max<int>(32, 2 * static_cast<int>(unknowns.rows())));
    for (int steps = first; steps <= most_steps; steps *= 2) {
        const auto map = variation.period_map(basis, steps, stop);
        if (!map) return std::nullopt;
        double phase = 1;
        const auto multipliers = other_multipliers(*map, basis.transpose() * variation.charge_slope(), phase);
        modes.exponents.clear();
        for (const Complex& m : multipliers)
            if (std::abs(m) > std::exp(-fastest_per_cycle)) modes.exponents.push_back(std::log(m) * per_second);
        sort_right_most_first(modes.exponents);
        modes.phase_error_per_s = std::abs(phase - 1) * per_second;
        modes.steps = steps;
        if (settled(modes, coarser, per_second, tolerance)) break;
        coarser = modes.exponents;
    }
    judge(modes);
    return modes;
}

} // namespace sinewright
