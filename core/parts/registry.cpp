#include "core/parts/kinds.hpp"
#include <array>

namespace sinewright {

std::span<const PartKind* const> part_kinds() {
    static const std::array kinds{&resistor_kind,   &capacitor_kind,  &inductor_kind, &potentiometer_kind,
                                  &opamp_kind,      &limiter_kind,    &diode_kind,    &zener_kind,
                                  &lamp_kind,       &thermistor_kind, &jfet_kind,     &photocell_kind,
                                  &multiplier_kind, &servo_kind,      &supply_kind};
    return kinds;
}

const PartKind* find_part_kind(std::string_view name) {
    for (const PartKind* kind : part_kinds())
        if (kind->name == name) return kind;
    return nullptr;
}

int PartKind::parameter(std::string_view parameter_name) const {
    for (std::size_t k = 0; k < parameters.size(); ++k)
        if (parameters[k].name == parameter_name) return static_cast<int>(k);
    return -1;
}

int PartKind::terminal(std::string_view terminal_name) const {
    for (std::size_t k = 0; k < terminals.size(); ++k)
        if (terminals[k].name == terminal_name) return static_cast<int>(k);
    return -1;
}

} // namespace sinewright
