#include "ui/document/design_difference.hpp"
#include <catch2/catch.hpp>
#include <random>

using namespace sinewright;
using sinewright::ui::DesignDifference;

namespace {

Part resistor(const std::string& ref, double ohm) {
    Part part;
    part.ref = ref, part.kind = "resistor";
    part.parameters = {{"resistance", Value{ohm, ""}}};
    part.terminals = {{"a", "out"}, {"b", "gnd"}};
    return part;
}

Design three_resistors() {
    Design design;
    design.title = "three";
    design.parts = {resistor("R1", 1e3), resistor("R2", 2e3), resistor("R3", 3e3)};
    return design;
}

void check_exchange(const Design& a, const Design& b) {
    auto difference = DesignDifference::between(a, b);
    CHECK(difference.empty() == (a == b));
    Design design = a;
    for (int round = 0; round < 3; ++round) {
        difference.exchange(design);
        CHECK(design == b);
        difference.exchange(design);
        CHECK(design == a);
    }
}

} // namespace

TEST_CASE("exchanging a difference goes back and forth between the two designs", "[document][ordinary]") {
    const Design a = three_resistors();
    SECTION("nothing changed") { check_exchange(a, a); }
    SECTION("title and a value") {
        Design b = a;
        b.title = "changed", b.parts[1] = resistor("R2", 2.2e3);
        check_exchange(a, b);
    }
    SECTION("a part added in the middle and another taken away") {
        Design b = a;
        b.parts.insert(b.parts.begin() + 1, resistor("R9", 9e3));
        b.parts.erase(b.parts.begin());
        check_exchange(a, b);
    }
    SECTION("a part renamed") {
        Design b = a;
        b.parts[2].ref = "R30";
        check_exchange(a, b);
    }
    SECTION("the order changed") {
        Design b = a;
        std::swap(b.parts[0], b.parts[2]);
        check_exchange(a, b);
    }
    SECTION("two parts of one name, which a file would refuse, are still carried whole") {
        Design b = a;
        b.parts.push_back(resistor("R1", 5e3));
        check_exchange(a, b);
    }
}

TEST_CASE("any sequence of random edits undone and redone gives identical designs", "[document][tricky]") {
    std::mt19937 random(7);
    std::vector<Design> states = {three_resistors()};
    std::vector<DesignDifference> steps;
    for (int i = 0; i < 200; ++i) {
        Design next = states.back();
        const auto pick = [&](std::size_t n) { return std::uniform_int_distribution<std::size_t>(0, n - 1)(random); };
        if (const auto what = pick(4); what == 0 || next.parts.empty())
            next.parts.insert(next.parts.begin() + static_cast<long>(pick(next.parts.size() + 1)),
                              resistor("X" + std::to_string(i), i));
        else if (what == 1)
            next.parts.erase(next.parts.begin() + static_cast<long>(pick(next.parts.size())));
        else if (what == 2)
            next.parts[pick(next.parts.size())].tolerance = Value{0.01 * i, ""};
        else
            next.dials.push_back({"dial " + std::to_string(i), {}, {1, ""}, {2, ""}, DialLaw::log, {}});
        steps.push_back(DesignDifference::between(states.back(), next));
        states.push_back(next);
    }
    Design design = states.front();
    for (int round = 0; round < 2; ++round) {
        for (auto& step : steps) step.exchange(design);
        REQUIRE(design == states.back());
        for (auto step = steps.rbegin(); step != steps.rend(); ++step) step->exchange(design);
        REQUIRE(design == states.front());
    }
}
