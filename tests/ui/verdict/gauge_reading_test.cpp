#include "ui/verdict/gauge_reading.hpp"
#include <catch2/catch.hpp>
#include <random>

using namespace sinewright;
using namespace sinewright::ui;

namespace {

const QString minus = QChar(0x2212), thin_space = QChar(0x2009);

TargetFinding finding(const char* name, std::optional<double> value, std::optional<double> min,
                      std::optional<double> max) {
    TargetFinding f;
    f.name = name, f.value = value, f.min = min, f.max = max;
    if (value) f.met = (!min || *value >= *min) && (!max || *value <= *max);
    return f;
}

GaugeReading reading(const TargetFinding& target, const Design& design = {}) {
    Findings findings;
    findings.targets = {target};
    const auto readings = gauge_readings(&findings, design);
    REQUIRE(!readings.empty());
    return readings[0];
}

} // namespace

TEST_CASE("a gauge writes value, unit and target as people read them", "[verdict][ordinary]") {
    const auto margin = reading(finding("startup_margin_db", 0.2847, 0.2, 1.0));
    CHECK(margin.name == "Start-up margin");
    CHECK(margin.value == "+0.28");
    CHECK(margin.unit == "dB");
    CHECK(margin.words == "within 0.2 … 1");
    CHECK(margin.met == true);
    CHECK(margin.view == "Start");

    const auto thd = reading(finding("thd_db", -46.21, {}, -40.0));
    CHECK(thd.value == minus + "46.2");
    CHECK(thd.words == "below " + minus + "40");

    const auto yield = reading(finding("yield", 0.987, 0.99, {}));
    CHECK(yield.value == "98.7");
    CHECK(yield.words == "short of 99");
    CHECK(yield.met == false);

    Design design;
    Target frequency;
    frequency.name = "frequency_hz", frequency.nominal = Value{1000, ""}, frequency.within = Value{0.01, "1%"};
    design.targets = {frequency};
    const auto pulled = reading(finding("frequency_hz", 1001.34, 990.0, 1010.0), design);
    CHECK(pulled.value == "1" + thin_space + "001.3");
    CHECK(pulled.words == "1" + thin_space + "000 Hz within 1 %");
}

TEST_CASE("the needle stands in the band exactly when the target is met", "[verdict][tricky]") {
    std::mt19937 random(11);
    std::uniform_real_distribution<double> any(-5, 5), unit(0, 1);
    for (int i = 0; i < 2000; ++i) {
        const double a = any(random), b = any(random), value = any(random);
        std::optional<double> min = std::min(a, b), max = std::max(a, b);
        if (const double which = unit(random); which < 0.33)
            min.reset();
        else if (which < 0.66)
            max.reset();
        const auto r = reading(finding("thd_db", value, min, max));
        INFO(value << " in " << min.value_or(-INFINITY) << " … " << max.value_or(INFINITY));
        REQUIRE(r.needle);
        CHECK(*r.needle >= 0);
        CHECK(*r.needle <= 1);
        const bool in_band = *r.needle >= *r.band_from - 1e-12 && *r.needle <= *r.band_to + 1e-12;
        CHECK(in_band == *r.met);
    }
}

TEST_CASE("a value that is not known reads as a dash with its reason, and no needle", "[verdict][ordinary]") {
    auto unknown = finding("thd_db", {}, {}, -80.0);
    unknown.reason = "no steady state found";
    const auto r = reading(unknown);
    CHECK(r.value == QString(QChar(0x2013)));
    CHECK(r.fact == "no steady state found");
    CHECK(!r.needle);
    CHECK(!r.met);
    CHECK(r.band_to);
}

TEST_CASE("without targets the strip shows margin, frequency and growth without bands", "[verdict][ordinary]") {
    Findings findings;
    SmallSignal small_signal;
    small_signal.frequency_hz = 1001.3, small_signal.growth_per_s = -20, small_signal.growth_per_cycle = -0.0198;
    findings.small_signal.value = small_signal;
    LoopFinding loop;
    loop.barkhausen = BarkhausenPoint{1005.4, 0.97, -0.2646, true};
    findings.loop.value = loop;
    const auto readings = gauge_readings(&findings, {});
    REQUIRE(readings.size() == 3);
    CHECK(readings[0].value == minus + "0.26");
    CHECK(readings[0].fact == "loses 1.98 % a cycle");
    REQUIRE(readings[0].zero);
    CHECK(*readings[0].needle < *readings[0].zero);
    CHECK(readings[1].value == "1" + thin_space + "001.3");
    CHECK(readings[1].fact == "Barkhausen point 1" + thin_space + "005.4 Hz");
    CHECK(readings[2].value == minus + "2.0");
    for (const auto& r : readings) CHECK(!r.band_from);
    CHECK(gauge_readings(nullptr, {}).size() == 3);
}

TEST_CASE("before results come a target shows its name and band", "[verdict][ordinary]") {
    Design design;
    Target frequency;
    frequency.name = "frequency_hz", frequency.nominal = Value{1000, ""}, frequency.within = Value{0.01, ""};
    design.targets = {frequency};
    const auto readings = gauge_readings(nullptr, design);
    REQUIRE(readings.size() == 3);
    CHECK(readings[0].name == "Frequency");
    CHECK(readings[0].band_from == Approx(0.25));
    CHECK(readings[0].band_to == Approx(0.75));
}
