#include "core/design/words.hpp"
#include <array>

namespace sinewright {

std::string quoted_list(const std::vector<std::string>& names) {
    constexpr std::size_t most = 12;
    std::string text;
    const std::size_t shown = std::min(names.size(), most);
    for (std::size_t k = 0; k < shown; ++k)
        text += (k == 0 ? "`" : k + 1 == names.size() ? " and `" : ", `") + names[k] + "`";
    return names.size() > most ? text + ", …" : text;
}

std::string with_article(std::string_view noun) {
    const bool vowel = !noun.empty() && std::string_view("aeiou").find(noun.front()) != std::string_view::npos;
    return (vowel ? "an " : "a ") + std::string(noun);
}

std::string printable(std::string_view text) {
    std::string shown;
    for (const char c : text) shown += static_cast<unsigned char>(c) < 0x20 || c == 0x7f ? '?' : c;
    return shown;
}

Fault unknown_kind(const std::string& ref, const std::string& kind) {
    std::vector<std::string> names;
    for (const PartKind* known : part_kinds()) names.emplace_back(known->name);
    std::string list;
    for (const std::string& name : names) list += (list.empty() ? "" : ", ") + name;
    return {FaultKind::unknown_key, ref + ".kind", ref + ": no part kind `" + kind + "` here.",
            "Kinds are " + list + "."};
}

Fault unknown_parameter(const std::string& ref, const PartKind& kind, const std::string& parameter) {
    std::string list;
    for (const ParameterInfo& info : kind.parameters) list += (list.empty() ? "" : ", ") + std::string(info.name);
    return {FaultKind::unknown_key, ref + "." + parameter,
            ref + ": " + with_article(kind.title) + " has no `" + parameter + "`.",
            "Its parameters are " + list + "; every part also takes tolerance, tempco and spread."};
}

std::span<const TargetName> target_names() {
    static constexpr std::array<TargetName, 11> names{{{"startup_margin_db", "dB"},
                                                       {"frequency_hz", "Hz"},
                                                       {"growth_per_s", "1/s"},
                                                       {"growth_per_cycle", ""},
                                                       {"amplitude_v", "V"},
                                                       {"rms_v", "V"},
                                                       {"thd_db", "dB"},
                                                       {"thd_ratio", ""},
                                                       {"settling_time_s", "s"},
                                                       {"dc_v", "V"},
                                                       {"yield", ""}}};
    return names;
}

} // namespace sinewright
