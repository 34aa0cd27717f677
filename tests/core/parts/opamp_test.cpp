#include "tests/core/parts/recorded_part.hpp"
#include <catch2/catch.hpp>
#include <cmath>

using namespace sinewright;
using namespace sinewright::testing;
using Catch::WithinAbs;
using Catch::WithinRel;

namespace {

Settings macro(Settings more) {
    more.insert(more.begin(), {"model", "macro"});
    return more;
}
std::string opamp_complaint(const Settings& settings) { return complaint("opamp", settings); }

} // namespace

TEST_CASE("an ideal op-amp holds its inputs equal with whatever current its output needs", "[parts]") {
    const RecordedPart u = record("opamp", {{"model", "ideal"}});
    const auto x = u.at({{"plus", 0.7}, {"minus", 0.4}, {"out", 5.0}, {"output current", 0.01}});
    CHECK_THAT(u.f(x)[u.index("output current")], WithinAbs(0.3, 1e-15));
    CHECK(std::abs(u.current("out", x)) == 0.01);
    CHECK(u.current("plus", x) == 0);
    CHECK(u.current("minus", x) == 0);
    CHECK(u.ties == std::vector<RecordedTie>{{Tie::forces_voltage, 2, -1}});
}

TEST_CASE("the gain stage of the macro op-amp slews, leaks and is clamped as the contract says", "[parts]") {
    const double gbw = 10e6, A0 = 2e5, S = 9e6, high = 13, low = -12, offset = 1e-3;
    const double c1 = 1e-4, c2 = 4e-5, c3 = -2e-5, w = 2 * M_PI * gbw;
    const RecordedPart u = record("opamp", macro({{"gbw", gbw},
                                                  {"dc_gain", A0},
                                                  {"slew_rate", S},
                                                  {"swing_high", high},
                                                  {"swing_low", low},
                                                  {"offset", offset},
                                                  {"common_mode_1", c1},
                                                  {"common_mode_2", c2},
                                                  {"common_mode_3", c3}}));
    struct Point {
        double plus, minus, v_g;
    };
    for (const Point& at : {Point{0, 0, 0}, Point{3.0, 2.999, 5}, Point{-4.0, -4.2, 12.95}, Point{5.0, 5.3, -12.1}}) {
        const double v_cm = (at.plus + at.minus) / 2;
        const double v_d = at.plus - at.minus + offset + c1 * v_cm + c2 * v_cm * v_cm + c3 * v_cm * v_cm * v_cm;
        const double rate = S * std::tanh(w * v_d / S) - w / A0 * at.v_g -
                            S * (std::exp((at.v_g - high) / 0.05) - std::exp((low - at.v_g) / 0.05));
        const auto x = u.at({{"plus", at.plus}, {"minus", at.minus}, {"gain stage", at.v_g}});
        CHECK_THAT(u.rate("gain stage", x), WithinRel(rate, 1e-11));
    }
}

TEST_CASE("without a slew rate the op-amp's input is linear and its clamp as strong as one volt of input", "[parts]") {
    const double gbw = 3e6, w = 2 * M_PI * gbw, high = 3.5, low = -3.5, c2 = 1e-3;
    const RecordedPart plain = record("opamp", macro({{"gbw", gbw}, {"offset", 2e-3}}));
    CHECK(plain.elements.empty()); // constant stamps only
    const auto x = plain.at({{"plus", 1.0}, {"minus", 0.25}, {"gain stage", 2.0}});
    CHECK_THAT(plain.rate("gain stage", x), WithinRel(w * 0.752 - w / 1e5 * 2, 1e-13));

    const RecordedPart clamped =
        record("opamp", macro({{"gbw", gbw}, {"swing_high", high}, {"swing_low", low}, {"common_mode_2", c2}}));
    for (const double v_g : {-3.6, 0.0, 3.4, 3.55}) {
        const double v_d = 0.1 + c2 * 0.45 * 0.45;
        const double rate =
            w * v_d - w / 1e5 * v_g - w * (std::exp((v_g - high) / 0.05) - std::exp((low - v_g) / 0.05));
        const auto y = clamped.at({{"plus", 0.5}, {"minus", 0.4}, {"gain stage", v_g}});
        CHECK_THAT(clamped.rate("gain stage", y), WithinRel(rate, 1e-12));
    }
}

TEST_CASE("one swing limit alone clamps on its side only", "[parts]") {
    const double w = 2 * M_PI * 1e6;
    const RecordedPart u = record("opamp", macro({{"gbw", 1e6}, {"swing_low", 0.1}}));
    const auto rate = [&](double v_g) { return u.rate("gain stage", u.at({{"gain stage", v_g}})); };
    CHECK_THAT(rate(0.0), WithinRel(w * std::exp(2.0), 1e-13));
    CHECK_THAT(rate(40.0), WithinRel(-w / 1e5 * 40, 1e-12));
}

TEST_CASE("without gain-bandwidth product the op-amp has its DC gain at every frequency", "[parts]") {
    const RecordedPart u = record("opamp", macro({{"dc_gain", 1e4}}));
    const auto x = u.at({{"plus", 0.5e-3}, {"minus", 0.2e-3}, {"gain stage", 3.0}});
    CHECK_THAT(u.f(x)[u.index("gain stage")], WithinAbs(0, 1e-18));
    for (const double charge : u.q(x)) CHECK(charge == 0);
}

