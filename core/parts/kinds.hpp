#pragma once
/// The part kinds, one file each; registry.cpp puts them in order.
#include "core/parts/part_kind.hpp"

namespace sinewright {

extern const PartKind resistor_kind, capacitor_kind, inductor_kind, potentiometer_kind, opamp_kind, limiter_kind,
    diode_kind, zener_kind, lamp_kind, thermistor_kind, jfet_kind, photocell_kind, multiplier_kind, servo_kind,
    supply_kind;

} // namespace sinewright
