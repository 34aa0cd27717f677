#pragma once
/// The loop a newcomer begins with.
#include "core/design/design.hpp"

namespace sinewright::ui {

/// An amplifier with an equal-arm bridge back to its + input and a diode pair that holds the level: near 1 kHz, starts
/// with some 0.2 dB to spare. R1 and R2 have a common dial, the excess gain has its own.
Design starter_design();

} // namespace sinewright::ui
