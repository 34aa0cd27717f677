#include "core/parts/kinds.hpp"
#include <array>

namespace sinewright {

std::span<const PartKind* const> part_kinds() {
#define ADDRESS(NAME) &NAME##_kind,
    static constexpr auto kinds = std::to_array<const PartKind*>({SINEWRIGHT_PART_KINDS(ADDRESS)});
#undef ADDRESS
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
