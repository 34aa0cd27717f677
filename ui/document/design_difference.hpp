#pragma once
/// What differs between two designs, and nothing else: the content of one undo step.
#include "core/design/design.hpp"
#include <tuple>

namespace sinewright::ui {

/// Exchange is its own inverse: with d = difference(a, b), exchange on a gives b, on that b gives a again.
class DesignDifference {
  public:
    static DesignDifference between(const Design& before, const Design& after);
    bool empty() const;
    /// @pre the design is one of the two it was made between.
    void exchange(Design& design);

  private:
    static constexpr auto fields = std::make_tuple(
        &Design::title, &Design::notes, &Design::temperature_c, &Design::output, &Design::cut, &Design::groups,
        &Design::dials, &Design::targets, &Design::conditions, &Design::labels, &Design::baseline, &Design::unknown);
    template <class... T> static std::tuple<std::optional<T>...> others_of(const std::tuple<T Design::*...>&);
    struct PartAt {
        std::size_t index; ///< into the list of parts the entry belongs to
        Part part;
    };
    void exchange_parts(std::vector<Part>& parts);

    decltype(others_of(fields)) other_;          ///< the value a differing field has in the other design
    std::vector<PartAt> here_only_;              ///< parts of this design, rising index, that the other lacks
    std::vector<PartAt> there_only_;             ///< parts of the other design, rising index, that this one lacks
    std::vector<PartAt> changed_;                ///< the other's form; index among the parts common to both
    std::optional<std::vector<Part>> reordered_; ///< the other's whole list, when common parts changed their order
};

} // namespace sinewright::ui
