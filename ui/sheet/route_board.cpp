#include "ui/sheet/route_search.hpp"
#include <algorithm>
#include <climits>

namespace sinewright::ui {

namespace {
constexpr int margin = 7;   // room for runs round the outermost parts
constexpr int quantum = 16; // the board grows in these steps, so that a small move leaves it as it was

int floor_to_quantum(int v) { return (v >= 0 ? v / quantum : -((quantum - 1 - v) / quantum)) * quantum; }

Window window_of(const Terrain& terrain) {
    int left = INT_MAX, top = INT_MAX, right = INT_MIN, bottom = INT_MIN;
    const auto take = [&](Cell c) {
        left = std::min(left, c.x), right = std::max(right, c.x);
        top = std::min(top, c.y), bottom = std::max(bottom, c.y);
    };
    for (Cell c : terrain.blocked) take(c);
    for (const WantedNet& net : terrain.nets)
        for (const Pin& pin : net.pins) take(pin.at);
    if (left > right) return {0, 0, quantum, quantum};
    left = floor_to_quantum(left - margin), top = floor_to_quantum(top - margin);
    right = floor_to_quantum(right + margin) + quantum, bottom = floor_to_quantum(bottom + margin) + quantum;
    return {left, top, right - left, bottom - top};
}
} // namespace

Board::Board(const Terrain& terrain, const std::vector<std::int16_t>& ids)
    : window_(window_of(terrain)), cells_(window_.area()) {
    for (Cell c : terrain.blocked) {
        use(c).blocked = true;
        for (int w = 0; w < 4; ++w) use(stepped(c, static_cast<Way>(w))).near_body = true;
    }
    for (std::size_t n = 0; n < terrain.nets.size(); ++n)
        for (const Pin& pin : terrain.nets[n].pins) {
            if (use(pin.at).pin < 0) use(pin.at).pin = ids[n];
            if (pin.out == Way::any) continue;
            CellUse& ahead = use(stepped(pin.at, pin.out));
            if (ahead.reserved < 0) ahead.reserved = ids[n];
        }
}

int Board::edge(Cell c, Way way) const {
    switch (way) {
    case Way::right:
        return at(c).across;
    case Way::down:
        return at(c).down;
    case Way::left:
        return window_.holds({c.x - 1, c.y}) ? at({c.x - 1, c.y}).across : -1;
    case Way::up:
        return window_.holds({c.x, c.y - 1}) ? at({c.x, c.y - 1}).down : -1;
    case Way::any:
        break;
    }
    return -1;
}

void Board::draw(const Route& route, std::int16_t id) {
    for (const Run& run : route.runs)
        for (std::size_t i = 1; i < run.corners.size(); ++i) {
            const Cell a = std::min(run.corners[i - 1], run.corners[i]),
                       b = std::max(run.corners[i - 1], run.corners[i]);
            for (int x = a.x; x < b.x; ++x) use({x, a.y}).across = id;
            for (int y = a.y; y < b.y; ++y) use({a.x, y}).down = id;
        }
}

std::vector<Cell> Board::differences(const Board& other) const {
    std::vector<Cell> cells;
    const CellUse empty;
    for (int y = 0; y < window_.height; ++y)
        for (int x = 0; x < window_.width; ++x) {
            const Cell c{window_.left + x, window_.top + y};
            if (!(at(c) == (other.window_.holds(c) ? other.at(c) : empty))) cells.push_back(c);
        }
    if (window_ == other.window_) return cells;
    for (int y = 0; y < other.window_.height; ++y)
        for (int x = 0; x < other.window_.width; ++x) {
            const Cell c{other.window_.left + x, other.window_.top + y};
            if (!window_.holds(c) && !(other.at(c) == empty)) cells.push_back(c);
        }
    return cells;
}

std::vector<Cell> cells_of(const Route& route) {
    std::vector<Cell> cells;
    for (const Run& run : route.runs) {
        cells.push_back(run.corners.front());
        for (std::size_t i = 1; i < run.corners.size(); ++i) {
            const Cell to = run.corners[i];
            for (Cell c = run.corners[i - 1]; c != to;) {
                c = {c.x + (to.x > c.x) - (to.x < c.x), c.y + (to.y > c.y) - (to.y < c.y)};
                cells.push_back(c);
            }
        }
    }
    return cells;
}

} // namespace sinewright::ui
