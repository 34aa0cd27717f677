#include "ui/sheet/route_search.hpp"
#include <algorithm>
#include <climits>
#include <cstdlib>
#include <queue>

namespace sinewright::ui {

namespace {
// Costs in tenths of a grid step. A bend is worth a detour of two and a half steps, a crossing of four.
constexpr int step_cost = 10, bend_cost = 25, crossing_cost = 40, junction_cost = 6, near_body_cost = 2;
constexpr int reserved_cost = 35;                          // before another net's pin: leave its way out free
constexpr int through_body_cost = 400, overlap_cost = 600; // only where no free way is left
constexpr int window_margin = 6, wide_margin = 14;

int distance(Cell a, Cell b) { return std::abs(a.x - b.x) + std::abs(a.y - b.y); }
bool along(Way a, Way b) { return (static_cast<int>(a) & 1) == (static_cast<int>(b) & 1); }

} // namespace

Window window_round(const WantedNet& net, int margin, const Window& board) {
    int left = INT_MAX, top = INT_MAX, right = INT_MIN, bottom = INT_MIN;
    for (const Pin& pin : net.pins) {
        left = std::min(left, pin.at.x), right = std::max(right, pin.at.x);
        top = std::min(top, pin.at.y), bottom = std::max(bottom, pin.at.y);
    }
    left = std::max(left - margin, board.left), top = std::max(top - margin, board.top);
    right = std::min(right + margin, board.left + board.width - 1);
    bottom = std::min(bottom + margin, board.top + board.height - 1);
    return {left, top, right - left + 1, bottom - top + 1};
}

/// One net's tree while it grows.
struct RouteSearch::Tree {
    const Board& board;
    const WantedNet& net;
    std::int16_t id;
    bool strained = false;
    Grown& grown;
    std::vector<char> in_tree; ///< per cell of the window: 0 no, 1 on a run, 2 a knot
    std::vector<Cell> cells;

    void add_cell(Cell c, bool knot) {
        char& mark = in_tree[grown.window.index(c)];
        if (mark == 0) cells.push_back(c);
        mark = std::max(mark, knot ? char{2} : char{1});
    }
    void look(Cell c) const { grown.looked[grown.window.index(c)] = true; }

    /// The knot at a cell of the tree; a run that passes there is divided.
    int knot_at(Cell c) {
        Route& route = grown.route;
        for (int run_index = 0; run_index < static_cast<int>(route.runs.size()); ++run_index) {
            const Run& run = route.runs[static_cast<std::size_t>(run_index)];
            if (run.corners.front() == c) return run.from;
            if (run.corners.back() == c) return run.to;
        }
        for (std::size_t r = 0; r < route.runs.size(); ++r)
            if (const auto knot = divide(r, c)) return *knot;
        for (std::size_t k = 0; k < route.knots.size(); ++k)
            if (route.knots[k].at == c) return static_cast<int>(k);
        return 0;
    }
    std::optional<int> divide(std::size_t run_index, Cell c) {
        Route& route = grown.route;
        Run& run = route.runs[run_index];
        for (std::size_t i = 1; i < run.corners.size(); ++i) {
            const Cell a = run.corners[i - 1], b = run.corners[i];
            if (distance(a, c) + distance(c, b) != distance(a, b)) continue;
            const int knot = static_cast<int>(route.knots.size());
            Run rest{knot, run.to, {c}};
            const auto from = run.corners.begin() + static_cast<std::ptrdiff_t>(b == c ? i + 1 : i);
            rest.corners.insert(rest.corners.end(), from, run.corners.end());
            run.corners.erase(run.corners.begin() + static_cast<std::ptrdiff_t>(i), run.corners.end());
            run.corners.push_back(c);
            run.to = knot;
            route.knots.push_back({c, -1});
            route.runs.push_back(std::move(rest));
            in_tree[grown.window.index(c)] = 2;
            return knot;
        }
        return std::nullopt;
    }

    /// Whether others use the cell, and if so whether it may be passed straight along `way`.
    enum class Others { none, passable, barred };
    Others others(Cell c, Way way) const {
        int along_us = 0, across_us = 0;
        for (int w = 0; w < 4; ++w) {
            const int net_there = board.edge(c, static_cast<Way>(w));
            if (net_there < 0 || net_there == id) continue;
            ++(along(static_cast<Way>(w), way) ? along_us : across_us);
        }
        if (along_us + across_us == 0) return Others::none;
        return along_us == 0 && across_us == 2 ? Others::passable : Others::barred;
    }

