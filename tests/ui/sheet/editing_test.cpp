#include "sheet_designs.hpp"
#include "ui/sheet/reading.hpp"
#include <catch2/catch.hpp>

using namespace sinewright;
using namespace sinewright::ui;
using test::three_resistors;
using test::wien_loop;

TEST_CASE("a dropped part starts with a typical value, free ends and the next free reference", "[editing][ordinary]") {
    Design d = three_resistors();
    const Part part = starting_part(d, "resistor", {0, 0, 0, false});
    CHECK(part.ref == "R4");
    CHECK(value_text(part) == "10k");
    for (const TerminalNet& t : part.terminals) CHECK_FALSE(t.net);
    d.parts.erase(d.parts.begin() + 1);
    CHECK(starting_part(d, "resistor", {}).ref == "R2");
}

TEST_CASE("every kind of part can be dropped with values its own check accepts", "[editing][ordinary]") {
    for (const Symbol& symbol : all_symbols()) {
        INFO(symbol.kind);
        const Part part = starting_part({}, symbol.kind, {});
        REQUIRE(find_part_kind(symbol.kind));
        for (const ParameterInfo& parameter : find_part_kind(symbol.kind)->parameters)
            if (parameter.required) CHECK(part.find(parameter.name));
    }
}

TEST_CASE("a part dropped with its end on another's is joined to it", "[editing][ordinary]") {
    Design d;
    drop(d, starting_part(d, "resistor", {0, 0, 0, false}));
    drop(d, starting_part(d, "capacitor", {80, 0, 0, false}));
    CHECK(d.parts[0].net_at("b") == "n1");
    CHECK(d.parts[1].net_at("a") == "n1");
    drop(d, starting_part(d, "resistor", {400, 0, 0, false}));
    CHECK_FALSE(d.parts[2].net_at("a"));
}

TEST_CASE("joining two free ends makes a net, joining nets keeps the stronger name", "[editing][ordinary]") {
    Design d = three_resistors();
    CHECK(join(d, {"R1", "b"}, {"R2", "a"}).isEmpty());
    CHECK(d.parts[0].net_at("b") == "n1");
    CHECK(join(d, {"R2", "b"}, {"R3", "a"}).isEmpty());
    CHECK(d.parts[1].net_at("b") == "n2");

    SECTION("the older of two automatic names stays") {
        CHECK(join(d, {"R3", "a"}, {"R1", "b"}).isEmpty());
        CHECK(d.parts[2].net_at("a") == "n1");
        CHECK(d.parts[1].net_at("b") == "n1");
    }
    SECTION("a given name stays before an automatic one") {
        CHECK(rename_net(d, "n2", "tank").isEmpty());
        CHECK(join(d, {"R1", "b"}, {"R3", "a"}).isEmpty());
        CHECK(d.parts[0].net_at("b") == "tank");
    }
    SECTION("the output stays before a given name") {
        CHECK(rename_net(d, "n1", "tank").isEmpty());
        d.output = "n2";
        CHECK(join(d, {"R1", "b"}, {"R3", "a"}).isEmpty());
        CHECK(d.parts[0].net_at("b") == "n2");
    }
    SECTION("gnd stays before everything but the output, which it must not short") {
        CHECK(ground(d, {"R2", "b"}).isEmpty());
        CHECK(d.parts[2].net_at("a") == "gnd");
        d.output = "n1";
        const Design before = d;
        CHECK_FALSE(ground(d, {"R1", "b"}).isEmpty());
        CHECK(d == before);
    }
    SECTION("an end is not joined to itself or twice") {
        const Design before = d;
        CHECK_FALSE(join(d, {"R1", "b"}, {"R1", "b"}).isEmpty());
        CHECK_FALSE(join(d, {"R1", "b"}, {"R2", "a"}).isEmpty());
        CHECK_FALSE(join(d, {"R1", "b"}, {"R9", "a"}).isEmpty());
        CHECK(d == before);
    }
}

