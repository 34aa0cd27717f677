#pragma once
/// The equations of a periodic steady state in harmonics of the ports, with their exact Jacobian.
#include "core/analysis/harmonic_linear.hpp"
#include "core/analysis/harmonic_symmetry.hpp"
#include "core/analysis/harmonic_transform.hpp"

namespace sinewright {

/// Which number stands for "more or less than a steady oscillation needs" along the amplitude map.
enum class ExcessKind {
    gain, ///< ln κ, κ the gain that the opened cut would have to have: 1/κ is what the loop makes up at this amplitude
    growth ///< σ/ω₀, the envelope's momentary growth rate: needs no cut and no Barkhausen point
};

/// A point on the way to, or at, the steady state.
struct CyclePoint {
    Vector u;          ///< packed harmonics of the controls, deviations from rest
    double log_a = 0;  ///< ln of the observed unknown's fundamental, peak
    double log_w = 0;  ///< ln of the angular frequency in rad/s
    double excess = 0; ///< ln κ or σ/ω₀; 0 at the steady state
};

/// For each control c and each harmonic k that its symmetry allows:
///   U_k − U_k(I + s_k Q) = 0, and for the fundamental additionally the probe's drive e = 0,
/// where U_k(·) is the linear part's answer. Unknowns: U, ln a, ln ω and one excess. I and Q come from N samples of
/// the elements (alternating frequency and time, Cameron & Griffin 1989).
class HarmonicBalance {
  public:
    /// @param symmetry  parity of the ports under half a cycle's shift, or none.
    HarmonicBalance(const Ports& ports, const HarmonicLinear& linear, const HalfWave& symmetry, ExcessKind kind,
                    double w0_rad_per_s);

    /// Highest harmonic K and samples N (power of two, at least 4K + 4).
    void set_resolution(int highest, int samples);
    int highest() const { return highest_; }
    int samples() const { return transform_.samples(); }

    int packed() const { return packed_; }        ///< length of CyclePoint::u
    int equations() const { return packed_ + 2; } ///< residuals
    ExcessKind kind() const { return kind_; }
    const HarmonicLinear& linear() const { return linear_; }
    const Ports& ports() const { return ports_; }
    const HalfWave& symmetry() const { return symmetry_; }

    /// Residual [equations] and, when wanted, Jacobian [equations × (equations + 1)]; the last three columns belong to
    /// ln a, ln ω and the excess. The last two rows are the probe's drive, relative to a.
    /// @return false when something is not finite.
    bool evaluate(const CyclePoint& point, Vector& residual, Matrix* jacobian);

    Eigen::MatrixXcd unpack(const Vector& u) const;       ///< (K + 1)×controls
    Vector pack(const Eigen::MatrixXcd& harmonics) const; ///< harmonics beyond K or against the symmetry are dropped
    Excess excess_at(const CyclePoint& point) const;
    double growth_unit_per_s() const { return w0_rad_per_s_; }

    /// Rough size of each control, one per packed entry: its largest harmonic, DC included.
    Vector scale(const CyclePoint& point) const;

    /// Harmonics 0 … `highest` (< N/2) of the controls as the linear part answers to the elements' currents at this
    /// point, with N samples: within K a fixed point, beyond K what truncation has left out.
    Eigen::MatrixXcd answered(const CyclePoint& point, int highest, int samples) const;
    /// Harmonics of all unknowns, deviations from rest, in circuit units: (highest + 1)×unknowns.
    Eigen::MatrixXcd all_unknowns(const CyclePoint& point, int highest, int samples) const;

  private:
    struct Spectrum {
        Eigen::MatrixXcd i, q, di, dq; ///< two-sided coefficients from 0 up
    };
    void spectrum_of(const Eigen::MatrixXcd& harmonics, const CycleTransform& transform, int highest, bool derivatives,
                     PortSamples& port_samples, Spectrum& out) const;
    Eigen::VectorXcd drive(int k, Complex s, const Spectrum& spectrum) const;
    void add_elements_to_jacobian(int k, const HarmonicResponse& response, Matrix& jacobian) const;
    void add_edges_to_jacobian(int k, const HarmonicResponse& response, const Eigen::VectorXcd& x, double a, double w,
                               Matrix& jacobian) const;
    int row_of(int k, int output_row) const;
    bool active(int k) const;

    const Ports& ports_;
    const HarmonicLinear& linear_;
    HalfWave symmetry_;
    ExcessKind kind_;
    double w0_rad_per_s_;
    double linear_gain_ = 1; ///< κ of the evaluation under way
    int highest_ = 0, packed_ = 0;
    Eigen::MatrixXi index_; ///< (K + 1)×controls: place of Re U_k in the packed vector, −1: absent
    CycleTransform transform_{4};
    PortSamples port_samples_;
    Spectrum spectrum_;
    std::vector<HarmonicResponse> responses_;
};

} // namespace sinewright
