#pragma once
/// Designs written in a few lines, taken through every analysis up to the steady state.
#include "core/analysis/operating_point.hpp"
#include "core/analysis/steady_state.hpp"
#include "core/design/file.hpp"
#include <initializer_list>
#include <map>
#include <memory>
#include <nlohmann/json.hpp>

namespace sinewright::test {

/// A design under construction; terminals by name, values in SI units.
class Sketch {
  public:
    using Terminals = std::initializer_list<std::pair<const char*, const char*>>;

    explicit Sketch(std::string output = "out") {
        json_ = {{"format", "sinewright-design"}, {"version", 1}, {"title", "test"}, {"output", std::move(output)}};
        json_["parts"] = nlohmann::json::array();
    }
    Sketch& part(const std::string& ref, const std::string& kind, Terminals terminals, nlohmann::json values) {
        nlohmann::json p = {{"ref", ref}, {"kind", kind}};
        for (const auto& [terminal, net] : terminals) p["terminals"][terminal] = net;
        p.update(values);
        json_["parts"].push_back(std::move(p));
        return *this;
    }
    Sketch& resistor(const std::string& ref, const char* a, const char* b, double ohm) {
        return part(ref, "resistor", {{"a", a}, {"b", b}}, {{"resistance", ohm}});
    }
    Sketch& capacitor(const std::string& ref, const char* a, const char* b, double farad) {
        return part(ref, "capacitor", {{"a", a}, {"b", b}}, {{"capacitance", farad}});
    }
    Sketch& inductor(const std::string& ref, const char* a, const char* b, double henry) {
        return part(ref, "inductor", {{"a", a}, {"b", b}}, {{"inductance", henry}});
    }
    Sketch& limiter(const std::string& ref, const char* in, const char* out, nlohmann::json values) {
        return part(ref, "limiter", {{"in", in}, {"out", out}}, std::move(values));
    }
    Sketch& opamp(const std::string& ref, const char* plus, const char* minus, const char* out, nlohmann::json values) {
        return part(ref, "opamp", {{"plus", plus}, {"minus", minus}, {"out", out}}, std::move(values));
    }
    Sketch& diode(const std::string& ref, const char* a, const char* k,
                  nlohmann::json values = nlohmann::json::object()) {
        return part(ref, "diode", {{"a", a}, {"k", k}}, std::move(values));
    }
    Sketch& cut(const std::string& part, const std::string& terminal) {
        json_["cut"] = {{"part", part}, {"terminal", terminal}};
        return *this;
    }
    /// Equal-arm bridge from `out` to `p`.
    Sketch& bridge(double ohm, double farad) {
        return resistor("R1", "out", "s", ohm)
            .capacitor("C1", "s", "p", farad)
            .resistor("R2", "p", "gnd", ohm)
            .capacitor("C2", "p", "gnd", farad);
    }
    std::string text() const { return json_.dump(); }

  private:
    nlohmann::json json_;
};

/// A design with everything the steady state asks for.
struct Analysed {
    Circuit closed;
    std::optional<Circuit> opened;
    Vector rest;
    SmallSignal small_signal;
    std::vector<Crossing> crossings;
    std::optional<BarkhausenPoint> barkhausen;
    int output = 0;

    OscillatorLoop loop() const {
        return {closed, opened ? &*opened : nullptr, rest, small_signal.natural_frequencies, barkhausen, crossings,
                output};
    }
};

Analysed analyse(const Design& design);
Analysed analyse(const Sketch& sketch);

/// The steady state, required to exist.
SteadyState steady_state_of(const Analysed& analysed, const SteadyStateOptions& options = {});
SteadyState steady_state_of(const Sketch& sketch, const SteadyStateOptions& options = {});

/// Signed ratio of harmonic k to the fundamental of a cosine-like waveform.
double relative_harmonic(const SteadyState& state, int order);

} // namespace sinewright::test
