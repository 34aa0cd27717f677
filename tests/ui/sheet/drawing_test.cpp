#include "sheet_designs.hpp"
#include "ui/sheet/auto_place.hpp"
#include "ui/sheet/drawing.hpp"
#include "ui/sheet/reading.hpp"
#include "ui/sheet/signal_loop.hpp"
#include "ui/sheet/typing.hpp"
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>

using namespace sinewright;
using namespace sinewright::ui;
using test::wien_loop;

TEST_CASE("every part kind has a symbol whose terminals are the kind's, on the grid", "[symbols][ordinary]") {
    for (const PartKind* kind : part_kinds()) {
        INFO(kind->name);
        const Symbol& symbol = symbol_of(kind->name);
        REQUIRE(symbol.kind == kind->name);
        REQUIRE(symbol.ports.size() == kind->terminals.size());
        for (std::size_t i = 0; i < symbol.ports.size(); ++i)
            CHECK(symbol.ports[i].terminal == kind->terminals[i].name);
    }
}

TEST_CASE("a drawing joins every terminal of a net and gives each grounded one its own ground", "[drawing][ordinary]") {
    Drawing drawing;
    drawing.take_over(wien_loop(), {}, light_theme());
    CHECK(drawing.earths().size() == 3); // R2, C2, R4
    CHECK(drawing.joins().size() == 5);  // out, s, p, m, x
    for (const Join& join : drawing.joins()) {
        INFO(join.net);
        CHECK_FALSE(join.route.strained);
        for (int pin = 1; pin < static_cast<int>(join.ends.size()); ++pin)
            CHECK_FALSE(way_between(join.route, 0, pin).empty());
    }
    REQUIRE(drawing.flags().size() == 1);
    CHECK(drawing.flags()[0].output);
}

TEST_CASE("no reference or value lies on a join, a part or another text in the Wien loop", "[drawing][ordinary]") {
    Drawing drawing;
    drawing.take_over(wien_loop(), {}, light_theme());
    std::vector<QRectF> boxes;
    for (const PartText& text : drawing.texts())
        for (const QRectF& box : {text.ref_box, text.value_box})
            if (box.isValid()) boxes.push_back(box);
    for (std::size_t i = 0; i < boxes.size(); ++i) {
        for (const PartShape& part : drawing.parts()) CHECK_FALSE(part.body.intersects(boxes[i]));
        for (std::size_t j = i + 1; j < boxes.size(); ++j) CHECK_FALSE(boxes[j].intersects(boxes[i]));
        for (const Join& join : drawing.joins())
            for (const Run& run : join.route.runs)
                for (std::size_t c = 1; c < run.corners.size(); ++c) {
                    const QRectF line =
                        QRectF(sheet_point(run.corners[c - 1]), sheet_point(run.corners[c])).normalized();
                    CHECK_FALSE(line.adjusted(-1, -1, 1, 1).intersects(boxes[i]));
                }
    }
}

TEST_CASE("a net with a stub is drawn to its name only, not across the sheet", "[drawing][ordinary]") {
    Design d = test::three_resistors();
    REQUIRE(add_stub(d, {"R1", "b"}, 80, -40).isEmpty());
    REQUIRE(add_stub(d, {"R3", "a"}, 240, -40).isEmpty());
    REQUIRE(rename_net(d, "n2", "n1").isEmpty());
    Drawing drawing;
    drawing.take_over(d, {}, light_theme());
    REQUIRE(drawing.joins().size() == 2);
    for (const Join& join : drawing.joins()) {
        CHECK(join.net == "n1");
        CHECK(join.ends.size() == 2);
        CHECK(join.ends[1].flag >= 0);
    }
}

TEST_CASE("the loop through the cut runs from the amplifier round to the cut", "[drawing][ordinary]") {
    const Design d = wien_loop();
    const auto refs = [&](const TerminalRef& cut) {
        std::string text;
        for (const LoopStep& step : signal_loop(d, cut)) text += d.parts[static_cast<std::size_t>(step.part)].ref + " ";
        return text;
    };
    CHECK(refs({"U1", "plus"}) == "U1 R1 C1 ");
    CHECK(refs({"U1", "minus"}) == "U1 R3 R5 ");
    CHECK(refs({"R1", "a"}) == "R1 C1 U1 ");
    CHECK(refs({"R2", "b"}).empty()); // gnd carries no signal
    CHECK(refs({"R9", "a"}).empty());
}

TEST_CASE("parts without places are laid out without overlap, the same every time, placed ones staying",
          "[drawing][ordinary]") {
    Design d = wien_loop();
    for (Part& part : d.parts) part.place.reset();
    const Places first = auto_places(d);
    CHECK(first == auto_places(d));
    CHECK(first.size() == d.parts.size());
    std::vector<QRectF> reaches;
    for (const Part& part : d.parts) reaches.push_back(shape_of(part, place_of(part, first)).reach());
    for (std::size_t i = 0; i < reaches.size(); ++i)
        for (std::size_t j = i + 1; j < reaches.size(); ++j)
            CHECK_FALSE(reaches[i].adjusted(-1, -1, 1, 1).intersects(reaches[j].adjusted(-1, -1, 1, 1)));
    d.parts[4].place = Place{1000, 1000, 0, false};
    CHECK(auto_places(d).count("U1") == 0);
}

TEST_CASE("places of a file that lie beyond the sheet or are no numbers are drawn within reach", "[drawing][errors]") {
    Design d = test::three_resistors();
    d.parts[0].place = Place{1e300, -1e300, 37, false};
    d.parts[1].place = Place{std::nan(""), 3.7, -90, true};
    Drawing drawing;
    drawing.take_over(d, {}, light_theme());
    CHECK(drawing.extent().width() < 40000);
    CHECK(drawing.parts()[1].place.turn == 270);
}

TEST_CASE("typed letters offer what they can mean, likeliest first", "[typing][ordinary]") {
    const auto first = [](const char* typed) {
        const auto meanings = meanings_of(typed);
        return meanings.empty() ? std::string() : meanings.front().kind;
    };
    CHECK(first("4k7") == "resistor");
    CHECK(first("10n") == "capacitor");
    CHECK(first("1m5H") == "inductor");
    CHECK(first("1m5") == "inductor");
    CHECK(first("op") == "opamp");
    CHECK(first("lamp") == "lamp");
    CHECK(first("diode") == "diode");
    CHECK(first("9V") == "supply");
    CHECK(first("bead") == "thermistor");
    CHECK(first("xyzzy").empty());
    CHECK(first("").empty());
    REQUIRE(meanings_of("4k7").front().value);
    CHECK(meanings_of("4k7").front().value->si == 4700);
    CHECK(meanings_of("pot 22k").front().value->si == 22e3);
}

TEST_CASE("a part is spoken with its kind, value and nets", "[access][ordinary]") {
    Design d = wien_loop();
    REQUIRE(set_value(d, "R3", "18k").isEmpty());
    CHECK(spoken_part(*d.find("R3")) == "R3, resistor, 18 kilo-ohm, between out and x");
    CHECK(spoken_part(*d.find("R4")).contains("between m and ground"));
    CHECK(spoken_part(*d.find("U1")).contains("+ to p"));
}
