#include "ui/sheet/signal_loop.hpp"
#include <algorithm>
#include <climits>
#include <map>
#include <queue>

namespace sinewright::ui {

namespace {

/// A way through a part. Costs order the ways: amplifiers carry the loop, diodes beside a resistor do not.
struct Way {
    const char *kind, *entry, *exit;
    int cost;
    bool amplifies;
};
constexpr Way table[] = {
    {"opamp", "plus", "out", 1, true},     {"opamp", "minus", "out", 1, true},
    {"limiter", "in", "out", 1, true},     {"multiplier", "x", "out", 2, true},
    {"multiplier", "y", "out", 3, true},   {"jfet", "g", "d", 4, true},
    {"jfet", "g", "s", 4, true},           {"jfet", "s", "d", 5, true},
    {"jfet", "d", "s", 5, false},          {"resistor", "a", "b", 3, false},
    {"resistor", "b", "a", 3, false},      {"capacitor", "a", "b", 3, false},
    {"capacitor", "b", "a", 3, false},     {"inductor", "a", "b", 3, false},
    {"inductor", "b", "a", 3, false},      {"potentiometer", "a", "w", 3, false},
    {"potentiometer", "w", "a", 3, false}, {"potentiometer", "b", "w", 3, false},
    {"potentiometer", "w", "b", 3, false}, {"potentiometer", "a", "b", 5, false},
    {"potentiometer", "b", "a", 5, false}, {"lamp", "a", "b", 4, false},
    {"lamp", "b", "a", 4, false},          {"thermistor", "a", "b", 4, false},
    {"thermistor", "b", "a", 4, false},    {"photocell", "a", "b", 4, false},
    {"photocell", "b", "a", 4, false},     {"diode", "a", "k", 7, false},
    {"diode", "k", "a", 7, false},         {"zener", "a", "k", 7, false},
    {"zener", "k", "a", 7, false},         {"servo", "sense", "control", 9, true},
};

struct Edge {
    int from, to; ///< nets
    int cost;
    bool amplifies;
    LoopStep step;
};

struct Graph {
    std::map<std::string, int, std::less<>> nets;
    std::vector<Edge> edges;
    std::vector<std::vector<std::size_t>> leaving; ///< per net
};

Graph graph_of(const Design& design) {
    Graph graph;
    std::vector<std::string> dead{std::string(ground_net)};
    for (const Part& part : design.parts)
        if (part.kind == "supply")
            for (const TerminalNet& t : part.terminals)
                if (t.net) dead.push_back(*t.net);
    for (const std::string& net : nets_of(design))
        if (std::find(dead.begin(), dead.end(), net) == dead.end())
            graph.nets.emplace(net, static_cast<int>(graph.nets.size()));
    graph.leaving.resize(graph.nets.size());
    const auto live = [&](const std::optional<std::string>& net) {
        const auto found = net ? graph.nets.find(*net) : graph.nets.end();
        return found == graph.nets.end() ? -1 : found->second;
    };
    for (std::size_t p = 0; p < design.parts.size(); ++p)
        for (const Way& way : table) {
            if (design.parts[p].kind != way.kind) continue;
            const int from = live(design.parts[p].net_at(way.entry)), to = live(design.parts[p].net_at(way.exit));
            if (from < 0 || to < 0 || from == to) continue;
            graph.leaving[static_cast<std::size_t>(from)].push_back(graph.edges.size());
            graph.edges.push_back({from, to, way.cost, way.amplifies, {static_cast<int>(p), way.entry, way.exit}});
        }
    return graph;
}

struct Found {
    int cost = INT_MAX;
    std::vector<LoopStep> steps;
};

/// Cheapest way from net to net with at least one amplifying part on it (Dijkstra over net × amplified yet),
/// not through `without`.
Found cheapest(const Graph& graph, int from, int to, bool amplified, int without) {
    const std::size_t states = graph.nets.size() * 2;
    std::vector<int> cost(states, INT_MAX), by(states, -1), before(states, -1);
    using Entry = std::pair<int, int>;
    std::priority_queue<Entry, std::vector<Entry>, std::greater<>> open;
    const int start = from * 2 + amplified, goal = to * 2 + 1;
    cost[static_cast<std::size_t>(start)] = 0;
    open.push({0, start});
    while (!open.empty()) {
        const auto [c, state] = open.top();
        open.pop();
        if (c > cost[static_cast<std::size_t>(state)]) continue;
        if (state == goal) break;
        for (const std::size_t e : graph.leaving[static_cast<std::size_t>(state / 2)]) {
            const Edge& edge = graph.edges[e];
            if (edge.step.part == without) continue;
            const int next = edge.to * 2 + (edge.amplifies || state % 2);
            if (c + edge.cost >= cost[static_cast<std::size_t>(next)]) continue;
            cost[static_cast<std::size_t>(next)] = c + edge.cost;
            by[static_cast<std::size_t>(next)] = static_cast<int>(e), before[static_cast<std::size_t>(next)] = state;
            open.push({c + edge.cost, next});
        }
    }
    Found found;
    if (cost[static_cast<std::size_t>(goal)] == INT_MAX) return found;
    found.cost = cost[static_cast<std::size_t>(goal)];
    for (int state = goal; state != start; state = before[static_cast<std::size_t>(state)])
        found.steps.push_back(graph.edges[static_cast<std::size_t>(by[static_cast<std::size_t>(state)])].step);
    std::reverse(found.steps.begin(), found.steps.end());
    return found;
}

} // namespace

std::vector<LoopStep> signal_loop(const Design& design, const TerminalRef& cut) {
    const Graph graph = graph_of(design);
    Found best;
    for (const Edge& edge : graph.edges) {
        if (design.parts[static_cast<std::size_t>(edge.step.part)].ref != cut.part) continue;
        const bool inward = edge.step.entry == cut.terminal, outward = edge.step.exit == cut.terminal;
        if (!inward && !outward) continue;
        // Inward: through the part first, then back to the cut. Outward: from the cut's net round and out of the part.
        Found way = cheapest(graph, edge.to, edge.from, edge.amplifies, edge.step.part);
        if (way.cost == INT_MAX) continue;
        way.cost += edge.cost;
        way.steps.insert(inward ? way.steps.begin() : way.steps.end(), edge.step);
        if (way.cost < best.cost) best = std::move(way);
    }
    return best.steps;
}

} // namespace sinewright::ui
