#pragma once
/// The board the router searches on, and the search that grows one net's tree.
#include "ui/sheet/router.hpp"
#include <optional>

namespace sinewright::ui {

/// Who uses a cell and the two grid edges that start there (to the right and downwards). −1: nobody.
struct CellUse {
    bool blocked = false;
    bool near_body = false;
    std::int16_t pin = -1;      ///< net whose pin lies here
    std::int16_t reserved = -1; ///< net whose pin is left through here
    std::int16_t across = -1;   ///< net on the edge to the right
    std::int16_t down = -1;     ///< net on the edge downwards
    bool operator==(const CellUse&) const = default;
};

struct Window {
    int left = 0, top = 0, width = 0, height = 0;
    bool holds(Cell c) const { return c.x >= left && c.y >= top && c.x < left + width && c.y < top + height; }
    std::size_t index(Cell c) const { return static_cast<std::size_t>((c.y - top) * width + (c.x - left)); }
    std::size_t area() const { return static_cast<std::size_t>(width) * static_cast<std::size_t>(height); }
    bool operator==(const Window&) const = default;
};

class Board {
  public:
    Board() = default;
    /// @param ids  number of each net of the terrain, lasting over changes of the terrain
    Board(const Terrain& terrain, const std::vector<std::int16_t>& ids);
    const Window& window() const { return window_; }
    const CellUse& at(Cell c) const { return cells_[window_.index(c)]; }
    /// Net on the edge from `c` towards `way`; −1: free.
    int edge(Cell c, Way way) const;
    void draw(const Route& route, std::int16_t id);
    void wipe(const Route& route) { draw(route, -1); }
    /// Cells used differently on `other`; what lies off a board is empty.
    std::vector<Cell> differences(const Board& other) const;

  private:
    CellUse& use(Cell c) { return cells_[window_.index(c)]; }
    Window window_;
    std::vector<CellUse> cells_;
};

/// Every cell a route passes, ends included.
std::vector<Cell> cells_of(const Route& route);

/// A route and the cells whose use decided it.
struct Grown {
    Route route;
    Window window;
    std::vector<bool> looked; ///< per cell of the window
    int margin = 0;           ///< round the pins, before the board's edge cut it
};

/// The part of a board that is searched for a net.
Window window_round(const WantedNet& net, int margin, const Window& board);

/// Grows one net's tree, nearest pin first, each by the cheapest run to the tree so far. Keeps its work arrays.
class RouteSearch {
  public:
    Grown grow(const Board& board, const WantedNet& net, std::int16_t id);

  private:
    struct Tree;
    struct State {
        int cost = 0, before = -1;
        std::uint32_t stamp = 0;
        bool closed = false;
    };
    bool grow_in(Tree& tree);
    bool find(Tree& tree, const Pin& goal, std::vector<Cell>& path, int& cost);
    std::vector<State> states_;
    std::uint32_t stamp_ = 0;
};

} // namespace sinewright::ui