TEST_CASE("a second pole follows the gain stage and drives the output", "[parts]") {
    const double f2 = 20e6;
    const RecordedPart u = record("opamp", macro({{"gbw", 10e6}, {"second_pole", f2}}));
    const auto x = u.at({{"gain stage", 2.0}, {"second stage", 1.5}, {"out", 1.5}});
    CHECK_THAT(u.rate("second stage", x), WithinRel(2 * M_PI * f2 * 0.5, 1e-13));
    CHECK(u.f(x)[u.index("output current")] == 0);
    CHECK(u.ties == std::vector<RecordedTie>{{Tie::forces_voltage, 2, -1}});
}

TEST_CASE("the output stage bends and stands behind the output resistance", "[parts]") {
    const double R = 60, o2 = 1e-3, o3 = -2e-4, v_2 = 4;
    const double inner = v_2 + o2 * v_2 * v_2 + o3 * v_2 * v_2 * v_2;
    const RecordedPart u =
        record("opamp", macro({{"gbw", 1e6}, {"output_resistance", R}, {"output_2", o2}, {"output_3", o3}}));
    CHECK_THAT(u.current("out", u.at({{"gain stage", v_2}, {"out", 3.0}})), WithinRel((3 - inner) / R, 1e-13));
    CHECK(u.ties == std::vector<RecordedTie>{{Tie::conducts, 2, -1}});
    // Without resistance it is an ideal source of the same voltage.
    const RecordedPart ideal = record("opamp", macro({{"gbw", 1e6}, {"output_2", o2}, {"output_3", o3}}));
    const auto x = ideal.at({{"gain stage", v_2}, {"out", inner}});
    CHECK_THAT(ideal.f(x)[ideal.index("output current")], WithinAbs(0, 1e-15));
}

TEST_CASE("the inputs of the op-amp load their nets as the contract says", "[parts]") {
    const double R = 300e3, C = 5e-12, bias = 200e-9, Cg = 6e-12, k = 0.02;
    const RecordedPart u = record("opamp", macro({{"gbw", 1e6},
                                                  {"input_resistance", R},
                                                  {"input_capacitance", C},
                                                  {"input_bias", bias},
                                                  {"input_ground_capacitance", Cg},
                                                  {"input_ground_coefficient", k}}));
    const double plus = 3, minus = 2.4;
    const auto x = u.at({{"plus", plus}, {"minus", minus}});
    CHECK_THAT(u.current("plus", x), WithinRel(0.6 / R + bias, 1e-13));
    CHECK_THAT(u.current("minus", x), WithinRel(-0.6 / R + bias, 1e-13));
    CHECK_THAT(u.charge("plus", x), WithinRel(C * 0.6 + Cg * (plus + k * plus * plus / 2), 1e-13));
    CHECK_THAT(u.charge("minus", x), WithinRel(-C * 0.6 + Cg * (minus + k * minus * minus / 2), 1e-13));
    CHECK(record("opamp", macro({{"input_ground_capacitance", Cg}})).elements.empty()); // linear: a stamp
}

TEST_CASE("slewing makes a third harmonic of a twelfth of the drive over the limit squared", "[parts]") {
    // Source: expand atanh: the input drive that gives a sine of slope ωV has H3/H1 = (1/12)(ωV/S)² to first order.
    const double S = 1e6, w = 2 * M_PI * 1e6, share = 0.05;
    const RecordedPart u = record("opamp", macro({{"gbw", 1e6}, {"slew_rate", S}}));
    const auto drive = over_a_cycle(256, [&](double phase) {
        const auto rate = [&](double v_d) { return u.rate("gain stage", u.at({{"plus", v_d}})); };
        return solve_rising(rate, share * S * std::cos(phase), -S / w, S / w);
    });
    CHECK_THAT(cosine_harmonic(drive, 3) / cosine_harmonic(drive, 1), WithinRel(share * share / 12, 2 * share * share));
}

TEST_CASE("combinations of op-amp values that mean nothing are named", "[parts]") {
    CHECK(opamp_complaint({}).empty());
    CHECK(opamp_complaint(macro({{"gbw", 1e6}, {"slew_rate", 1e6}})).empty());
    CHECK(opamp_complaint(macro({{"second_pole", 1e6}})).empty());
    CHECK(opamp_complaint(macro({{"slew_rate", 1e6}})).find("gbw") != std::string::npos);
    CHECK(opamp_complaint(macro({{"swing_high", 13.0}})).find("gbw") != std::string::npos);
    CHECK(opamp_complaint(macro({{"gbw", 1e6}, {"swing_high", -13.0}, {"swing_low", 13.0}})).find("above swing_low") !=
          std::string::npos);
}

TEST_CASE("an op-amp set to ideal may keep its macro values, one that names no model may not", "[parts]") {
    CHECK(opamp_complaint({{"model", "ideal"}, {"gbw", 1e6}}).empty());
    CHECK(opamp_complaint({{"gbw", 1e6}}).find("model") != std::string::npos);
    CHECK(opamp_complaint({{"noise_voltage", 5e-9}}).empty());
}
