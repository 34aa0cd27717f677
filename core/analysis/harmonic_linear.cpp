#include "core/analysis/harmonic_linear.hpp"
#include "core/analysis/pencil_reduction.hpp"
#include <cmath>

namespace sinewright {

namespace {

/// The preferred unknown is observed when its share in the mode is at least this part of the largest net's.
constexpr double visible_share = 1e-3;

} // namespace

HarmonicLinear::HarmonicLinear(const Circuit& circuit, const Ports& ports, double w0_rad_per_s)
    : net_count_(circuit.net_count) {
    Pencil pencil{ports.G, ports.C};
    Matrix B = ports.B;
    if (circuit.opened >= 0) {
        joint_row_ = circuit.opened, joint_column_ = circuit.rest;
        for (Matrix* m : {&pencil.G, &pencil.C, &B}) {
            m->row(circuit.rest) += m->row(circuit.opened);
            m->row(circuit.opened).setZero();
        }
        pencil.G(joint_row_, circuit.opened) = 1;
        pencil.G(joint_row_, joint_column_) = -1;
    }
    const PencilScaling scaling = equilibrate(pencil, w0_rad_per_s);
    G_ = pencil.G;
    C_ = pencil.C / scaling.w0_rad_per_s;
    A_ = scaling.column.asDiagonal() * ports.A;
    B_ = scaling.row.asDiagonal() * B;
    column_scale_ = scaling.column;
    if (joint_row_ >= 0) {
        joint_entry_ = G_(joint_row_, joint_column_);
        G_(joint_row_, joint_column_) = 0;
    }
}

Eigen::MatrixXcd HarmonicLinear::matrix(Complex s, double gain) const {
    Eigen::MatrixXcd y = G_.cast<Complex>() + s * C_;
    if (opened()) y(joint_row_, joint_column_) += gain * joint_entry_;
    return y;
}

bool HarmonicLinear::set_probe(Complex s, double gain, int preferred, Eigen::VectorXcd& mode) {
    // Two inverse iterations from a fixed, structureless start give the smallest singular direction near a root.
    const Eigen::MatrixXcd y = matrix(s, gain);
    Eigen::PartialPivLU<Eigen::MatrixXcd> lu(y);
    const double least_pivot = lu.matrixLU().diagonal().cwiseAbs().minCoeff();
    if (!(least_pivot > 1e-14)) lu.compute(y + 1e-13 * Eigen::MatrixXcd::Identity(size(), size()));
    Eigen::VectorXcd v(size()), w(size());
    for (int k = 0; k < size(); ++k) v[k] = w[k] = Complex(std::cos(1.0 + 3.0 * k), std::sin(2.0 + 5.0 * k));
    for (int round = 0; round < 3; ++round) {
        v = lu.solve(v), w = lu.adjoint().solve(w);
        if (!v.allFinite() || !w.allFinite()) return false;
        v.normalize(), w.normalize();
    }
    probe_ = w;
    mode = column_scale_.cwiseProduct(v);
    int largest = 0;
    mode.head(net_count_).cwiseAbs().maxCoeff(&largest);
    observed_ =
        preferred >= 0 && std::abs(mode[preferred]) > visible_share * std::abs(mode[largest]) ? preferred : largest;
    observed_entry_ = column_scale_[observed_];
    mode /= Complex(mode[observed_]);
    return true;
}

void HarmonicLinear::respond(int k, double w_rad_per_s, const Excess& excess, HarmonicResponse& out) const {
    const bool probed = k == 1;
    const int n = size(), p = outputs(), rows = n + (probed ? 1 : 0);
    out.s = Complex(probed ? excess.growth_per_s : 0, k * w_rad_per_s);
    const double gain = k == 0 ? 1 : excess.gain;
    Eigen::MatrixXcd y = Eigen::MatrixXcd::Zero(rows, rows);
    y.topLeftCorner(n, n) = matrix(out.s, gain);
    out.S = Eigen::MatrixXcd::Zero(rows, p + (opened() ? 1 : 0) + (probed ? 1 : 0));
    out.S.topLeftCorner(n, p) = B_;
    if (opened()) out.S(joint_row_, column_of_gain()) = joint_entry_;
    if (probed) {
        y.col(n).head(n) = probe_;
        y(n, observed_) = observed_entry_;
        out.S(n, column_of_amplitude()) = 1;
    }
    out.lu.compute(y);
    out.S = out.lu.solve(out.S).eval();
    out.Z.resize(controls() + (probed ? 1 : 0), out.S.cols());
    out.Z.topRows(controls()).noalias() = A_.transpose() * out.S.topRows(n);
    if (probed) out.Z.row(controls()) = out.S.row(n);
}

Eigen::VectorXcd HarmonicLinear::scaled_unknowns(int k, const HarmonicResponse& response, const Eigen::VectorXcd& drive,
                                                 double a) const {
    Eigen::VectorXcd x = -response.S.leftCols(outputs()) * drive;
    if (k == 1) x += a * response.S.col(column_of_amplitude());
    return x;
}

Eigen::VectorXcd HarmonicLinear::unknowns(int k, const HarmonicResponse& response, const Eigen::VectorXcd& drive,
                                          double a) const {
    return column_scale_.cwiseProduct(scaled_unknowns(k, response, drive, a).head(size()));
}

Eigen::VectorXcd HarmonicLinear::slope(int k, const HarmonicResponse& response, const Eigen::VectorXcd& x_scaled,
                                       const Eigen::VectorXcd& q) const {
    const int n = size();
    Eigen::VectorXcd right = Eigen::VectorXcd::Zero(response.S.rows());
    right.head(n) = C_ * x_scaled.head(n) + B_ * q;
    const Eigen::VectorXcd answer = response.lu.solve(right);
    Eigen::VectorXcd out(controls() + (k == 1 ? 1 : 0));
    out.head(controls()) = A_.transpose() * answer.head(n);
    if (k == 1) out[controls()] = answer[n];
    return out;
}

} // namespace sinewright
