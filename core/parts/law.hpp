#pragma once
/// A nonlinear law: a small vector function of a few controlling quantities, evaluated over many samples at once.
/// Operating point and linearisation call it with one sample, harmonic balance with all samples of a cycle.
#include "core/parts/dual.hpp"
#include <array>
#include <limits>
#include <memory>

namespace sinewright {

/// Samples are the fast index: u[c * count + k] is control c at sample k.
/// i = static output (current, rate or source value), q = charge-like output (enters through d/dt).
/// Derivatives: di[(o * controls + c) * count + k] = ∂i_o/∂u_c at sample k; dq likewise.
struct LawSamples {
    int count = 0;
    const double* u = nullptr;
    double* i = nullptr;
    double* di = nullptr; ///< may be null: derivatives not wanted
    double* q = nullptr;  ///< may be null when the law stores no charge
    double* dq = nullptr;
};

class Law {
  public:
    virtual ~Law() = default;
    virtual int controls() const = 0;
    virtual int outputs() const = 0;
    virtual bool stores_charge() const = 0;
    /// Pure: no state, no allocation. Every entry asked for is written.
    virtual void evaluate(const LawSamples& samples) const = 0;
    /// Voltage over which control c changes the output e-fold (n·kT/q of a junction); 0: no step limiting needed.
    virtual double limiting_scale_v(int control) const {
        (void)control;
        return 0;
    }
};
using LawPtr = std::shared_ptr<const Law>;

/// Wraps equations written once, templated on the scalar. `Equations` has
///   static constexpr int controls, outputs; static constexpr bool stores_charge;
///   template <class T> void operator()(const std::array<T, controls>& u, std::array<T, outputs>& i, std::array<T,
///   outputs>& q) const; (optional) double limiting_scale_v(int) const;
/// Derivatives come from forward dual numbers, so they are exact to rounding.
template <class Equations> class LawOf final : public Law {
  public:
    explicit LawOf(Equations equations) : equations_(equations) {}
    int controls() const override { return Equations::controls; }
    int outputs() const override { return Equations::outputs; }
    bool stores_charge() const override { return Equations::stores_charge; }
    double limiting_scale_v(int control) const override {
        if constexpr (requires { equations_.limiting_scale_v(control); }) return equations_.limiting_scale_v(control);
        return Law::limiting_scale_v(control);
    }
    void evaluate(const LawSamples& s) const override {
        if (s.di)
            evaluate_as<Dual<Equations::controls>>(s);
        else
            evaluate_as<double>(s);
    }

  private:
    template <class T> void evaluate_as(const LawSamples& s) const {
        constexpr int nu = Equations::controls, no = Equations::outputs;
        for (int k = 0; k < s.count; ++k) {
            std::array<T, nu> u;
            std::array<T, no> i{}, q{};
            for (int c = 0; c < nu; ++c) {
                u[c] = T(s.u[c * s.count + k]);
                if constexpr (!std::is_same_v<T, double>) u[c].d[c] = 1;
            }
            equations_(u, i, q);
            for (int o = 0; o < no; ++o) {
                store(i[o], s.i, s.di, o, k, s.count);
                if (Equations::stores_charge && s.q) store(q[o], s.q, s.dq, o, k, s.count);
            }
        }
    }
    template <class T> static void store(const T& y, double* value, double* derivative, int o, int k, int count) {
        if constexpr (std::is_same_v<T, double>) {
            value[o * count + k] = y;
        } else {
            value[o * count + k] = y.v;
            if (derivative)
                for (int c = 0; c < Equations::controls; ++c)
                    derivative[(o * Equations::controls + c) * count + k] = y.d[c];
        }
    }
    Equations equations_;
};

template <class Equations> LawPtr law_of(Equations equations) { return std::make_shared<LawOf<Equations>>(equations); }

} // namespace sinewright
