#include "ui/document/analyst.hpp"
#include "ui/document/document.hpp"
#include "ui/shell/starter.hpp"
#include <QCoreApplication>
#include <catch2/catch.hpp>

using namespace sinewright;
using namespace sinewright::ui;

namespace {

constexpr int limit_ms = 10000; // far above what a check needs, only to end a hung test

void set_r3(Document& document, double ohm) {
    document.edit(
        "R3",
        [&](Design& design) {
            std::get<Value>(design.find("R3")->parameters[0].value) = {ohm, ""};
        },
        "R3");
}

} // namespace

TEST_CASE("results belong to the document's revision and hold a curve round the frequency", "[analyst][ordinary]") {
    Document document;
    document.set_new(starter_design());
    Analyst analyst(document);
    CHECK(analyst.working());
    REQUIRE(analyst.wait_until_current(limit_ms));
    const ShownPtr shown = analyst.latest();
    CHECK(shown->revision == document.revision());
    CHECK(*shown->design == document.design());
    REQUIRE(shown->findings.small_signal);
    CHECK(shown->findings.small_signal->outcome == Outcome::starts);
    CHECK(shown->curve.frequency_hz.size() >= 500);
    REQUIRE(shown->findings.loop);
    REQUIRE(shown->findings.loop->barkhausen);
    CHECK(shown->curve.frequency_hz.front() < shown->findings.loop->barkhausen->frequency_hz / 5);
    CHECK(shown->curve.frequency_hz.back() > shown->findings.loop->barkhausen->frequency_hz * 5);
}

TEST_CASE("of many quick edits the newest wins and nothing older is shown after it", "[analyst][tricky]") {
    Document document;
    document.set_new(starter_design());
    Analyst analyst(document);
    int became_stale = 0;
    quint64 last = 0;
    bool rising = true;
    QObject::connect(&analyst, &Analyst::became_stale, &analyst, [&] { ++became_stale; });
    QObject::connect(&analyst, &Analyst::shown, &analyst, [&] {
        rising = rising && analyst.latest()->revision > last;
        last = analyst.latest()->revision;
    });
    for (int i = 0; i < 200; ++i) {
        set_r3(document, 18e3 + 10 * i);
        if (i % 10 == 0) QCoreApplication::processEvents();
    }
    CHECK(became_stale == 200);
    REQUIRE(analyst.wait_until_current(limit_ms));
    CHECK(rising);
    CHECK(last == document.revision());
    CHECK(*analyst.latest()->design == document.design());
}

TEST_CASE("a loop with too little gain is shown to decay, and to start again when given more", "[analyst][ordinary]") {
    Document document;
    document.set_new(starter_design());
    Analyst analyst(document);
    set_r3(document, 16e3); // 1 + (16k + 2k7)/10k = 2.87, below the 3 that an equal-arm bridge needs
    REQUIRE(analyst.wait_until_current(limit_ms));
    REQUIRE(analyst.latest()->findings.small_signal);
    CHECK(analyst.latest()->findings.small_signal->outcome == Outcome::decays);
    set_r3(document, 19e3);
    CHECK(!analyst.current());
    REQUIRE(analyst.wait_until_current(limit_ms));
    CHECK(analyst.latest()->findings.small_signal->outcome == Outcome::starts);
}

TEST_CASE("an analyst can go at any time, with work in hand", "[analyst][tricky]") {
    Document document;
    document.set_new(starter_design());
    for (int i = 0; i < 50; ++i) {
        Analyst analyst(document);
        set_r3(document, 18e3 + i);
        if (i % 3 == 0) QCoreApplication::processEvents();
    }
    QCoreApplication::processEvents();
    SUCCEED();
}