TEST_CASE("parting a net leaves the name on one side and numbers the other; an end alone becomes free",
          "[editing][ordinary]") {
    Design d = wien_loop();
    split(d, "m", {{"R5", "b"}, {"D1", "k"}});
    CHECK(d.find("R5")->net_at("b") == "n1");
    CHECK(d.find("D1")->net_at("k") == "n1");
    CHECK(d.find("U1")->net_at("minus") == "m");
    split(d, "n1", {{"D1", "k"}});
    CHECK_FALSE(d.find("D1")->net_at("k"));
    CHECK_FALSE(d.find("R5")->net_at("b")); // nothing is left to join on n1
}

TEST_CASE("renaming a net follows to labels and output; a name in use makes the nets one", "[editing][ordinary]") {
    Design d = wien_loop();
    d.labels.push_back({"out", 800, 240, std::nullopt});
    CHECK(rename_net(d, "out", "tone").isEmpty());
    CHECK(d.output == "tone");
    CHECK(d.labels[0].net == "tone");
    CHECK(d.find("U1")->net_at("out") == "tone");
    CHECK(rename_net(d, "s", "x").isEmpty());
    CHECK(d.find("R1")->net_at("b") == "x");
    CHECK_FALSE(rename_net(d, "gnd", "earth").isEmpty());
    CHECK_FALSE(rename_net(d, "m", "a b").isEmpty());
    CHECK_FALSE(rename_net(d, "tone", "gnd").isEmpty());
}

TEST_CASE("renaming a part follows to cut, groups, dials and stubs", "[editing][ordinary]") {
    Design d = wien_loop();
    d.groups.push_back({"pair", {"R1", "R2"}, {}});
    d.dials.push_back({"tune", {"R1.resistance", "R2.resistance"}, {1e3, "1k"}, {1e4, "10k"}, DialLaw::log, {}});
    CHECK(add_stub(d, {"R1", "b"}, 500, -60).isEmpty());
    CHECK(rename_part(d, "R1", "R9").isEmpty());
    CHECK(d.groups[0].members[0] == "R9");
    CHECK(d.dials[0].sets[0] == "R9.resistance");
    CHECK(d.labels[0].stub_of->part == "R9");
    CHECK(rename_part(d, "U1", "A1").isEmpty());
    CHECK(d.cut->part == "A1");
    CHECK_FALSE(rename_part(d, "R2", "R3").isEmpty());
}

TEST_CASE("deleting a part frees what only it held and forgets it in cut, groups and dials", "[editing][ordinary]") {
    Design d = wien_loop();
    CHECK(rename_net(d, "s", "n7").isEmpty());
    d.groups.push_back({"pair", {"R1"}, {}});
    remove_parts(d, {"R1", "U1"});
    CHECK_FALSE(d.find("R1"));
    CHECK_FALSE(d.find("C1")->net_at("a")); // n7 held R1 and C1 only
    CHECK(d.find("C1")->net_at("b") == "p");
    CHECK_FALSE(d.cut);
    CHECK(d.groups.empty());
}

TEST_CASE("four turns and two flips bring parts back", "[editing][ordinary]") {
    const Design before = wien_loop();
    const std::vector<std::string> refs{"R1", "C1", "U1", "D1"};
    Design d = before;
    for (int i = 0; i < 4; ++i) turn_parts(d, refs, 1);
    CHECK(d == before);
    for (const bool upside_down : {true, false}) {
        flip_parts(d, refs, upside_down);
        CHECK_FALSE(d == before);
        flip_parts(d, refs, upside_down);
        CHECK(d == before);
    }
    turn_parts(d, refs, 1), turn_parts(d, refs, -1);
    CHECK(d == before);
}

TEST_CASE("flipping moves every end to its mirror image", "[editing][tricky]") {
    for (const int turn : {0, 90, 180, 270})
        for (const bool upside_down : {true, false}) {
            Design d;
            d.parts.push_back(starting_part(d, "opamp", {0, 0, turn, false}));
            const auto before = shape_of(d.parts[0], *d.parts[0].place).ports;
            flip_parts(d, {"U1"}, upside_down);
            const auto after = shape_of(d.parts[0], *d.parts[0].place).ports;
            for (std::size_t i = 0; i < before.size(); ++i) {
                CHECK(after[i].at.x == (upside_down ? before[i].at.x : -before[i].at.x));
                CHECK(after[i].at.y == (upside_down ? -before[i].at.y : before[i].at.y));
            }
        }
}

