/// Designs whose orbits were computed independently (five-stage Radau IIA collocation, complex-step derivatives).
#include "sketch.hpp"
#include <catch2/catch.hpp>
#include <fstream>

using namespace sinewright;
using namespace sinewright::test;

namespace {

const std::string folder = std::string(SINEWRIGHT_SOURCE_DIR) + "/tests/outside/cycle/";

Complex phasor(double peak_v, double phase_deg) { return std::polar(peak_v, phase_deg * M_PI / 180); }

void check_harmonics(const SteadyState& state, const nlohmann::json& expected, double relative_to_fundamental) {
    for (const auto& row : expected["harmonics"]) {
        const int order = row[0];
        const Complex wanted = phasor(row[1], row[2]);
        Complex found = 0;
        if (order <= static_cast<int>(state.harmonics.size())) {
            const Harmonic& h = state.harmonics[order - 1];
            CHECK(h.order == order);
            found = phasor(h.peak_v, h.phase_deg);
        }
        INFO("harmonic " << order);
        CHECK(std::abs(found - wanted) <= relative_to_fundamental * state.amplitude_v);
    }
}

void check_exponents(const SteadyState& state, const nlohmann::json& expected, double relative) {
    REQUIRE(state.envelope);
    for (const auto& row : expected["floquet"]) {
        const Complex wanted(row[0], row[1]);
        double nearest = 1e300;
        for (const Complex& found : state.envelope->exponents) nearest = std::min(nearest, std::abs(found - wanted));
        INFO("exponent " << wanted);
        CHECK(nearest <= relative * std::abs(wanted));
    }
    CHECK(state.envelope->stable == expected["stable"].get<bool>());
}

} // namespace

TEST_CASE("steady states meet orbits computed independently by collocation", "[steady_state][outside]") {
    std::ifstream file(folder + "expected.json");
    const auto cases = nlohmann::json::parse(file);
    REQUIRE(cases.size() >= 10);
    for (const auto& [name, expected] : cases.items()) {
        INFO(name << ", source: " << expected["source"].get<std::string>());
        const auto read = read_design(folder + name + ".sinewright");
        REQUIRE(read);
        const SteadyState state = steady_state_of(analyse(read->design));
        const auto& tolerance = expected["tolerance"];
        CHECK(state.frequency_hz == Approx(expected["frequency_hz"].get<double>()).epsilon(tolerance["frequency"]));
        CHECK(state.amplitude_v == Approx(expected["amplitude_v"].get<double>()).epsilon(tolerance["amplitude"]));
        CHECK(state.rms_v == Approx(expected["rms_v"].get<double>()).epsilon(tolerance["amplitude"]));
        CHECK(std::abs(state.dc_v - expected["dc_v"].get<double>()) < 1e-9 * state.amplitude_v);
        CHECK(std::abs(state.thd_db - expected["thd_db"].get<double>()) < tolerance["thd_db"].get<double>());
        check_harmonics(state, expected, tolerance["harmonic_relative_to_fundamental"]);
        check_exponents(state, expected, tolerance["floquet"]);
    }
}
