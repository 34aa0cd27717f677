#include "ui/sheet/router.hpp"
#include <algorithm>
#include <catch2/catch.hpp>
#include <map>
#include <random>
#include <set>

using namespace sinewright::ui;

namespace {

/// Every grid edge a route uses, each as its two cells in order.
std::set<std::pair<Cell, Cell>> edges_of(const Route& route) {
    std::set<std::pair<Cell, Cell>> edges;
    for (const Run& run : route.runs)
        for (std::size_t i = 1; i < run.corners.size(); ++i) {
            Cell c = run.corners[i - 1];
            const Cell to = run.corners[i];
            while (c != to) {
                const Cell next{c.x + (to.x > c.x) - (to.x < c.x), c.y + (to.y > c.y) - (to.y < c.y)};
                edges.insert(std::minmax(c, next));
                c = next;
            }
        }
    return edges;
}

std::set<Cell> cells_on(const Route& route) {
    std::set<Cell> cells;
    for (const auto& [a, b] : edges_of(route)) cells.insert(a), cells.insert(b);
    return cells;
}

std::vector<Cell> box(int left, int top, int right, int bottom) {
    std::vector<Cell> cells;
    for (int y = top; y <= bottom; ++y)
        for (int x = left; x <= right; ++x) cells.push_back({x, y});
    return cells;
}

int bends(const Route& route) {
    int count = 0;
    for (const Run& run : route.runs) count += std::max(0, static_cast<int>(run.corners.size()) - 2);
    return count;
}

/// Parts of one row and two pins each, on a grid with room between, joined at random: a stand-in for a drawing.
Terrain random_terrain(unsigned seed, int columns, int rows) {
    std::mt19937 random(seed);
    Terrain terrain;
    std::vector<Pin> pins;
    for (int row = 0; row < rows; ++row)
        for (int column = 0; column < columns; ++column) {
            const Cell centre{column * 8, row * 5};
            for (Cell c : box(centre.x - 1, centre.y, centre.x + 1, centre.y)) terrain.blocked.push_back(c);
            pins.push_back({{centre.x - 2, centre.y}, Way::left});
            pins.push_back({{centre.x + 2, centre.y}, Way::right});
        }
    std::shuffle(pins.begin(), pins.end(), random);
    for (std::size_t i = 0, net = 0; i + 3 < pins.size(); ++net) {
        const std::size_t size = 2 + random() % 2;
        terrain.nets.push_back(
            {std::to_string(net),
             {pins.begin() + static_cast<std::ptrdiff_t>(i), pins.begin() + static_cast<std::ptrdiff_t>(i + size)}});
        i += size;
    }
    return terrain;
}

void check_lawful(const Terrain& terrain, const std::vector<Route>& routes) {
    std::map<std::pair<Cell, Cell>, std::size_t> owner;
    const std::set<Cell> blocked(terrain.blocked.begin(), terrain.blocked.end());
    for (std::size_t n = 0; n < routes.size(); ++n) {
        INFO("net " << terrain.nets[n].name);
        if (routes[n].strained) continue;
        std::set<Cell> pins;
        for (const Pin& pin : terrain.nets[n].pins) pins.insert(pin.at);
        for (const auto& edge : edges_of(routes[n]))
            CHECK(owner.emplace(edge, n).second); // no two nets lie on each other
        for (Cell c : cells_on(routes[n])) CHECK((!blocked.contains(c) || pins.contains(c)));
        // A tree: one run less than knots, and every pin reached from the first.
        CHECK(routes[n].runs.size() + 1 == routes[n].knots.size());
        for (int pin = 1; pin < static_cast<int>(terrain.nets[n].pins.size()); ++pin)
            CHECK_FALSE(way_between(routes[n], 0, pin).empty());
    }
}

} // namespace

TEST_CASE("two facing ends are joined by a straight run", "[router][ordinary]") {
    Router router;
    const auto& routes = router.lay({{}, {{"n1", {{{0, 0}, Way::right}, {{7, 0}, Way::left}}}}});
    REQUIRE(routes.size() == 1);
    CHECK(routes[0].runs.size() == 1);
    CHECK(routes[0].runs[0].corners == std::vector<Cell>{{0, 0}, {7, 0}});
}

TEST_CASE("a join goes round a part that lies between its ends", "[router][ordinary]") {
    Router router;
    const Terrain terrain{box(3, -1, 5, 1), {{"n1", {{{0, 0}, Way::right}, {{9, 0}, Way::left}}}}};
    const auto& routes = router.lay(terrain);
    check_lawful(terrain, routes);
    CHECK_FALSE(routes[0].strained);
    CHECK(bends(routes[0]) == 4);
}

