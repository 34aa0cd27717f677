#pragma once
/// The linear part of a circuit at each harmonic of a cycle, seen from the ports of its nonlinear elements.
#include "core/analysis/harmonic_ports.hpp"
#include <Eigen/LU>
#include <complex>

namespace sinewright {

using Complex = std::complex<double>;

/// Where the linear part is evaluated. At the steady state gain = 1 and growth = 0.
struct Excess {
    double gain = 1;         ///< κ: v_x = κ·v_y at the opened cut for harmonics k ≥ 1 (at DC joined exactly)
    double growth_per_s = 0; ///< σ: the fundamental at σ + jω
};

/// One harmonic: columns of S are the circuit's answers X to unit port currents, then to the cut's gain, then (k = 1)
/// to the amplitude: X = −S_ports·(I + s Q) + S_amplitude·a.
struct HarmonicResponse {
    Complex s;
    Eigen::PartialPivLU<Eigen::MatrixXcd> lu;
    Eigen::MatrixXcd S; ///< unknowns × columns
    Eigen::MatrixXcd Z; ///< controls (and, k = 1, the probe) × columns
};

/// The fundamental is driven by a tone probe with two properties: it fixes the observed phasor, X[observed] = a (real),
/// and the drive e it needs enters the equations along a fixed direction b; e = 0 is the oscillation. The bordered
/// matrix [Y b; cᵀ 0] stays regular where Y is singular: at the Barkhausen point, and in loops without any damping.
/// Sources: piecewise harmonic balance, Nakhla & Vlach 1976; tone probe, Ngoya, Suárez, Sommet & Quéré 1995.
class HarmonicLinear {
  public:
    /// @param circuit  closed, or opened at a cut (then its sides are joined here, with the gain of Excess).
    HarmonicLinear(const Circuit& circuit, const Ports& ports, double w0_rad_per_s);

    int size() const { return static_cast<int>(G_.rows()); }
    int controls() const { return static_cast<int>(A_.cols()); }
    int outputs() const { return static_cast<int>(B_.cols()); }
    bool opened() const { return joint_row_ >= 0; }
    int observed() const { return observed_; }

    /// Puts the probe where the mode at s (nearly a natural frequency) is seen and excited best.
    /// @param preferred  unknown to observe when it takes part in the mode visibly; −1: none.
    /// @return the mode in circuit units, observed entry 1; nothing when the matrix can't be solved.
    bool set_probe(Complex s, double gain, int preferred, Eigen::VectorXcd& mode);

    /// Response at harmonic k and angular frequency ω.
    void respond(int k, double w_rad_per_s, const Excess& excess, HarmonicResponse& out) const;
    /// X in circuit units from the drive (I + s Q) [outputs] and the amplitude a (k = 1).
    Eigen::VectorXcd unknowns(int k, const HarmonicResponse& response, const Eigen::VectorXcd& drive, double a) const;

    /// −∂(controls, probe)/∂s at fixed I and Q: Aᵀ Y⁻¹ (C X + B Q).
    Eigen::VectorXcd slope(int k, const HarmonicResponse& response, const Eigen::VectorXcd& x_scaled,
                           const Eigen::VectorXcd& q) const;
    Eigen::VectorXcd scaled_unknowns(int k, const HarmonicResponse& response, const Eigen::VectorXcd& drive,
                                     double a) const;
    int joint_column() const { return joint_column_; }
    int column_of_gain() const { return outputs(); }
    int column_of_amplitude() const { return outputs() + (opened() ? 1 : 0); }

  private:
    Eigen::MatrixXcd matrix(Complex s, double gain) const;
    Matrix G_, C_, A_, B_; ///< equilibrated; the joined cut's row without its gain entry
    Vector column_scale_;
    int joint_row_ = -1, joint_column_ = -1;
    double joint_entry_ = 0; ///< −1 in scaled units: the entry is this times the gain
    int net_count_ = 0, observed_ = -1;
    double observed_entry_ = 1;
    Eigen::VectorXcd probe_;
};

} // namespace sinewright
