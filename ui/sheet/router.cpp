#include "ui/sheet/route_search.hpp"
#include <algorithm>
#include <array>
#include <map>

namespace sinewright::ui {

Cell stepped(Cell from, Way way, int steps) {
    switch (way) {
    case Way::right:
        return {from.x + steps, from.y};
    case Way::down:
        return {from.x, from.y + steps};
    case Way::left:
        return {from.x - steps, from.y};
    case Way::up:
        return {from.x, from.y - steps};
    case Way::any:
        break;
    }
    return from;
}

Way opposite(Way way) { return way == Way::any ? way : static_cast<Way>((static_cast<int>(way) + 2) % 4); }

int degree(const Route& route, int knot) {
    int count = 0;
    for (const Run& run : route.runs) count += (run.from == knot) + (run.to == knot);
    return count;
}

std::vector<int> pins_before(const Route& route, int run) {
    std::vector<bool> reached(route.knots.size(), false);
    std::vector<int> open{route.runs[static_cast<std::size_t>(run)].from}, pins;
    reached[static_cast<std::size_t>(open.front())] = true;
    while (!open.empty()) {
        const int here = open.back();
        open.pop_back();
        if (const int pin = route.knots[static_cast<std::size_t>(here)].pin; pin >= 0) pins.push_back(pin);
        for (std::size_t r = 0; r < route.runs.size(); ++r) {
            if (static_cast<int>(r) == run) continue;
            const Run& other = route.runs[r];
            if (other.from != here && other.to != here) continue;
            const int there = other.from == here ? other.to : other.from;
            if (reached[static_cast<std::size_t>(there)]) continue;
            reached[static_cast<std::size_t>(there)] = true;
            open.push_back(there);
        }
    }
    std::sort(pins.begin(), pins.end());
    return pins;
}

std::vector<Cell> way_between(const Route& route, int from_pin, int to_pin) {
    // Breadth first from the goal, then walk down from the start.
    std::vector<int> by_run(route.knots.size(), -1);
    std::vector<int> open{to_pin};
    std::vector<bool> reached(route.knots.size(), false);
    reached[static_cast<std::size_t>(to_pin)] = true;
    for (std::size_t i = 0; i < open.size(); ++i)
        for (std::size_t r = 0; r < route.runs.size(); ++r) {
            const Run& run = route.runs[r];
            if (run.from != open[i] && run.to != open[i]) continue;
            const int there = run.from == open[i] ? run.to : run.from;
            if (reached[static_cast<std::size_t>(there)]) continue;
            reached[static_cast<std::size_t>(there)] = true;
            by_run[static_cast<std::size_t>(there)] = static_cast<int>(r);
            open.push_back(there);
        }
    std::vector<Cell> way;
    if (!reached[static_cast<std::size_t>(from_pin)]) return way;
    for (int here = from_pin; here != to_pin;) {
        const Run& run = route.runs[static_cast<std::size_t>(by_run[static_cast<std::size_t>(here)])];
        std::vector<Cell> corners = run.corners;
        if (run.from != here) std::reverse(corners.begin(), corners.end());
        if (!way.empty()) way.pop_back();
        way.insert(way.end(), corners.begin(), corners.end());
        here = run.from == here ? run.to : run.from;
    }
    return way;
}

struct Router::Memory {
    static constexpr int rounds = 2;
    struct Net {
        std::int16_t id = 0;
        std::vector<Pin> pins;
        std::array<Grown, rounds> grown;
        bool known = false;
    };
    std::map<std::string, Net> nets;
    std::vector<std::string> order;
    Board bare; ///< the last terrain without routes
    std::int16_t next_id = 0;
    RouteSearch search;
    std::vector<Route> routes;

    void forget() { nets.clear(), order.clear(), next_id = 0; }
    std::vector<std::int16_t> number(const Terrain& terrain);
    bool same_order(const Terrain& terrain) const;
    void drop_gone(const Terrain& terrain, std::vector<Cell>& changed);
};

/// Numbers that a net keeps for as long as it is wanted.
std::vector<std::int16_t> Router::Memory::number(const Terrain& terrain) {
    constexpr std::int16_t most = 30000;
    if (next_id + static_cast<int>(terrain.nets.size()) > most) forget();
    std::vector<std::int16_t> ids;
    for (const WantedNet& net : terrain.nets) {
        const auto [at, fresh] = nets.try_emplace(net.name);
        if (fresh) at->second.id = next_id++;
        ids.push_back(at->second.id);
    }
    return ids;
}

/// The nets wanted before and now come in the same order: then a remembered search saw the same nets before it.
bool Router::Memory::same_order(const Terrain& terrain) const {
    std::map<std::string_view, std::size_t> place;
    for (std::size_t i = 0; i < order.size(); ++i) place[order[i]] = i;
    std::size_t last = 0;
    for (const WantedNet& net : terrain.nets) {
        const auto found = place.find(net.name);
        if (found == place.end()) continue;
        if (found->second < last) return false;
        last = found->second;
    }
    return true;
}

void Router::Memory::drop_gone(const Terrain& terrain, std::vector<Cell>& changed) {
    std::map<std::string_view, bool> wanted;
    for (const WantedNet& net : terrain.nets) wanted[net.name] = true;
    for (auto at = nets.begin(); at != nets.end();) {
        if (wanted.contains(at->first)) {
            ++at;
            continue;
        }
        for (const Grown& grown : at->second.grown)
            for (Cell c : cells_of(grown.route)) changed.push_back(c);
        at = nets.erase(at);
    }
}

Router::Router() : memory_(std::make_unique<Memory>()) {}
Router::~Router() = default;
Router::Router(Router&&) noexcept = default;
Router& Router::operator=(Router&&) noexcept = default;

const std::vector<Route>& Router::lay(const Terrain& terrain) {
    Memory& m = *memory_;
    if (!m.same_order(terrain)) m.forget();
    const std::vector<std::int16_t> ids = m.number(terrain);
    Board board(terrain, ids);
    std::vector<Cell> changed = board.differences(m.bare);
    m.bare = board;
    m.drop_gone(terrain, changed);
    m.order.clear();
    for (const WantedNet& net : terrain.nets) m.order.push_back(net.name);

    const auto touched = [&](const Grown& grown, const WantedNet& net) {
        if (window_round(net, grown.margin, board.window()) != grown.window) return true;
        return std::any_of(changed.begin(), changed.end(),
                           [&](Cell c) { return grown.window.holds(c) && grown.looked[grown.window.index(c)]; });
    };
    searched_ = 0;
    for (std::size_t round = 0; round < Memory::rounds; ++round)
        for (std::size_t n = 0; n < terrain.nets.size(); ++n) {
            const WantedNet& net = terrain.nets[n];
            Memory::Net& known = m.nets[net.name];
            if (round > 0) board.wipe(known.grown[round - 1].route);
            Grown& grown = known.grown[round];
            if (!known.known || known.pins != net.pins || touched(grown, net)) {
                ++searched_;
                const std::vector<Cell> before = cells_of(grown.route);
                grown = m.search.grow(board, net, ids[n]);
                if (std::vector<Cell> now = cells_of(grown.route); now != before) {
                    changed.insert(changed.end(), before.begin(), before.end());
                    changed.insert(changed.end(), now.begin(), now.end());
                }
            }
            board.draw(grown.route, ids[n]);
        }
    m.routes.clear();
    for (const WantedNet& net : terrain.nets) {
        Memory::Net& known = m.nets[net.name];
        known.known = true, known.pins = net.pins;
        m.routes.push_back(known.grown.back().route);
    }
    return m.routes;
}

} // namespace sinewright::ui
