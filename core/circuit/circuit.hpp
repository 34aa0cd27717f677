#pragma once
/// Design → Circuit: the descriptor system d/dt q(x) + f(x) = 0 with named unknowns that every analysis reads.
///   f(x) = G x + B i(Aᵀx) − s,  q(x) = C x + B Q(Aᵀx)
#include "core/design/design.hpp"
#include "core/parts/part_kind.hpp"
#include <Eigen/Dense>

namespace sinewright {

using Matrix = Eigen::MatrixXd;
using Vector = Eigen::VectorXd;

enum class UnknownKind { net_voltage, internal_voltage, branch_current, state };

struct Unknown {
    std::string name; ///< "net out", "D1 junction", "U1 output current", "LA1 temperature"
    std::string part; ///< owner; empty for nets
    UnknownKind kind = UnknownKind::net_voltage;
    std::string unit = "V";
    double typical = 1; ///< usual size, for scaling
    double start = 0;   ///< first guess, and value at power-up for states
};

/// One nonlinear law in place: u_c = Σ weight·x[index]; row[index] += weight·i_o (and d/dt weight·q_o).
struct Element {
    int part = 0; ///< index into Design::parts
    LawPtr law;
    std::vector<Combination> controls;
    std::vector<Combination> injections;
    std::string ref = {}; ///< of the part, for messages
};

struct Circuit {
    std::vector<Unknown> unknowns; ///< nets first, in order of first mention in the design; then inner unknowns by part
    int net_count = 0;
    std::vector<std::string> nets; ///< names of unknowns 0 … net_count−1
    Matrix G, C;                   ///< n×n, linear stamps
    Vector s;                      ///< n, constant sources
    std::vector<Element> elements;
    double temperature_k = 298.15;
    /// Opened circuits only: the unknown that carries the cut terminal's side; −1 in closed circuits.
    /// It is the last unknown; all others have the same index as in the closed circuit.
    int opened = -1;
    /// Opened circuits only: index of the net the cut terminal belongs to (side y).
    int rest = -1;

    int size() const { return static_cast<int>(unknowns.size()); }
    /// Unknown index of a net: −1 for gnd, −2 when there is no such net.
    int net(std::string_view name) const;
};

/// Assembles a validated design.
/// @error topological faults, each naming part or net, found before anything is solved: unconnected terminals,
///        floating nets, loops of ideal sources, an output tied to a supply.
/// Use: auto circuit = assemble(design);
Result<Circuit> assemble(const Design& design);

/// The same with the joint between the cut terminal (side x) and the rest of its net (side y) opened.
/// Topology is not checked again (an opened circuit may float).
/// @error missing_reference (no such part or terminal); no_loop_gain when the terminal lies on gnd.
Result<Circuit> assemble_opened(const Design& design, const Cut& cut);

/// f(x), and J = ∂f/∂x when wanted. Sizes n and n×n; both are overwritten.
void evaluate_static(const Circuit& circuit, const Vector& x, Vector& f, Matrix* jacobian);
/// q(x), and ∂q/∂x when wanted.
void evaluate_charge(const Circuit& circuit, const Vector& x, Vector& q, Matrix* jacobian);

/// The linearised circuit: (G + sC) v = 0.
struct Pencil {
    Matrix G, C;
    int size() const { return static_cast<int>(G.rows()); }
};
/// Linearises about x (size n of that circuit). Ask for the opened circuit with the closed circuit's x extended by
/// x[opened] = x[rest].
Pencil linearise(const Circuit& circuit, const Vector& x);
/// The closed circuit's x as unknowns of the opened one.
Vector extend_to_opened(const Circuit& opened, const Vector& x_closed);

} // namespace sinewright
