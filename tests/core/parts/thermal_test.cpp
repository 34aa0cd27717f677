/// Lamp and thermistor bead.
#include "tests/core/parts/recorded_part.hpp"
#include <catch2/catch.hpp>
#include <cmath>

using namespace sinewright;
using namespace sinewright::testing;
using Catch::WithinAbs;
using Catch::WithinRel;

TEST_CASE("a filament's resistance and warming follow the contract's equations", "[parts]") {
    const double R0 = 65, n = 1.15, C = 2.3e-5, K = 5e-5, radiation = 5.2e-14, T = 320;
    const RecordedPart lamp = record(
        "lamp",
        {{"cold_resistance", R0}, {"exponent", n}, {"heat_capacity", C}, {"conduction", K}, {"radiation", radiation}},
        T);
    for (const double theta : {320.0, 450.0, 900.0, 2100.0})
        for (const double v : {-3.0, 0.0, 0.7, 12.0}) {
            const auto x = lamp.at({{"a", v + 1}, {"b", 1.0}, {"temperature", theta}});
            const double i = v / (R0 * std::pow(theta / T, n));
            CHECK_THAT(lamp.current("a", x), WithinRel(i, 1e-13));
            const double power = v * i - K * (theta - T) - radiation * (std::pow(theta, 4) - std::pow(T, 4));
            // Margin: a rate is the small difference of powers up to a watt.
            CHECK_THAT(lamp.rate("temperature", x), WithinAbs(power / C, 1e-13 / C));
        }
}

TEST_CASE("a filament starts cold: at the design temperature, with its cold resistance", "[parts]") {
    for (const double T : {253.15, 298.15, 343.15}) {
        const RecordedPart lamp =
            record("lamp", {{"cold_resistance", 480.0}, {"heat_capacity", 1.4e-5}, {"conduction", 4e-5}}, T);
        const auto x = lamp.at({{"a", 1e-3}});
        CHECK(lamp.unknowns[lamp.index("temperature")].start == T);
        CHECK_THAT(lamp.current("a", x), WithinRel(1e-3 / 480, 1e-14));
        CHECK_THAT(lamp.rate("temperature", lamp.at({})), WithinAbs(0, 1e-9));
    }
}

TEST_CASE("a 28 V 40 mA lamp with the usual starting parameters is near 700 ohms when hot", "[parts]") {
    // Source: common practice (rated current 40 mA, cold 65 Ω); the starting parameters are rules of thumb, hence 10 %.
    const RecordedPart lamp = record(
        "lamp", {{"cold_resistance", 65.0}, {"heat_capacity", 2.3e-5}, {"conduction", 5e-5}, {"radiation", 5.2e-14}});
    const auto cooling = [&](double theta) {
        return -lamp.rate("temperature", lamp.at({{"a", 28.0}, {"temperature", theta}}));
    };
    const double hot_k = solve_rising(cooling, 0, 300, 4000);
    const double current_a = lamp.current("a", lamp.at({{"a", 28.0}, {"temperature", hot_k}}));
    CHECK_THAT(current_a, WithinRel(0.040, 0.1));
    CHECK_THAT(28 / current_a, WithinRel(700.0, 0.1));
}

TEST_CASE("a filament warmed to 450 K needs the power that its leads carry away", "[parts]") {
    // Source: heat balance at rest, v²/R = K·(θ − T), R = R0·(θ/T)^1.2.
    const double R = 1e3 * std::pow(450 / 298.15, 1.2), power_w = 4e-5 * (450 - 298.15);
    const RecordedPart lamp =
        record("lamp", {{"cold_resistance", 1e3}, {"heat_capacity", 1.2e-5}, {"conduction", 4e-5}});
    const double v = std::sqrt(power_w * R);
    CHECK_THAT(lamp.rate("temperature", lamp.at({{"a", v}, {"temperature", 450.0}})), WithinAbs(0, 1e-10));
    // Control: half a percent more voltage warms it.
    CHECK(lamp.rate("temperature", lamp.at({{"a", 1.005 * v}, {"temperature", 450.0}})) > 1);
}

TEST_CASE("a lamp that neither conducts nor radiates heat is refused", "[parts]") {
    const auto wrong = [](double conduction, double radiation) {
        return complaint(
            "lamp",
            {{"cold_resistance", 65.0}, {"heat_capacity", 1e-5}, {"conduction", conduction}, {"radiation", radiation}});
    };
    CHECK(wrong(0, 0).find("conduction") != std::string::npos);
    CHECK(wrong(1e-5, 0).empty());
    CHECK(wrong(0, 1e-14).empty());
}

TEST_CASE("a bead's resistance and warming follow the contract's equations", "[parts]") {
    const double R25 = 10e3, B = 3500, C = 1e-4, dissipation = 5e-5, T = 310;
    const RecordedPart bead = record(
        "thermistor", {{"resistance_25", R25}, {"beta", B}, {"heat_capacity", C}, {"dissipation", dissipation}}, T);
    for (const double theta : {280.0, 298.15, 360.0})
        for (const double v : {-2.0, 0.5, 4.0}) {
            const auto x = bead.at({{"a", v}, {"temperature", theta}});
            const double i = v / (R25 * std::exp(B * (1 / theta - 1 / 298.15)));
            CHECK_THAT(bead.current("a", x), WithinRel(i, 1e-12));
            CHECK_THAT(bead.rate("temperature", x), WithinRel((v * i - dissipation * (theta - T)) / C, 1e-11));
        }
    CHECK(bead.unknowns[bead.index("temperature")].start == T);
    CHECK_THAT(bead.current("a", bead.at({{"a", 1.0}, {"temperature", 298.15}})), WithinRel(1 / R25, 1e-14));
}
