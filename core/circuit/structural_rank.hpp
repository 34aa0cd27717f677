#pragma once
/// Which unknowns no choice of values can determine, from the pattern of the equations alone.
#include "core/circuit/circuit.hpp"

namespace sinewright {

/// columns[row]: the unknowns that occur in that equation.
using Pattern = std::vector<std::vector<int>>;

/// Pattern of G and of the nonlinear elements' slopes: what can be nonzero in ∂f/∂x.
Pattern direct_current_pattern(const Circuit& circuit);

/// The under- and overdetermined parts of a square pattern (Dulmage & Mendelsohn 1958); both empty when some choice of
/// values makes the matrix regular.
struct StructuralGap {
    std::vector<int> undetermined;   ///< unknowns
    std::vector<int> overdetermined; ///< equations
};
/// Maximum bipartite matching by augmenting paths (Kuhn 1955); O(n · entries) at worst, linear where the diagonal
/// is occupied.
StructuralGap find_structural_gap(const Pattern& pattern);

} // namespace sinewright
