#pragma once
/// The numbers a part's equations see: given values, defaults, temperature.
#include "core/design/design.hpp"
#include "core/parts/part_kind.hpp"

namespace sinewright {

/// Fills in defaults and words and applies value(T) = value·(1 + tempco·(T − 298.15)) to the main value where the
/// kind's tempco applies. Expects a validated part; unknown parameters are ignored, absent ones without default are
/// NaN.
PartValues resolve(const PartKind& kind, const Part& part, double temperature_k);

} // namespace sinewright
