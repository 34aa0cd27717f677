#include "ui/document/design_difference.hpp"
#include <algorithm>
#include <unordered_map>

namespace sinewright::ui {
namespace {

using Index = std::unordered_map<std::string_view, std::size_t>;

Index index_of(const std::vector<Part>& parts) {
    Index index;
    for (std::size_t i = 0; i < parts.size(); ++i) index.emplace(parts[i].ref, i);
    return index;
}

template <std::size_t... I, class F> void each(std::index_sequence<I...>, F&& f) {
    (f(std::integral_constant<std::size_t, I>{}), ...);
}

} // namespace

DesignDifference DesignDifference::between(const Design& before, const Design& after) {
    DesignDifference d;
    each(std::make_index_sequence<std::tuple_size_v<decltype(fields)>>{}, [&](auto i) {
        constexpr auto field = std::get<i()>(fields);
        if (!(before.*field == after.*field)) std::get<i()>(d.other_) = after.*field;
    });

    const Index in_before = index_of(before.parts), in_after = index_of(after.parts);
    std::vector<std::size_t> common;
    for (std::size_t i = 0; i < before.parts.size(); ++i) {
        if (in_after.contains(before.parts[i].ref))
            common.push_back(i);
        else
            d.here_only_.push_back({i, before.parts[i]});
    }
    std::size_t k = 0;
    bool reordered = in_before.size() != before.parts.size() || in_after.size() != after.parts.size();
    for (std::size_t i = 0; i < after.parts.size() && !reordered; ++i) {
        if (!in_before.contains(after.parts[i].ref)) {
            d.there_only_.push_back({i, after.parts[i]});
            continue;
        }
        const Part& old = before.parts[common[k]];
        reordered = old.ref != after.parts[i].ref;
        if (!reordered && !(old == after.parts[i])) d.changed_.push_back({k, after.parts[i]});
        ++k;
    }
    if (reordered) {
        d.here_only_.clear(), d.there_only_.clear(), d.changed_.clear();
        if (before.parts != after.parts) d.reordered_ = after.parts;
    }
    return d;
}

bool DesignDifference::empty() const {
    const bool fields_same = std::apply([](const auto&... other) { return (!other.has_value() && ...); }, other_);
    return fields_same && here_only_.empty() && there_only_.empty() && changed_.empty() && !reordered_;
}

void DesignDifference::exchange(Design& design) {
    each(std::make_index_sequence<std::tuple_size_v<decltype(fields)>>{}, [&](auto i) {
        auto& other = std::get<i()>(other_);
        if (other) std::swap(design.*std::get<i()>(fields), *other);
    });
    if (reordered_)
        std::swap(design.parts, *reordered_);
    else
        exchange_parts(design.parts);
}

void DesignDifference::exchange_parts(std::vector<Part>& parts) {
    for (auto gone = here_only_.rbegin(); gone != here_only_.rend(); ++gone) {
        gone->part = std::move(parts[gone->index]);
        parts.erase(parts.begin() + static_cast<std::ptrdiff_t>(gone->index));
    }
    for (PartAt& changed : changed_) std::swap(parts[changed.index], changed.part);
    for (const PartAt& added : there_only_)
        parts.insert(parts.begin() + static_cast<std::ptrdiff_t>(added.index), added.part);
    std::swap(here_only_, there_only_);
}

} // namespace sinewright::ui