TEST_CASE("copies get names of their own; nets inside are new, gnd stays, ends to the rest are free",
          "[editing][ordinary]") {
    Design d = wien_loop();
    const auto refs = add_copies(d, excerpt(d, {"R1", "C1", "C2"}), 40, 40);
    REQUIRE(refs.size() == 3);
    const Part &r = *d.find(refs[0]), &c = *d.find(refs[1]), &c2 = *d.find(refs[2]);
    CHECK(r.ref == "R6");
    CHECK(r.net_at("b") == c.net_at("a"));
    CHECK(r.net_at("b") != "s");
    CHECK_FALSE(r.net_at("a")); // it was on out
    CHECK(c.net_at("b") == c2.net_at("a"));
    CHECK(c2.net_at("b") == "gnd");
    CHECK(r.place->x == d.find("R1")->place->x + 40);
}

TEST_CASE("typed values are read as letter codes and refused with a reason", "[editing][errors]") {
    Design d = wien_loop();
    CHECK(set_value(d, "R1", "4k7Ω").isEmpty());
    CHECK(set_value(d, "R1", "4k7").isEmpty());
    CHECK(std::get<Value>(*d.find("R1")->find("resistance")).si == 4700);
    CHECK(std::get<Value>(*d.find("R1")->find("resistance")).spelling == "4k7");
    const Design before = d;
    CHECK_FALSE(set_value(d, "R1", "4k7x").isEmpty());
    CHECK_FALSE(set_value(d, "R1", "-5").isEmpty());
    CHECK_FALSE(set_value(d, "D1", "5").isEmpty());
    CHECK(d == before);
    CHECK(set_value(d, "U1", "ideal").isEmpty());
    CHECK(value_text(*d.find("U1")) == "ideal");
    CHECK(set_value(d, "U1", "3M").isEmpty());
    CHECK(std::get<Value>(*d.find("U1")->find("gbw")).si == 3e6);
}

TEST_CASE("the wheel steps along the series that goes with the tolerance, with Shift by one per cent",
          "[editing][ordinary]") {
    Design d = wien_loop();
    CHECK(step_value(d, "R1", 1, false)); // E24, IEC 60063:2015: 10, 11, 12, 13 …
    CHECK(value_text(*d.find("R1")) == "11k");
    CHECK(step_value(d, "R1", -2, false));
    CHECK(value_text(*d.find("R1")) == "9k1");
    d.find("R1")->tolerance = Value{0.1, "10%"};
    CHECK(step_value(d, "R1", 1, false)); // E12: 8.2, 10
    CHECK(value_text(*d.find("R1")) == "10k");
    CHECK(step_value(d, "R1", 1, true));
    CHECK(value_text(*d.find("R1")).toStdString() == "10k1");
    CHECK_FALSE(step_value(d, "D1", 1, false));
}

TEST_CASE("a stub joins by name: two stubs of one name are one net", "[editing][ordinary]") {
    Design d = three_resistors();
    CHECK(add_stub(d, {"R1", "b"}, 80, 0).isEmpty());
    CHECK(add_stub(d, {"R3", "a"}, 240, 0).isEmpty());
    CHECK(d.parts[0].net_at("b") == "n1");
    CHECK(d.parts[2].net_at("a") == "n2");
    CHECK(rename_net(d, "n2", "n1").isEmpty());
    CHECK(d.parts[2].net_at("a") == "n1");
    CHECK(d.labels.size() == 2);
    free_end(d, {"R1", "b"});
    CHECK(d.labels.size() == 1);
}

TEST_CASE("the first amplifier joined drives the output; an output whose last end goes is forgotten",
          "[editing][ordinary]") {
    Design d = three_resistors();
    d.parts.push_back(starting_part(d, "opamp", {0, 200, 0, false}));
    CHECK(join(d, {"R1", "b"}, {"R2", "a"}).isEmpty());
    CHECK(d.output.empty());
    CHECK(join(d, {"U1", "out"}, {"R3", "a"}).isEmpty());
    CHECK(d.output == "out");
    CHECK(d.find("R3")->net_at("a") == "out");
    CHECK(join(d, {"U1", "minus"}, {"R3", "b"}).isEmpty());
    CHECK(d.output == "out");
    remove_parts(d, {"U1", "R3"});
    CHECK(d.output.empty());
}
