#pragma once
/// Between harmonics and equidistant samples of one cycle.
/// Peak phasors throughout: u(θ) = U₀ + Σ Re(U_k e^{jkθ}), θ = 2πn/N.
#include <Eigen/Core>
#include <memory>

namespace sinewright {

class CycleTransform {
  public:
    /// @param samples  N, a power of two of at least 4.
    explicit CycleTransform(int samples);
    ~CycleTransform();
    CycleTransform(CycleTransform&&) noexcept;
    CycleTransform& operator=(CycleTransform&&) noexcept;

    int samples() const { return n_; }
    /// Columns of harmonics 0 … K (K < N/2) to columns of N samples.
    void to_samples(const Eigen::MatrixXcd& harmonics, Eigen::MatrixXd& samples) const;
    /// Two-sided coefficients c_n = (1/N) Σ g e^{−jnθ} for n = 0 … highest (≤ N/2) of each column.
    /// A real waveform's harmonics are c₀ and 2·c_k.
    void to_coefficients(const Eigen::MatrixXd& samples, int highest, Eigen::MatrixXcd& coefficients) const;

  private:
    struct Plan;
    int n_;
    std::unique_ptr<Plan> plan_;
};

/// Smallest power of two that is at least n.
int power_of_two_from(int n);

} // namespace sinewright
