#include "tests/core/parts/recorded_part.hpp"
#include <catch2/catch.hpp>
#include <cmath>

using namespace sinewright;
using namespace sinewright::testing;
using Catch::WithinAbs;
using Catch::WithinRel;

namespace {

constexpr double Vp = -2, beta = 1e-3, lambda = 0.03;

RecordedPart fet(double lambda_per_v = lambda) {
    return record("jfet", {{"pinch_off", Vp}, {"beta", beta}, {"lambda", lambda_per_v}});
}
double current(const RecordedPart& part, double v_ds, double v_gs) {
    return part.current("d", part.at({{"d", v_ds}, {"g", v_gs}}));
}
double by_contract(double v_ds, double v_gs) {
    if (v_ds < 0) return -by_contract(-v_ds, v_gs - v_ds); // drain and source change places
    const double u = v_gs - Vp;
    if (u <= 0) return 0;
    if (v_ds < u) return beta * (2 * u - v_ds) * v_ds * (1 + lambda * v_ds);
    return beta * u * u * (1 + lambda * v_ds);
}

} // namespace

TEST_CASE("a FET follows the square law in all its regions and with drain and source exchanged", "[parts]") {
    const RecordedPart j = fet();
    for (const double v_gs : {-2.5, -2.0, -1.5, -0.5, 0.0})
        for (const double v_ds : {-6.0, -1.0, -0.05, 0.0, 0.05, 0.4, 1.9, 7.0}) {
            INFO("v_gs " << v_gs << ", v_ds " << v_ds);
            CHECK_THAT(current(j, v_ds, v_gs), WithinAbs(by_contract(v_ds, v_gs), 1e-16));
            CHECK(j.current("g", j.at({{"d", v_ds}, {"g", v_gs}})) == 0);
        }
    CHECK(current(j, 5, -2.1) == 0);
    CHECK_THAT(current(fet(0), 10, 0), WithinRel(beta * Vp * Vp, 1e-15)); // saturated at zero gate: β·Vp²
}

TEST_CASE("a FET's current and its slopes join at the borders of its regions", "[parts]") {
    const RecordedPart j = fet();
    const double step = 1e-9;
    struct Border {
        double v_ds, v_gs, across_ds, across_gs;
    };
    for (const Border& border : {Border{1.2, -0.8, 1, 0},     // triode to saturation: v_ds = u
                                 Border{1.2, -0.8, 0, 1},     // the same crossed by the gate
                                 Border{3.0, -2.0, 0, 1},     // pinch-off: u = 0
                                 Border{0.0, -1.0, 1, 0},     // exchange of drain and source
                                 Border{-1.2, -2.0, 1, 0}}) { // exchanged: triode to saturation
        INFO("at v_ds " << border.v_ds << ", v_gs " << border.v_gs);
        const auto at = [&](double sign) {
            return j.at({{"d", border.v_ds + sign * step * border.across_ds},
                         {"g", border.v_gs + sign * step * border.across_gs}});
        };
        // A jump would show at full size; what a step of 1e-9 V may change is 1e-9 of the slopes (some mS).
        CHECK_THAT(j.current("d", at(1)), WithinAbs(j.current("d", at(-1)), 1e-11));
        for (const int control : {j.index("d"), j.index("g")})
            CHECK_THAT(j.df(at(1))(0, control), WithinAbs(j.df(at(-1))(0, control), 1e-10));
    }
}

TEST_CASE("a FET as a resistor makes a second harmonic of A over 4u and no third", "[parts]") {
    // Source: i = β(2u − v)v with v = A·cos: H2/H1 = A/(4u); small-signal resistance 1/(2βu).
    const RecordedPart j = fet(0);
    const double u = 1, amplitude_v = 0.1;
    const auto i = over_a_cycle(256, [&](double phase) { return current(j, amplitude_v * std::cos(phase), Vp + u); });
    const double first = cosine_harmonic(i, 1);
    CHECK_THAT(std::abs(cosine_harmonic(i, 2)) / first, WithinRel(0.025, 1e-12));
    CHECK_THAT(cosine_harmonic(i, 3) / first, WithinAbs(0, 1e-15));
    CHECK_THAT(amplitude_v / first, WithinRel(1 / (2 * beta * u), 1e-13));
}

TEST_CASE("half the drain voltage on the gate leaves no harmonic in a FET resistor", "[parts]") {
    // Source: i = 2βu·v exactly when v_gs = Vp + u + v_ds/2.
    const RecordedPart j = fet(0);
    const auto i = over_a_cycle(256, [&](double phase) {
        const double v = 0.1 * std::cos(phase);
        return current(j, v, Vp + 1 + v / 2);
    });
    const double first = cosine_harmonic(i, 1);
    CHECK_THAT(first, WithinRel(2 * beta * 0.1, 1e-13));
    for (const int order : {2, 3, 4, 5}) CHECK_THAT(cosine_harmonic(i, order) / first, WithinAbs(0, 1e-15));
}
