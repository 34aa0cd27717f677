/// Limiter, multiplier and amplitude servo.
#include "tests/core/parts/recorded_part.hpp"
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>

using namespace sinewright;
using namespace sinewright::testing;
using Catch::WithinAbs;
using Catch::WithinRel;

namespace {

/// The voltage an ideal output takes: where its row is zero.
double output_v(const RecordedPart& part, std::string_view terminal, std::map<std::string, double> values) {
    values[std::string(terminal)] = 0;
    return -part.f(part.at(values))[part.index("output current")];
}

double limited(const RecordedPart& limiter, double v_in) { return output_v(limiter, "out", {{"in", v_in}}); }

} // namespace

TEST_CASE("the limiter follows its three laws", "[parts]") {
    const double g = -3, L = 0.7, c = 0.4;
    const RecordedPart soft = record("limiter", {{"law", "tanh"}, {"gain", g}, {"limit", L}});
    const RecordedPart cubic = record("limiter", {{"law", "cubic"}, {"gain", g}, {"cubic", c}});
    const RecordedPart clip = record("limiter", {{"law", "clip"}, {"gain", g}, {"limit", L}});
    for (const double v : {-50.0, -1.0, -0.1, 0.0, 0.2, 0.3, 2.0}) {
        CHECK_THAT(limited(soft, v), WithinAbs(L * std::tanh(g * v / L), 1e-15));
        CHECK_THAT(limited(cubic, v), WithinRel(g * v - c * v * v * v, 1e-14) || WithinAbs(0, 1e-300));
        CHECK_THAT(limited(clip, v), WithinAbs(std::clamp(g * v, -L, L), 1e-15));
    }
    for (const RecordedPart* part : {&soft, &cubic, &clip}) {
        const auto x = part->at({{"in", 0.1}, {"output current", 2e-3}});
        CHECK(part->current("in", x) == 0);
        CHECK(std::abs(part->current("out", x)) == 2e-3);
        CHECK(part->ties == std::vector<RecordedTie>{{Tie::forces_voltage, 1, -1}});
    }
    // The contract names no default law; the first is tanh with unit gain and limit.
    CHECK_THAT(limited(record("limiter"), 0.5), WithinRel(std::tanh(0.5), 1e-15));
}

TEST_CASE("the describing function of a unit tanh", "[parts]") {
    // Source: independent numeric run to the digits printed; series 1 − A²/4 + A⁴/12 (Gelb & Vander Velde 1968).
    struct Row {
        double amplitude_v, gain, third;
    };
    const RecordedPart soft = record("limiter");
    for (const Row& row : {Row{0.1, 0.9975083039, NAN}, Row{0.5, 0.9422856557, NAN}, Row{1, 0.8116756851, -0.0668319},
                           Row{2, 0.5589709187, -0.1688302}, Row{5, 0.2502795143, -0.2921333}}) {
        const auto out =
            over_a_cycle(1024, [&](double phase) { return limited(soft, row.amplitude_v * std::cos(phase)); });
        const double first = cosine_harmonic(out, 1);
        CHECK_THAT(first / row.amplitude_v, WithinAbs(row.gain, 0.5e-10));
        if (row.third == row.third) CHECK_THAT(cosine_harmonic(out, 3) / first, WithinAbs(row.third, 0.5e-7));
    }
}

TEST_CASE("the describing functions of clipping and of a cubic", "[parts]") {
    // Source: Gelb & Vander Velde 1968: (2/π)(asin ρ + ρ√(1 − ρ²)) with ρ = L/(gA); g − ¾cA².
    const RecordedPart clip = record("limiter", {{"law", "clip"}});
    constexpr int samples = 1 << 16; // a corner: the sum converges as 1/N²
    const std::pair<double, double> rows[] = {{0.9, 0.962614}, {0.5, 0.608998}, {0.2, 0.252940}, {0.1, 0.127111}};
    for (const auto& [rho, gain] : rows) {
        const auto out = over_a_cycle(samples, [&](double phase) { return limited(clip, std::cos(phase) / rho); });
        CHECK_THAT(cosine_harmonic(out, 1) * rho, WithinAbs(gain, 0.5e-6));
    }
    const RecordedPart cubic = record("limiter", {{"law", "cubic"}, {"gain", 2.0}, {"cubic", 0.3}});
    const auto out = over_a_cycle(64, [&](double phase) { return limited(cubic, 1.5 * std::cos(phase)); });
    CHECK_THAT(cosine_harmonic(out, 1) / 1.5, WithinRel(2 - 0.75 * 0.3 * 2.25, 1e-14));
}

TEST_CASE("the multiplier's output is its scale times both inputs", "[parts]") {
    const RecordedPart m = record("multiplier", {{"scale", 0.1}});
    CHECK_THAT(output_v(m, "out", {{"x", 7.0}, {"y", -3.0}}), WithinRel(-2.1, 1e-14));
    const auto x = m.at({{"x", 7.0}, {"y", -3.0}, {"output current", 1e-3}});
    CHECK(m.current("x", x) == 0);
    CHECK(m.current("y", x) == 0);
}

TEST_CASE("the servo's detector, integrator and output follow the contract's equations", "[parts]") {
    const double tau = 2e-3, P = 2, kappa = 2, high = 1, low = -0.5, bias = 0.25, proportional = 0.3;
    const RecordedPart s = record("servo", {{"detector_lag", tau},
                                            {"setpoint", P},
                                            {"rate", kappa},
                                            {"control_high", high},
                                            {"control_low", low},
                                            {"bias", bias},
                                            {"proportional", proportional}});
    struct Point {
        double sense, m, v_c;
    };
    for (const Point& at : {Point{0, 0, 0}, Point{1.8, 1.1, 0.4}, Point{-2.5, 2.4, 1.05}, Point{0.3, 3, -0.6}}) {
        const std::map<std::string, double> values{{"sense", at.sense}, {"mean square", at.m}, {"integrator", at.v_c}};
        const auto x = s.at(values);
        const double wanted = P * P / 2;
        CHECK_THAT(s.rate("mean square", x), WithinRel((at.sense * at.sense - at.m) / tau, 1e-13));
        const double rate =
            kappa * (wanted - at.m - wanted * (std::exp((at.v_c - high) / 0.05) - std::exp((low - at.v_c) / 0.05)));
        CHECK_THAT(s.rate("integrator", x), WithinRel(rate, 1e-12));
        CHECK_THAT(output_v(s, "control", values), WithinAbs(at.v_c + bias + proportional * (wanted - at.m), 1e-15));
    }
}

TEST_CASE("with no signal the servo's integrator rests at control_high, where it starts", "[parts]") {
    const RecordedPart s =
        record("servo", {{"detector_lag", 1e-3}, {"setpoint", 1.0}, {"rate", 5.0}, {"control_high", 3.0}});
    CHECK(s.unknowns[s.index("integrator")].start == 3);
    CHECK_THAT(s.rate("integrator", s.at({})), WithinAbs(0, 1e-14));
    CHECK(s.rate("mean square", s.at({})) == 0);
}

TEST_CASE("a servo whose control range is upside down is named", "[parts]") {
    const auto wrong = [](double high, double low) {
        return complaint(
            "servo",
            {{"detector_lag", 1e-3}, {"setpoint", 1.0}, {"rate", 5.0}, {"control_high", high}, {"control_low", low}});
    };
    CHECK(wrong(-1, 1).find("control_high") != std::string::npos);
    CHECK(wrong(1, 1).find("control_high") != std::string::npos);
    CHECK(wrong(1, -1).empty());
}
