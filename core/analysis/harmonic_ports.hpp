#pragma once
/// The nonlinear part of a circuit as one vector function of as few controls as possible, about its DC rest.
#include "core/circuit/circuit.hpp"
#include <span>

namespace sinewright {

/// Samples of the ports over one cycle; samples are the fast index (column-major, N×ports).
struct PortSamples {
    Matrix i, q; ///< N×outputs: what the linear stamps at rest do not already hold, i(u) − i(u₀) − g₀·δu, and charges
    Matrix di, dq; ///< N×pairs: derivatives ∂i_o/∂u_c − g₀ and ∂q_o/∂u_c − c₀ of the pairs that can be non-zero
};

/// All controls of all elements that are the same combination of unknowns, up to a factor, share one port (an
/// antiparallel diode pair has one); likewise their injections. The circuit about its rest x₀ (f(x₀) = 0) is then
///   (G + d/dt C) δx + B (ĩ(δu) + d/dt q̃(δu)) = 0,  δu = Aᵀ δx,
/// where G and C hold the derivatives at rest: a node that only nonlinear elements reach, or an integrator held by its
/// walls, is regular at DC whenever the rest is.
class Ports {
  public:
    struct Pair {
        int output, control;
    };

    /// @param x_rest  DC operating point, size n of that circuit.
    Ports(const Circuit& circuit, const Vector& x_rest);

    int controls() const { return static_cast<int>(A.cols()); }
    int outputs() const { return static_cast<int>(B.cols()); }
    bool stores_charge() const { return stores_charge_; }
    const std::vector<Pair>& pairs() const { return pairs_; }

    /// Evaluates ĩ, q̃ and, when wanted, their derivatives at N samples.
    /// @param du     N×controls, deviations from rest.
    /// @param count  rows of du to evaluate (from the first); the rest of `out` is left alone.
    void evaluate(const Matrix& du, int count, bool derivatives, PortSamples& out) const;

    Matrix A, B;             ///< n×controls, n×outputs
    Matrix G, C;             ///< n×n, linear stamps and the derivatives at rest
    Vector u_rest;           ///< controls at rest
    Matrix linear_pattern;   ///< |G| + |C| of the linear stamps alone: what ties unknowns together
    Vector di_rest, dq_rest; ///< derivatives at rest of the pairs
    Vector i_rest, q_rest;   ///< outputs at rest
    /// Voltage scale of each control over which some element changes e-fold; 0: none.
    Vector limiting_scale;

  private:
    struct Use {
        LawPtr law;
        std::vector<int> control; ///< port of each control; −1: tied to gnd
        std::vector<double> control_weight;
        std::vector<int> output; ///< likewise
        std::vector<double> output_weight;
        std::vector<int> pair; ///< of (output, control), output slow; −1: none
    };
    void gather(const Use& use, const Matrix& du, int count, std::vector<double>& u) const;
    void find_rest();

    std::vector<Use> uses_;
    std::vector<Pair> pairs_;
    bool stores_charge_ = false;
};

} // namespace sinewright
