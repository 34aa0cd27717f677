#include "core/design/design.hpp"
#include <algorithm>
#include <unordered_set>

namespace sinewright {

const ParameterValue* Part::find(std::string_view parameter) const {
    for (const Parameter& p : parameters)
        if (p.name == parameter) return &p.value;
    return nullptr;
}

std::optional<std::string> Part::net_at(std::string_view terminal) const {
    for (const TerminalNet& joint : terminals)
        if (joint.terminal == terminal) return joint.net;
    return std::nullopt;
}

const Part* Design::find(std::string_view ref) const {
    const auto found = std::find_if(parts.begin(), parts.end(), [&](const Part& part) { return part.ref == ref; });
    return found == parts.end() ? nullptr : &*found;
}

Part* Design::find(std::string_view ref) { return const_cast<Part*>(std::as_const(*this).find(ref)); }

std::vector<std::string> nets_of(const Design& design) {
    std::vector<std::string> nets;
    std::unordered_set<std::string> seen;
    for (const Part& part : design.parts)
        for (const TerminalNet& joint : part.terminals)
            if (joint.net && seen.insert(*joint.net).second) nets.push_back(*joint.net);
    return nets;
}

} // namespace sinewright
