#include "core/analysis/harmonic_balance.hpp"
#include <cmath>

namespace sinewright {

namespace {

/// Below these parts of its rest and of the observed amplitude a control is rounding and is not asked to settle.
constexpr double rounding_of_rest = 1e-7, smallest_share = 1e-9;

/// Adds δR = P δU + M conj(δU) as a real block; rows and columns of DC hold a real part only.
void add_block(Matrix& j, int row, bool row_is_dc, int column, Complex p, Complex m) {
    const Complex sum = p + m, difference = p - m;
    j(row, column) += sum.real();
    if (row_is_dc) {
        j(row, column + 1) -= difference.imag();
        return;
    }
    j(row + 1, column) += sum.imag();
    j(row, column + 1) -= difference.imag();
    j(row + 1, column + 1) += difference.real();
}

} // namespace

HarmonicBalance::HarmonicBalance(const Ports& ports, const HarmonicLinear& linear, const HalfWave& symmetry,
                                 ExcessKind kind, double w0_rad_per_s)
    : ports_(ports), linear_(linear), symmetry_(symmetry), kind_(kind), w0_rad_per_s_(w0_rad_per_s) {}

void HarmonicBalance::set_resolution(int highest, int samples) {
    highest_ = highest;
    if (transform_.samples() != samples) transform_ = CycleTransform(samples);
    index_ = Eigen::MatrixXi::Constant(highest + 1, ports_.controls(), -1);
    packed_ = 0;
    for (int k = 0; k <= highest; ++k)
        for (int c = 0; c < ports_.controls(); ++c)
            if (symmetry_.allows(c, k)) index_(k, c) = packed_, packed_ += k == 0 ? 1 : 2;
    responses_.resize(highest + 1);
}

bool HarmonicBalance::active(int k) const { return k == 1 || (index_.row(k).array() >= 0).any(); }

Eigen::MatrixXcd HarmonicBalance::unpack(const Vector& u) const {
    Eigen::MatrixXcd harmonics = Eigen::MatrixXcd::Zero(highest_ + 1, ports_.controls());
    for (int k = 0; k <= highest_; ++k)
        for (int c = 0; c < ports_.controls(); ++c)
            if (const int at = index_(k, c); at >= 0)
                harmonics(k, c) = k == 0 ? Complex(u[at]) : Complex(u[at], u[at + 1]);
    return harmonics;
}

Vector HarmonicBalance::pack(const Eigen::MatrixXcd& harmonics) const {
    Vector u = Vector::Zero(packed_);
    for (int k = 0; k <= std::min<int>(highest_, static_cast<int>(harmonics.rows()) - 1); ++k)
        for (int c = 0; c < ports_.controls(); ++c)
            if (const int at = index_(k, c); at >= 0) {
                u[at] = harmonics(k, c).real();
                if (k > 0) u[at + 1] = harmonics(k, c).imag();
            }
    return u;
}

Excess HarmonicBalance::excess_at(const CyclePoint& point) const {
    Excess excess;
    if (kind_ == ExcessKind::gain)
        excess.gain = std::exp(point.excess);
    else
        excess.growth_per_s = point.excess * w0_rad_per_s_;
    return excess;
}

Vector HarmonicBalance::scale(const CyclePoint& point) const {
    const Eigen::MatrixXcd harmonics = unpack(point.u);
    const Vector largest = harmonics.cwiseAbs().colwise().maxCoeff();
    Vector s(packed_);
    for (int c = 0; c < ports_.controls(); ++c) {
        const double floor = std::abs(ports_.u_rest[c]) * rounding_of_rest + std::exp(point.log_a) * smallest_share;
        const double size = std::max(largest[c], floor);
        for (int k = 0; k <= highest_; ++k)
            if (const int at = index_(k, c); at >= 0) {
                s[at] = size;
                if (k > 0) s[at + 1] = size;
            }
    }
    return s;
}

void HarmonicBalance::spectrum_of(const Eigen::MatrixXcd& harmonics, const CycleTransform& transform, int highest,
                                  bool derivatives, PortSamples& port_samples, Spectrum& out) const {
    Matrix du;
    transform.to_samples(harmonics, du);
    const int n = transform.samples(), half = n / 2;
    ports_.evaluate(du, symmetry_.holds ? half : n, derivatives, port_samples);
    if (symmetry_.holds) { // the second half of the cycle mirrors the first
        for (int o = 0; o < ports_.outputs(); ++o)
            for (Matrix* m : {&port_samples.i, &port_samples.q})
                m->col(o).tail(half) = symmetry_.output[o] * m->col(o).head(half);
        for (std::size_t k = 0; derivatives && k < ports_.pairs().size(); ++k) {
            const auto [o, c] = ports_.pairs()[k];
            for (Matrix* m : {&port_samples.di, &port_samples.dq})
                m->col(k).tail(half) = symmetry_.output[o] * symmetry_.control[c] * m->col(k).head(half);
        }
    }
    transform.to_coefficients(port_samples.i, highest, out.i);
    if (ports_.stores_charge()) transform.to_coefficients(port_samples.q, highest, out.q);
    if (!derivatives) return;
    transform.to_coefficients(port_samples.di, 2 * highest, out.di);
    if (ports_.stores_charge()) transform.to_coefficients(port_samples.dq, 2 * highest, out.dq);
}

/// I_k + s Q_k as peak phasors.
Eigen::VectorXcd HarmonicBalance::drive(int k, Complex s, const Spectrum& spectrum) const {
    Eigen::VectorXcd v = spectrum.i.row(k).transpose();
    if (ports_.stores_charge()) v += s * spectrum.q.row(k).transpose();
    return k == 0 ? v : Eigen::VectorXcd(2.0 * v);
}

int HarmonicBalance::row_of(int k, int output_row) const {
    return output_row < ports_.controls() ? index_(k, output_row) : packed_; // the probe's row
}

/// Element derivatives: δI_k = g_{k−l} δU_l + g_{k+l} conj(δU_l), two-sided g of ∂i/∂u; DC: δI_0 = Re(conj(g_l) δU_l),
/// and of DC: δI_k = 2 g_k δU_0.
void HarmonicBalance::add_elements_to_jacobian(int k, const HarmonicResponse& response, Matrix& jacobian) const {
    const bool charge = ports_.stores_charge();
    const auto coefficient = [&](int pair, int n) { // of e^{jnθ} in ∂i/∂u + s ∂q/∂u
        const int at = std::abs(n);
        const auto side = [n](Complex c) { return n < 0 ? std::conj(c) : c; };
        const Complex g = side(spectrum_.di(at, pair));
        return charge ? g + response.s * side(spectrum_.dq(at, pair)) : g;
    };
    const int rows = static_cast<int>(response.Z.rows());
    for (std::size_t pair = 0; pair < ports_.pairs().size(); ++pair) {
        const auto [o, c] = ports_.pairs()[pair];
        for (int l = 0; l <= highest_; ++l) {
            const int column = index_(l, c);
            if (column < 0) continue;
            const Complex minus = coefficient(static_cast<int>(pair), k - l);
            const Complex plus = l == 0 ? Complex(0) : coefficient(static_cast<int>(pair), k + l);
            for (int r = 0; r < rows; ++r) {
                const int row = row_of(k, r);
                if (row < 0) continue;
                const Complex z = response.Z(r, o);
                if (l == 0) { // a real column
                    const Complex d = z * minus * (k == 0 ? 1.0 : 2.0);
                    jacobian(row, column) += d.real();
                    if (k > 0) jacobian(row + 1, column) += d.imag();
                } else {
                    const double share = k == 0 ? 0.5 : 1.0;
                    add_block(jacobian, row, k == 0, column, share * z * minus, share * z * plus);
                }
            }
        }
    }
}

/// Columns of ln a, ln ω and the excess.
void HarmonicBalance::add_edges_to_jacobian(int k, const HarmonicResponse& response, const Eigen::VectorXcd& x,
                                            double a, double w, Matrix& jacobian) const {
    Eigen::VectorXcd q = Eigen::VectorXcd::Zero(ports_.outputs());
    if (ports_.stores_charge()) q = 2.0 * spectrum_.q.row(k).transpose();
    const Eigen::VectorXcd slope = linear_.slope(k, response, x, q);
    for (int r = 0; r < response.Z.rows(); ++r) {
        const int row = row_of(k, r);
        if (row < 0) continue;
        const auto put = [&](int column, Complex value) {
            jacobian(row, packed_ + column) = value.real();
            jacobian(row + 1, packed_ + column) = value.imag();
        };
        if (k == 1) put(0, -a * response.Z(r, linear_.column_of_amplitude()));
        put(1, Complex(0, k * w) * slope[r]);
        if (kind_ == ExcessKind::growth) {
            if (k == 1) put(2, w0_rad_per_s_ * slope[r]);
        } else {
            put(2, linear_gain_ * response.Z(r, linear_.column_of_gain()) * x[linear_.joint_column()]);
        }
    }
}

bool HarmonicBalance::evaluate(const CyclePoint& point, Vector& residual, Matrix* jacobian) {
    const double a = std::exp(point.log_a), w = std::exp(point.log_w);
    const Excess excess = excess_at(point);
    linear_gain_ = excess.gain;
    const Eigen::MatrixXcd harmonics = unpack(point.u);
    if (!harmonics.allFinite()) return false;
    spectrum_of(harmonics, transform_, highest_, jacobian != nullptr, port_samples_, spectrum_);
    residual.setZero(equations());
    if (jacobian) jacobian->setZero(equations(), equations() + 1);
    for (int k = 0; k <= highest_; ++k) {
        if (!active(k)) continue;
        HarmonicResponse& response = responses_[k];
        linear_.respond(k, w, excess, response);
        const Eigen::VectorXcd v = drive(k, response.s, spectrum_);
        const Eigen::VectorXcd x = linear_.scaled_unknowns(k, response, v, a);
        Eigen::VectorXcd answer = -response.Z.leftCols(ports_.outputs()) * v;
        if (k == 1) answer += a * response.Z.col(linear_.column_of_amplitude());
        for (int r = 0; r < answer.size(); ++r) {
            const int row = row_of(k, r);
            if (row < 0) continue;
            const Complex left = r < ports_.controls() ? harmonics(k, r) : Complex(0);
            residual[row] = (left - answer[r]).real();
            if (k > 0) residual[row + 1] = (left - answer[r]).imag();
        }
        if (!jacobian) continue;
        add_elements_to_jacobian(k, response, *jacobian);
        if (k > 0) add_edges_to_jacobian(k, response, x, a, w, *jacobian);
    }
    if (jacobian) {
        jacobian->diagonal().head(packed_).array() += 1;
        jacobian->bottomRows(2) /= a;
        jacobian->block(packed_, packed_, 2, 1) -= residual.tail(2) / a; // d(e/a)/d ln a has its second term
    }
    residual.tail(2) /= a;
    return residual.allFinite() && (!jacobian || jacobian->allFinite());
}

Eigen::MatrixXcd HarmonicBalance::answered(const CyclePoint& point, int highest, int samples) const {
    return all_unknowns(point, highest, samples) * ports_.A;
}

Eigen::MatrixXcd HarmonicBalance::all_unknowns(const CyclePoint& point, int highest, int samples) const {
    const CycleTransform transform(samples);
    PortSamples port_samples;
    Spectrum spectrum;
    spectrum_of(unpack(point.u), transform, highest, false, port_samples, spectrum);
    Eigen::MatrixXcd all = Eigen::MatrixXcd::Zero(highest + 1, linear_.size());
    HarmonicResponse response;
    const Excess excess = excess_at(point);
    for (int k = 0; k <= highest; ++k) {
        if (k % 2 == 0 && symmetry_.all_odd()) continue;
        linear_.respond(k, std::exp(point.log_w), excess, response);
        all.row(k) = linear_.unknowns(k, response, drive(k, response.s, spectrum), std::exp(point.log_a)).transpose();
    }
    return all;
}

} // namespace sinewright
