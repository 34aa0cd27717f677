#pragma once
/// The soft ribbon under the joins that shows the loop through the cut, with arrows the way the signal runs.
#include "ui/sheet/overlay.hpp"

namespace sinewright::ui {

void lay_ribbon(const Design& design, const Drawing& drawing, const TerminalRef& cut, Overlay& overlay);

} // namespace sinewright::ui
