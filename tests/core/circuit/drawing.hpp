#pragma once
/// Designs drawn in a line or two, for tests of assembly and operating point.
#include "core/circuit/circuit.hpp"
#include "core/design/design.hpp"
#include <catch2/catch.hpp>
#include <initializer_list>

namespace sinewright::test {

struct Given {
    std::string name;
    ParameterValue value;
    Given(std::string parameter, double si) : name(std::move(parameter)), value(Value{si, ""}) {}
    Given(std::string parameter, const char* word) : name(std::move(parameter)), value(std::string(word)) {}
};

/// Parts by kind, reference, values and nets in the order of the kind's terminals; "" leaves a terminal unconnected.
class Drawing {
  public:
    Drawing& add(const std::string& kind, const std::string& ref, std::initializer_list<Given> values,
                 std::initializer_list<const char*> nets) {
        const PartKind* described = find_part_kind(kind);
        REQUIRE(described);
        REQUIRE(described->terminals.size() == nets.size());
        Part part;
        part.ref = ref, part.kind = kind;
        for (const Given& given : values) {
            INFO(kind << " " << given.name);
            REQUIRE(described->parameter(given.name) >= 0);
            part.parameters.push_back({given.name, given.value});
        }
        auto terminal = described->terminals.begin();
        for (const std::string net : nets)
            part.terminals.push_back(
                {std::string((terminal++)->name), net.empty() ? std::nullopt : std::optional<std::string>(net)});
        design_.parts.push_back(std::move(part));
        return *this;
    }
    Drawing& resistor(const std::string& ref, double ohm, const char* a, const char* b) {
        return add("resistor", ref, {{"resistance", ohm}}, {a, b});
    }
    Drawing& capacitor(const std::string& ref, double farad, const char* a, const char* b) {
        return add("capacitor", ref, {{"capacitance", farad}}, {a, b});
    }
    Drawing& inductor(const std::string& ref, double henry, const char* a, const char* b, double series_ohm = 0) {
        return add("inductor", ref, {{"inductance", henry}, {"series_resistance", series_ohm}}, {a, b});
    }
    Drawing& supply(const std::string& ref, double volts, const char* plus, const char* minus = "gnd") {
        return add("supply", ref, {{"voltage", volts}}, {plus, minus});
    }
    Drawing& ideal_opamp(const std::string& ref, const char* plus, const char* minus, const char* out) {
        return add("opamp", ref, {{"model", "ideal"}}, {plus, minus, out});
    }
    /// 10 MHz, 5 V/µs, 50 Ω, swing ±13 V, gain 1e5.
    Drawing& real_opamp(const std::string& ref, const char* plus, const char* minus, const char* out) {
        return add("opamp", ref,
                   {{"model", "macro"},
                    {"gbw", 1e7},
                    {"dc_gain", 1e5},
                    {"slew_rate", 5e6},
                    {"swing_high", 13},
                    {"swing_low", -13},
                    {"output_resistance", 50}},
                   {plus, minus, out});
    }
    Drawing& temperature_c(double celsius) {
        design_.temperature_c = celsius;
        return *this;
    }
    const Design& design() const { return design_; }
    Design& design() { return design_; }

    /// Assembles; fails the test with the fault's sentence otherwise.
    Circuit circuit() const {
        auto assembled = assemble(design_);
        if (!assembled) FAIL(assembled.fault().sentence);
        return *assembled;
    }
    /// The first fault of assembly.
    Fault fault() const {
        auto assembled = assemble(design_);
        REQUIRE_FALSE(assembled);
        return assembled.fault();
    }

  private:
    Design design_;
};

/// Series-parallel RC network with an inverting-side divider round an ideal op-amp: 1.59 kHz.
inline Drawing bridge_loop() {
    Drawing d;
    d.resistor("R1", 10e3, "out", "s").capacitor("C1", 10e-9, "s", "p").resistor("R2", 10e3, "p", "gnd");
    d.capacitor("C2", 10e-9, "p", "gnd").resistor("R3", 21e3, "out", "m").resistor("R4", 10e3, "m", "gnd");
    d.ideal_opamp("U1", "p", "m", "out");
    return d;
}

/// Net voltage at a DC solution.
inline double voltage(const Circuit& circuit, const Vector& x, std::string_view net) {
    const int index = circuit.net(net);
    REQUIRE(index >= -1);
    return index < 0 ? 0 : x[index];
}

} // namespace sinewright::test
