#pragma once
/// Faults of a drawing that no number can mend, found by graph search before anything is solved.
#include "core/circuit/circuit.hpp"

namespace sinewright {

struct TieEdge {
    Tie how;
    int a, b; ///< unknown indices, −1 gnd
    int part; ///< index into Design::parts
};

/// "R3 is not connected at its right end." for every terminal without a net; also a design without parts and parts of
/// no known kind, so that what passes can be stamped.
Faults unconnected_terminals(const Design& design);

/// Nets that reach nothing else; nets without a DC path to gnd; loops of ideal sources;
/// structurally singular equations (maximum matching on the pattern of G and the elements). No false alarms: each makes
/// the equations at DC singular whatever the values are.
/// Sentences name part and terminal, net, or both sources, e.g. "V1 and V2 force different voltages on the same net."
Faults topology_faults(const Design& design, const Circuit& circuit, const std::vector<TieEdge>& ties);

} // namespace sinewright
