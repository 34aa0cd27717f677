#include "core/circuit/structural_rank.hpp"
#include <algorithm>

namespace sinewright {
namespace {

constexpr int none = -1;

Pattern transposed(const Pattern& pattern) {
    Pattern result(pattern.size());
    for (int row = 0; row < static_cast<int>(pattern.size()); ++row)
        for (int column : pattern[row]) result[column].push_back(row);
    return result;
}

/// Matching of rows to columns.
class Matching {
  public:
    explicit Matching(const Pattern& pattern)
        : pattern_(pattern),
          column_of_(pattern.size(), none),
          row_of_(pattern.size(), none),
          seen_(pattern.size(), none) {
        for (int row = 0; row < size(); ++row)
            for (int column : pattern[row])
                if (column_of_[row] == none && row_of_[column] == none) match(row, column);
        for (int row = 0; row < size(); ++row)
            if (column_of_[row] == none) augment(row);
    }

    int size() const { return static_cast<int>(pattern_.size()); }
    const std::vector<int>& column_of() const { return column_of_; }
    const std::vector<int>& row_of() const { return row_of_; }

  private:
    void match(int row, int column) { column_of_[row] = column, row_of_[column] = row; }

    /// Breadth first, so that no pattern exhausts the stack.
    void augment(int start) {
        std::vector<int> queue{start}, came_from(pattern_.size(), none);
        for (std::size_t head = 0; head < queue.size(); ++head)
            for (int column : pattern_[queue[head]]) {
                if (seen_[column] == start) continue;
                seen_[column] = start, came_from[column] = queue[head];
                if (row_of_[column] != none) {
                    queue.push_back(row_of_[column]);
                    continue;
                }
                for (int free = column; free != none;) {
                    const int row = came_from[free], next = column_of_[row];
                    match(row, free);
                    free = row == start ? none : next;
                }
                return;
            }
    }

    const Pattern& pattern_;
    std::vector<int> column_of_, row_of_, seen_;
};

/// All indices of the first kind reachable along alternating paths from unmatched ones.
/// @param across   the second kind next to each of the first
/// @param partner  match of each of the second kind
std::vector<int> reachable(const Pattern& across, const std::vector<int>& match, const std::vector<int>& partner) {
    std::vector<int> reached;
    std::vector<bool> seen(match.size(), false);
    const auto reach = [&](int index) {
        if (index == none || seen[index]) return;
        seen[index] = true;
        reached.push_back(index);
    };
    for (int k = 0; k < static_cast<int>(match.size()); ++k)
        if (match[k] == none) reach(k);
    for (std::size_t head = 0; head < reached.size(); ++head)
        for (int other : across[reached[head]]) reach(partner[other]);
    std::sort(reached.begin(), reached.end());
    return reached;
}

} // namespace

Pattern direct_current_pattern(const Circuit& circuit) {
    const int n = circuit.size();
    Pattern pattern(n);
    for (int column = 0; column < n; ++column) // column by column: G is stored so
        for (int row = 0; row < n; ++row)
            if (circuit.G(row, column) != 0) pattern[row].push_back(column);
    for (const Element& element : circuit.elements)
        for (const Combination& injection : element.injections)
            for (const Weighted& row : injection)
                for (const Combination& control : element.controls)
                    for (const Weighted& column : control) pattern[row.index].push_back(column.index);
    return pattern;
}

StructuralGap find_structural_gap(const Pattern& pattern) {
    const Matching matching(pattern);
    const auto& matched = matching.column_of();
    if (std::find(matched.begin(), matched.end(), none) == matched.end()) return {};
    return {reachable(transposed(pattern), matching.row_of(), matching.column_of()),
            reachable(pattern, matching.column_of(), matching.row_of())};
}

} // namespace sinewright
