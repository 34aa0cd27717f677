/// The shelf as the contract lists it: terminals, parameter names and defaults are what files and outsiders rely on.
#include "core/parts/resolve.hpp"
#include "tests/core/parts/recorded_part.hpp"
#include <catch2/catch.hpp>
#include <cmath>

using namespace sinewright;
using namespace sinewright::testing;

namespace {

struct Listed {
    std::string_view kind;
    std::vector<std::string_view> terminals;
    /// Contract defaults; NaN: none.
    std::vector<std::pair<std::string_view, double>> parameters;
    std::string_view main;
};

const double none = std::nan("");

/// Source: the file format's table of part kinds.
const std::vector<Listed> contract{
    {"resistor", {"a", "b"}, {{"resistance", none}, {"voltage_coefficient_2", 0}}, "resistance"},
    {"capacitor",
     {"a", "b"},
     {{"capacitance", none}, {"voltage_coefficient_1", 0}, {"voltage_coefficient_2", 0}, {"series_resistance", 0}},
     "capacitance"},
    {"inductor", {"a", "b"}, {{"inductance", none}, {"series_resistance", 0}}, "inductance"},
    {"potentiometer", {"a", "w", "b"}, {{"resistance", none}, {"position", 0.5}, {"end_resistance", 0}}, "resistance"},
    {"opamp",
     {"plus", "minus", "out"},
     {{"model", none},
      {"gbw", none},
      {"dc_gain", 1e5},
      {"slew_rate", none},
      {"swing_high", none},
      {"swing_low", none},
      {"second_pole", none},
      {"output_resistance", 0},
      {"input_resistance", none},
      {"input_capacitance", none},
      {"input_bias", 0},
      {"offset", 0},
      {"common_mode_1", 0},
      {"common_mode_2", 0},
      {"common_mode_3", 0},
      {"input_ground_capacitance", 0},
      {"input_ground_coefficient", 0},
      {"output_2", 0},
      {"output_3", 0},
      {"noise_voltage", 0},
      {"noise_voltage_corner", 0},
      {"noise_current", 0},
      {"noise_current_corner", 0}},
     "gbw"},
    {"limiter", {"in", "out"}, {{"law", none}, {"gain", 1}, {"limit", 1}, {"cubic", 0}}, "gain"},
    {"diode",
     {"a", "k"},
     {{"saturation_current", 4e-9},
      {"ideality", 1.9},
      {"series_resistance", 0},
      {"junction_capacitance", 0},
      {"transit_time", 0},
      {"bandgap", 1.11}},
     "saturation_current"},
    {"zener",
     {"a", "k"},
     {{"saturation_current", 4e-9},
      {"ideality", 1.9},
      {"series_resistance", 0},
      {"junction_capacitance", 0},
      {"transit_time", 0},
      {"bandgap", 1.11},
      {"breakdown_voltage", none},
      {"breakdown_current", 1e-3},
      {"breakdown_ideality", 2}},
     "breakdown_voltage"},
    {"lamp",
     {"a", "b"},
     {{"cold_resistance", none}, {"exponent", 1.2}, {"heat_capacity", none}, {"conduction", none}, {"radiation", 0}},
     "cold_resistance"},
    {"thermistor",
     {"a", "b"},
     {{"resistance_25", none}, {"beta", none}, {"heat_capacity", none}, {"dissipation", none}},
     "resistance_25"},
    {"jfet", {"d", "g", "s"}, {{"pinch_off", none}, {"beta", none}, {"lambda", 0}}, "pinch_off"},
    {"photocell",
     {"anode", "cathode", "a", "b"},
     {{"saturation_current", 1e-18},
      {"ideality", 2},
      {"dark_conductance", 1e-8},
      {"sensitivity", none},
      {"gamma", 1},
      {"lag", none}},
     "sensitivity"},
    {"multiplier", {"x", "y", "out"}, {{"scale", none}}, "scale"},
    {"servo",
     {"sense", "control"},
     {{"detector_lag", none},
      {"setpoint", none},
      {"rate", none},
      {"control_high", 10},
      {"control_low", -10},
      {"bias", 0},
      {"proportional", 0}},
     "setpoint"},
    {"supply", {"plus", "minus"}, {{"voltage", none}}, "voltage"},
};

} // namespace

TEST_CASE("the shelf holds the contract's part kinds with its terminals, parameters and defaults", "[parts]") {
    REQUIRE(part_kinds().size() == contract.size());
    for (std::size_t k = 0; k < contract.size(); ++k) {
        const PartKind& kind = *part_kinds()[k];
        const Listed& listed = contract[k];
        INFO(listed.kind);
        CHECK(kind.name == listed.kind);
        REQUIRE(kind.terminals.size() == listed.terminals.size());
        for (std::size_t t = 0; t < listed.terminals.size(); ++t) CHECK(kind.terminals[t].name == listed.terminals[t]);
        CHECK(kind.parameters.size() == listed.parameters.size());
        for (const auto& [name, fallback] : listed.parameters) {
            INFO(name);
            const int parameter = kind.parameter(name);
            REQUIRE(parameter >= 0);
            const double found = kind.parameters[parameter].fallback;
            CHECK((std::isnan(fallback) ? std::isnan(found) : found == fallback));
        }
        CHECK(kind.main == kind.parameter(listed.main));
    }
}

TEST_CASE("defaults, given values and words are resolved, and what was given is remembered", "[parts]") {
    const PartKind& kind = *find_part_kind("limiter");
    const PartValues values = resolve(kind, part_with("limiter", {{"law", "clip"}, {"limit", 0.25}}), 310);
    CHECK(values.word(kind.parameter("law")) == 2);
    CHECK(values[kind.parameter("limit")] == 0.25);
    CHECK(values[kind.parameter("gain")] == 1);
    CHECK(values.given[kind.parameter("limit")]);
    CHECK_FALSE(values.given[kind.parameter("gain")]);
    CHECK(values.word(kind.parameter("gain")) == -1);
    CHECK_FALSE(values.has(kind.parameter("law")));
    CHECK(values.temperature_k == 310);
    CHECK(resolve(kind, part_with("limiter", {}), 310).word(kind.parameter("law")) == 0);
}

TEST_CASE("the temperature coefficient does not apply to a diode, whose law knows temperature", "[parts]") {
    const PartKind& kind = *find_part_kind("diode");
    Part part = part_with("diode", {});
    part.tempco = Value{0.083, ""};
    CHECK(resolve(kind, part, 283.15)[kind.parameter("saturation_current")] == 4e-9);
}
