#pragma once
/// The shelf: every part kind by name, in the order of the registry. A new kind is one file that defines NAME_kind, and
/// one line here.
#include "core/parts/part_kind.hpp"

#define SINEWRIGHT_PART_KINDS(KIND)                                                                                    \
    KIND(resistor)                                                                                                     \
    KIND(capacitor)                                                                                                    \
    KIND(inductor)                                                                                                     \
    KIND(potentiometer)                                                                                                \
    KIND(opamp)                                                                                                        \
    KIND(limiter)                                                                                                      \
    KIND(diode)                                                                                                        \
    KIND(zener)                                                                                                        \
    KIND(lamp)                                                                                                         \
    KIND(thermistor)                                                                                                   \
    KIND(jfet)                                                                                                         \
    KIND(photocell)                                                                                                    \
    KIND(multiplier)                                                                                                   \
    KIND(servo)                                                                                                        \
    KIND(supply)

namespace sinewright {

#define SINEWRIGHT_DECLARE_KIND(NAME) extern const PartKind NAME##_kind;
SINEWRIGHT_PART_KINDS(SINEWRIGHT_DECLARE_KIND)
#undef SINEWRIGHT_DECLARE_KIND

} // namespace sinewright
