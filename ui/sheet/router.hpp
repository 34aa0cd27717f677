#pragma once
/// Finds the runs of the joins: horizontal and vertical, round the parts, few bends and crossings. Plain integers, no
/// Qt. The drawing is a function of what is asked alone: the same terrain gives the same routes, whatever was drawn
/// before.
#include <compare>
#include <cstdint>
#include <memory>
#include <string>
#include <vector>

namespace sinewright::ui {

/// A point of the grid; one step is 20 sheet units.
struct Cell {
    int x = 0, y = 0;
    auto operator<=>(const Cell&) const = default;
};
enum class Way : std::int8_t { right, down, left, up, any };
Cell stepped(Cell from, Way way, int steps = 1);
Way opposite(Way way);

/// An end to be joined. A route leaves it preferably towards `out`.
struct Pin {
    Cell at;
    Way out = Way::any;
    bool operator==(const Pin&) const = default;
};

struct WantedNet {
    std::string name;
    std::vector<Pin> pins;
    bool operator==(const WantedNet&) const = default;
};

struct Terrain {
    std::vector<Cell> blocked;   ///< part bodies, leads, ground symbols, ends that belong to no net
    std::vector<WantedNet> nets; ///< routed in this order, then once more each with all others in place
};

/// A place where runs meet or end.
struct Knot {
    Cell at;
    int pin = -1; ///< index into the net's pins; −1: a junction between runs
};
/// A run between two knots; `corners` holds both ends and every bend.
struct Run {
    int from = 0, to = 0;
    std::vector<Cell> corners;
};
/// A net's tree. Pins are the first knots, in order.
struct Route {
    std::vector<Knot> knots;
    std::vector<Run> runs;
    bool strained = false; ///< no free way was left somewhere: a run crosses a body or lies on another join
    int cost = 0;
};

int degree(const Route& route, int knot);
/// Pins reachable from run `run`'s `from` end without passing through it.
std::vector<int> pins_before(const Route& route, int run);
/// Corners of the way from one pin to another along the tree; empty when there is none.
std::vector<Cell> way_between(const Route& route, int from_pin, int to_pin);

/// Lays routes and remembers, per net, which cells its search looked at: a net is searched again only when its pins
/// or one of those cells changed, so the memory never changes the outcome.
class Router {
  public:
    Router();
    ~Router();
    Router(Router&&) noexcept;
    Router& operator=(Router&&) noexcept;

    /// @return one route per net of the terrain, in its order.
    const std::vector<Route>& lay(const Terrain& terrain);
    int searched() const { return searched_; } ///< nets searched by the last lay(), both rounds counted

  private:
    struct Memory;
    std::unique_ptr<Memory> memory_;
    int searched_ = 0;
};

} // namespace sinewright::ui
