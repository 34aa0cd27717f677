#pragma once
/// The way of the signal round the loop that a cut opens, found in the design as a graph of nets and parts.
#include "core/design/design.hpp"

namespace sinewright::ui {

struct LoopStep {
    int part = -1; ///< index into Design::parts
    std::string entry, exit;
};

/// Parts in the order the signal meets them from the cut round to the cut again; empty when nothing amplifying leads
/// back. The way with the fewest parts is taken, amplifiers counting least, never over gnd or a supply's net.
std::vector<LoopStep> signal_loop(const Design& design, const TerminalRef& cut);

} // namespace sinewright::ui
