#include "core/analysis/harmonic_transform.hpp"
#include <cassert>
#include <unsupported/Eigen/FFT>

namespace sinewright {

struct CycleTransform::Plan {
    Eigen::FFT<double> fft;
    std::vector<std::complex<double>> half;
    explicit Plan(int n) : half(n / 2 + 1) { fft.SetFlag(Eigen::FFT<double>::HalfSpectrum); }
};

CycleTransform::CycleTransform(int samples) : n_(samples), plan_(std::make_unique<Plan>(samples)) {}
CycleTransform::~CycleTransform() = default;
CycleTransform::CycleTransform(CycleTransform&&) noexcept = default;
CycleTransform& CycleTransform::operator=(CycleTransform&&) noexcept = default;

void CycleTransform::to_samples(const Eigen::MatrixXcd& harmonics, Eigen::MatrixXd& samples) const {
    assert(harmonics.rows() <= n_ / 2);
    samples.resize(n_, harmonics.cols());
    auto& half = plan_->half;
    for (Eigen::Index c = 0; c < harmonics.cols(); ++c) {
        std::fill(half.begin(), half.end(), 0.0);
        half[0] = harmonics(0, c) * double(n_);
        for (Eigen::Index k = 1; k < harmonics.rows(); ++k) half[k] = harmonics(k, c) * (0.5 * n_);
        plan_->fft.inv(samples.col(c).data(), half.data(), n_);
    }
}

void CycleTransform::to_coefficients(const Eigen::MatrixXd& samples, int highest,
                                     Eigen::MatrixXcd& coefficients) const {
    coefficients.resize(highest + 1, samples.cols());
    auto& half = plan_->half;
    for (Eigen::Index c = 0; c < samples.cols(); ++c) {
        plan_->fft.fwd(half.data(), samples.col(c).data(), n_);
        for (int k = 0; k <= highest; ++k) coefficients(k, c) = half[k] / double(n_);
    }
}

int power_of_two_from(int n) {
    int p = 4;
    while (p < n) p *= 2;
    return p;
}

} // namespace sinewright