    /// Cost of entering `to` from its neighbour along `way`; nothing: not allowed.
    std::optional<int> enter(Cell from, Way way, Cell to, bool is_goal) const {
        if (!grown.window.holds(to)) return std::nullopt;
        look(to);
        const CellUse& use = board.at(to);
        int cost = step_cost;
        const auto bar = [&](int penalty) { return strained ? (cost += penalty, true) : false; };
        if (in_tree[grown.window.index(to)] != 0) return std::nullopt;
        const int edge = board.edge(from, way);
        if (edge >= 0 && edge != id && !bar(overlap_cost)) return std::nullopt;
        if (!is_goal) {
            if (use.blocked && !bar(through_body_cost)) return std::nullopt;
            if (use.pin >= 0 && !bar(overlap_cost)) return std::nullopt;
            if (use.near_body) cost += near_body_cost;
            if (use.reserved >= 0 && use.reserved != id) cost += reserved_cost;
        }
        const Others there = others(to, way);
        if (there == Others::passable && !is_goal)
            cost += crossing_cost;
        else if (there != Others::none && !bar(overlap_cost))
            return std::nullopt;
        return cost;
    }
};

bool RouteSearch::find(Tree& tree, const Pin& goal, std::vector<Cell>& path, int& total) {
    const Window& window = tree.grown.window;
    const std::size_t count = window.area() * 4;
    if (states_.size() < count) states_.resize(count);
    ++stamp_;
    struct Entry {
        int estimate, cost, state;
        bool operator>(const Entry& o) const {
            if (estimate != o.estimate) return estimate > o.estimate;
            if (cost != o.cost) return cost < o.cost; // of equals the one nearer the goal first
            return state > o.state;
        }
    };
    std::priority_queue<Entry, std::vector<Entry>, std::greater<>> open;
    const auto cell_of = [&](int state) {
        const int i = state / 4;
        return Cell{window.left + i % window.width, window.top + i / window.width};
    };
    const auto offer = [&](Cell from, Way way, int cost_so_far, int before) {
        const Cell to = stepped(from, way);
        const bool is_goal = to == goal.at;
        const auto entering = tree.enter(from, way, to, is_goal);
        if (!entering) return;
        int cost = cost_so_far + *entering;
        if (is_goal && goal.out != Way::any && way != opposite(goal.out))
            cost += way == goal.out ? 3 * bend_cost : bend_cost;
        const int state = static_cast<int>(window.index(to)) * 4 + static_cast<int>(way);
        State& s = states_[static_cast<std::size_t>(state)];
        if (s.stamp == stamp_ && (s.closed || s.cost <= cost)) return;
        s = {cost, before, stamp_, false};
        open.push({cost + step_cost * distance(to, goal.at), cost, state});
    };

    for (Cell c : tree.cells) {
        const bool knot = tree.in_tree[window.index(c)] == 2;
        int start = knot ? 0 : junction_cost;
        Way heading = Way::any;
        if (tree.grown.route.runs.empty()) heading = tree.net.pins.front().out;
        const int source = -2 - static_cast<int>(window.index(c));
        tree.look(c);
        for (int w = 0; w < 4; ++w) {
            const Way way = static_cast<Way>(w);
            const Tree::Others there = tree.others(c, way);
            if (there != Tree::Others::none && !tree.strained) continue; // no junction on a crossing
            const int bend = heading == Way::any || way == heading ? 0
                             : way == opposite(heading)            ? 3 * bend_cost
                                                                   : bend_cost;
            offer(c, way, start + bend, source);
        }
    }
    while (!open.empty()) {
        const Entry entry = open.top();
        open.pop();
        State& s = states_[static_cast<std::size_t>(entry.state)];
        if (s.closed || s.cost != entry.cost) continue;
        s.closed = true;
        const Cell here = cell_of(entry.state);
        const Way heading = static_cast<Way>(entry.state % 4);
        if (here == goal.at) {
            total += s.cost;
            path.assign(1, here);
            int before = s.before;
            for (; before >= 0; before = states_[static_cast<std::size_t>(before)].before)
                path.push_back(cell_of(before));
            path.push_back(cell_of((-2 - before) * 4));
            std::reverse(path.begin(), path.end());
            return true;
        }
        const bool crossing = tree.others(here, heading) != Tree::Others::none;
        for (int w = 0; w < 4; ++w) {
            const Way way = static_cast<Way>(w);
            if (way == opposite(heading) || (crossing && way != heading && !tree.strained)) continue;
            offer(here, way, s.cost + (way == heading ? 0 : bend_cost), entry.state);
        }
    }
    return false;
}

bool RouteSearch::grow_in(Tree& tree) {
    Route& route = tree.grown.route;
    const auto& pins = tree.net.pins;
    route = {};
    for (std::size_t p = 0; p < pins.size(); ++p) route.knots.push_back({pins[p].at, static_cast<int>(p)});
    tree.cells.clear();
    tree.in_tree.assign(tree.grown.window.area(), 0);
    if (!tree.strained) tree.grown.looked.assign(tree.grown.window.area(), false); // strained: on top of what failed
    if (pins.empty()) return true;
    tree.add_cell(pins[0].at, true);
    std::vector<bool> joined(pins.size(), false);
    joined[0] = true;
    for (std::size_t left = pins.size() - 1; left > 0; --left) {
        std::size_t next = 0;
        int nearest = INT_MAX;
        for (std::size_t p = 1; p < pins.size(); ++p) {
            if (joined[p]) continue;
            for (Cell c : tree.cells)
                if (const int d = distance(c, pins[p].at); d < nearest) nearest = d, next = p;
        }
        joined[next] = true;
        std::vector<Cell> path{pins[next].at};
        if (nearest > 0 && !find(tree, pins[next], path, route.cost)) return false;
        Run run{tree.knot_at(path.front()), static_cast<int>(next), {}};
        for (std::size_t i = 0; i < path.size(); ++i) {
            const bool end = i == 0 || i + 1 == path.size();
            const bool straight = !end && (path[i - 1].x == path[i + 1].x || path[i - 1].y == path[i + 1].y);
            if (!straight) run.corners.push_back(path[i]);
            tree.add_cell(path[i], end);
        }
        route.runs.push_back(std::move(run));
    }
    route.strained = tree.strained;
    return true;
}

Grown RouteSearch::grow(const Board& board, const WantedNet& net, std::int16_t id) {
    Grown grown;
    Tree tree{board, net, id, false, grown, {}, {}};
    for (const int margin : {window_margin, wide_margin}) {
        grown.margin = margin;
        grown.window = window_round(net, margin, board.window());
        if (grow_in(tree)) return grown;
    }
    tree.strained = true;
    grow_in(tree);
    return grown;
}

} // namespace sinewright::ui