TEST_CASE("an end on the far side of a part is reached round it", "[router][ordinary]") {
    Router router;
    std::vector<Cell> bodies = box(-3, 0, -1, 0);
    for (Cell c : box(3, 0, 5, 0)) bodies.push_back(c);
    const Terrain terrain{bodies, {{"n1", {{{0, 0}, Way::right}, {{6, 0}, Way::right}}}}};
    const auto& routes = router.lay(terrain);
    check_lawful(terrain, routes);
    CHECK_FALSE(routes[0].strained);
    CHECK(bends(routes[0]) == 3);
}

TEST_CASE("three ends share a trunk with one junction", "[router][ordinary]") {
    Router router;
    const auto& routes = router.lay({{}, {{"n1", {{{0, 0}, Way::right}, {{10, 0}, Way::left}, {{5, 6}, Way::up}}}}});
    const Route& route = routes[0];
    REQUIRE(route.knots.size() == 4);
    CHECK(route.knots[3].pin == -1);
    CHECK(route.knots[3].at == Cell{5, 0});
    CHECK(degree(route, 3) == 3);
}

TEST_CASE("nets cross at right angles and never lie on each other", "[router][tricky]") {
    Router router;
    const Terrain terrain{
        {}, {{"n1", {{{0, 5}, Way::right}, {{10, 5}, Way::left}}}, {"n2", {{{5, 0}, Way::down}, {{5, 10}, Way::up}}}}};
    const auto& routes = router.lay(terrain);
    check_lawful(terrain, routes);
    CHECK(bends(routes[0]) == 0);
    CHECK(bends(routes[1]) == 0);
}

TEST_CASE("random drawings are routed by law: no overlap, no run through a part, every end reached",
          "[router][large]") {
    for (unsigned seed = 1; seed <= 20; ++seed) {
        const Terrain terrain = random_terrain(seed, 6, 5);
        Router router;
        INFO("seed " << seed);
        const auto& routes = router.lay(terrain);
        check_lawful(terrain, routes);
        CHECK(std::count_if(routes.begin(), routes.end(), [](const Route& r) { return r.strained; }) <= 1);
    }
}

TEST_CASE("an end walled in is still joined, and the route says it is strained", "[router][errors]") {
    Router router;
    std::vector<Cell> wall = box(-1, -1, 1, 1);
    std::erase(wall, Cell{0, 0});
    const auto& routes = router.lay({wall, {{"n1", {{{0, 0}, Way::any}, {{8, 0}, Way::left}}}}});
    CHECK(routes[0].strained);
    CHECK_FALSE(way_between(routes[0], 0, 1).empty());
}

TEST_CASE("taking out a run parts the ends into its two sides", "[router][ordinary]") {
    Router router;
    const Route route = router.lay({{}, {{"n1", {{{0, 0}, Way::right}, {{10, 0}, Way::left}, {{5, 6}, Way::up}}}}})[0];
    for (int run = 0; run < static_cast<int>(route.runs.size()); ++run) {
        const auto before = pins_before(route, run);
        CHECK(before.size() >= 1);
        CHECK(before.size() <= 2);
    }
}

TEST_CASE("what a router remembers never changes the routes: any history gives those of a fresh one",
          "[router][tricky]") {
    for (unsigned seed = 1; seed <= 6; ++seed) {
        INFO("seed " << seed);
        Terrain terrain = random_terrain(seed, 5, 4);
        Router lasting;
        std::mt19937 random(seed);
        for (int step = 0; step < 25; ++step) {
            // Drag one obstacle about, now and then take a net away or bring it back.
            for (Cell& c : terrain.blocked)
                if (c.y == 0) c.x += step % 2 ? 1 : -1;
            if (step % 7 == 3 && terrain.nets.size() > 2) terrain.nets.erase(terrain.nets.begin() + random() % 3);
            Router fresh;
            const auto& now = lasting.lay(terrain);
            const auto& again = fresh.lay(terrain);
            REQUIRE(now.size() == again.size());
            for (std::size_t n = 0; n < now.size(); ++n) {
                if (now[n].strained || again[n].strained) continue;
                CHECK(edges_of(now[n]) == edges_of(again[n]));
            }
        }
    }
}

TEST_CASE("moving a part far from a net leaves the net as it is, without a new search", "[router][ordinary]") {
    Terrain terrain{
        box(40, 0, 42, 0),
        {{"n1", {{{0, 0}, Way::right}, {{7, 3}, Way::left}}}, {"n2", {{{39, 0}, Way::left}, {{30, 4}, Way::up}}}}};
    Router router;
    const Route before = router.lay(terrain)[0];
    terrain.blocked = box(40, 1, 42, 1);
    terrain.nets[1].pins[0].at = {39, 1};
    const auto& after = router.lay(terrain);
    CHECK(edges_of(after[0]) == edges_of(before));
    CHECK(router.searched() == 2); // n2 alone, in both rounds
}
