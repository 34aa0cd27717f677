#pragma once
/// Places for parts that have none: a file written by hand or by a script reads like a drawing at once.
#include "ui/sheet/part_shape.hpp"

namespace sinewright::ui {

/// Places every part without a place, parts with a place staying where they are. The same design gives the same places.
/// Short joins with few bends, amplifiers facing right, grounded ends down, room for texts between parts: found by
/// threshold accepting (Dueck & Scheuer 1990) in integers. Large designs get rows in the order of the signal.
Places auto_places(const Design& design);

} // namespace sinewright::ui
