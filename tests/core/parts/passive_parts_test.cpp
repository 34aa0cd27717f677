#include "tests/core/parts/recorded_part.hpp"
#include <catch2/catch.hpp>
#include <cmath>

using namespace sinewright;
using namespace sinewright::testing;
using Catch::WithinAbs;
using Catch::WithinRel;

TEST_CASE("a resistor obeys Ohm's law and is a constant stamp", "[parts]") {
    const RecordedPart r = record("resistor", {{"resistance", 4700.0}});
    CHECK(r.elements.empty());
    CHECK_THAT(r.current("a", r.at({{"a", 3.0}, {"b", 0.65}})), WithinRel(2.35 / 4700, 1e-15));
    CHECK(r.ties == std::vector<RecordedTie>{{Tie::conducts, 0, 1}});
}

TEST_CASE("a voltage-dependent resistor makes a third harmonic of kappa A squared over four", "[parts]") {
    // Source: expansion of i = (v/R)/(1 + κv²); the next order is κA² smaller, so the ratio tends to one.
    const double amplitude_v = 2;
    for (const double kappa : {1e-3, 1e-5, -1e-5}) {
        const RecordedPart r = record("resistor", {{"resistance", 1e3}, {"voltage_coefficient_2", kappa}});
        const auto current = over_a_cycle(256, [&](double phase) {
            return r.current("a", r.at({{"a", amplitude_v * std::cos(phase)}}));
        });
        const double expected = -kappa * amplitude_v * amplitude_v / 4;
        const double ratio = cosine_harmonic(current, 3) / cosine_harmonic(current, 1);
        CHECK_THAT(ratio, WithinRel(expected, 1.5 * std::abs(kappa) * amplitude_v * amplitude_v));
        CHECK_THAT(cosine_harmonic(current, 2), WithinAbs(0, 1e-17));
        // The contract's formula by hand.
        CHECK_THAT(r.current("a", r.at({{"a", 5.0}, {"b", 2.0}})), WithinRel(3e-3 / (1 + kappa * 9), 1e-14));
    }
}

TEST_CASE("a capacitor holds the charge its voltage coefficients say", "[parts]") {
    const double C = 10e-9, vc1 = 0.01, vc2 = -0.002;
    const RecordedPart plain = record("capacitor", {{"capacitance", C}});
    CHECK(plain.elements.empty());
    CHECK(plain.ties == std::vector<RecordedTie>{{Tie::stores, 0, 1}});
    CHECK_THAT(plain.charge("a", plain.at({{"a", 2.0}, {"b", -1.0}})), WithinRel(3 * C, 1e-15));

    const RecordedPart bent =
        record("capacitor", {{"capacitance", C}, {"voltage_coefficient_1", vc1}, {"voltage_coefficient_2", vc2}});
    for (const double v : {-7.0, -0.3, 0.0, 1.0, 6.0}) {
        const auto x = bent.at({{"a", v + 1}, {"b", 1.0}});
        CHECK_THAT(bent.charge("a", x), WithinAbs(C * (v + vc1 * v * v / 2 + vc2 * v * v * v / 3), 1e-15 * C));
        CHECK_THAT(bent.dq(x)(0, 0), WithinRel(C * (1 + vc1 * v + vc2 * v * v), 1e-14)); // dq/dv
        CHECK(bent.current("a", x) == 0);
    }
}

TEST_CASE("the series resistance of a capacitor carries the whole current to its plate", "[parts]") {
    const RecordedPart c =
        record("capacitor", {{"capacitance", 1e-6}, {"voltage_coefficient_1", 0.1}, {"series_resistance", 2.0}});
    const auto x = c.at({{"a", 1.5}, {"b", 0.5}, {"plate", 1.3}});
    CHECK_THAT(c.current("a", x), WithinRel(0.1, 1e-14));
    CHECK_THAT(c.f(x)[c.index("plate")], WithinRel(-0.1, 1e-14));
    CHECK_THAT(c.q(x)[c.index("plate")], WithinRel(1e-6 * (0.8 + 0.1 * 0.8 * 0.8 / 2), 1e-14));
    CHECK(c.charge("a", x) == 0);
}

TEST_CASE("an inductor's voltage is its resistance times current plus inductance times its rise", "[parts]") {
    const RecordedPart l = record("inductor", {{"inductance", 0.01}, {"series_resistance", 8.0}});
    const auto x = l.at({{"a", 2.0}, {"b", 0.4}, {"current", 0.05}});
    CHECK_THAT(l.rate("current", x), WithinRel((1.6 - 8 * 0.05) / 0.01, 1e-14));
    CHECK(l.current("a", x) == 0.05);
    CHECK(l.current("b", x) == -0.05);
    CHECK(l.ties == std::vector<RecordedTie>{{Tie::conducts, 0, 1}});
    // Without resistance it is a short at DC.
    CHECK(record("inductor", {{"inductance", 0.01}}).ties == std::vector<RecordedTie>{{Tie::forces_voltage, 0, 1}});
}

TEST_CASE("a potentiometer splits its track at the wiper and leaves the end resistance", "[parts]") {
    const RecordedPart p = record("potentiometer", {{"resistance", 10e3}, {"position", 0.3}, {"end_resistance", 20.0}});
    const auto x = p.at({{"current a to w", 1e-3}, {"current w to b", 2e-3}, {"a", 3.02}, {"w", 0.0}, {"b", -14.04}});
    CHECK_THAT(p.f(x)[p.index("current a to w")], WithinAbs(0, 1e-15)); // 20 Ω + 3 kΩ
    CHECK_THAT(p.f(x)[p.index("current w to b")], WithinAbs(0, 1e-14)); // 20 Ω + 7 kΩ
    CHECK(p.current("a", x) == 1e-3);
    CHECK_THAT(p.current("w", x), WithinRel(1e-3, 1e-15));
    CHECK(p.current("b", x) == -2e-3);
}

TEST_CASE("a wiper at the stop is a short, with the same unknowns as anywhere else", "[parts]") {
    const RecordedPart stop = record("potentiometer", {{"resistance", 10e3}, {"position", 1.0}});
    const auto x = stop.at({{"w", 1.0}, {"b", 1.0}, {"current w to b", 0.123}});
    CHECK(stop.f(x)[stop.index("current w to b")] == 0); // any current, no drop
    CHECK(stop.ties == std::vector<RecordedTie>{{Tie::conducts, 0, 1}, {Tie::forces_voltage, 1, 2}});
    CHECK(stop.size() == record("potentiometer", {{"resistance", 10e3}}).size());
}

TEST_CASE("a supply holds its voltage whatever the current", "[parts]") {
    const RecordedPart v = record("supply", {{"voltage", 15.0}});
    const auto x = v.at({{"plus", 14.0}, {"minus", -1.0}, {"current", -0.02}});
    CHECK(v.f(x)[v.index("current")] == 0);
    CHECK(v.current("plus", x) == -0.02);
    CHECK(v.current("minus", x) == 0.02);
    CHECK(v.ties == std::vector<RecordedTie>{{Tie::forces_voltage, 0, 1}});
}
