#include "drawing.hpp"
#include <random>

using namespace sinewright;
using namespace sinewright::test;

namespace {

/// Every part kind once or more, wired at random among a few nets.
Drawing random_circuit(std::mt19937& random) {
    static const char* const names[] = {"gnd", "a", "b", "c", "d", "e"};
    const auto net = [&] { return names[std::uniform_int_distribution<int>(0, 5)(random)]; };
    const auto value = [&](double from, double to) { return std::uniform_real_distribution<double>(from, to)(random); };
    Drawing d;
    int number = 0;
    for (int round = 0; round < 2; ++round) {
        const auto ref = [&] { return "X" + std::to_string(++number); };
        d.add("resistor", ref(), {{"resistance", value(100, 1e4)}, {"voltage_coefficient_2", 1e-3}}, {net(), net()});
        d.add("capacitor", ref(),
              {{"capacitance", value(1e-9, 1e-7)}, {"voltage_coefficient_1", 0.01}, {"voltage_coefficient_2", 0.02}},
              {net(), net()});
        d.inductor(ref(), value(1e-3, 1e-1), net(), net(), value(0, 10));
        d.add("potentiometer", ref(), {{"resistance", 1e4}, {"position", value(0.1, 0.9)}}, {net(), net(), net()});
        d.add("limiter", ref(), {{"law", "tanh"}, {"gain", value(1, 4)}}, {net(), net()});
        d.add("limiter", ref(), {{"law", "cubic"}, {"cubic", value(0, 1)}}, {net(), net()});
        d.add("diode", ref(), {{"junction_capacitance", 4e-12}, {"transit_time", 6e-9}}, {net(), net()});
        d.add("diode", ref(), {{"series_resistance", 5}, {"transit_time", 6e-9}}, {net(), net()});
        d.add("zener", ref(), {{"breakdown_voltage", 5.1}}, {net(), net()});
        d.add("lamp", ref(),
              {{"cold_resistance", 480}, {"heat_capacity", 1e-5}, {"conduction", 4e-5}, {"radiation", 4e-14}},
              {net(), net()});
        d.add("thermistor", ref(),
              {{"resistance_25", 1e4}, {"beta", 3500}, {"heat_capacity", 1e-4}, {"dissipation", 1e-3}}, {net(), net()});
        d.add("jfet", ref(), {{"pinch_off", -2}, {"beta", 2e-3}, {"lambda", 0.02}}, {net(), net(), net()});
        d.add("photocell", ref(), {{"sensitivity", 0.1}, {"lag", 0.01}}, {net(), net(), net(), net()});
        d.add("multiplier", ref(), {{"scale", 0.3}}, {net(), net(), net()});
        d.add("servo", ref(), {{"detector_lag", 1e-3}, {"setpoint", 2}, {"rate", 2}, {"proportional", 0.2}},
              {net(), net()});
        d.add("opamp", ref(),
              {{"model", "macro"},
               {"gbw", 1e6},
               {"slew_rate", 1e6},
               {"swing_high", 10},
               {"swing_low", -10},
               {"second_pole", 3e6},
               {"common_mode_2", 1e-3},
               {"common_mode_3", 1e-4},
               {"input_ground_capacitance", 5e-12},
               {"input_ground_coefficient", 0.02},
               {"output_2", 1e-3},
               {"output_3", 1e-4},
               {"output_resistance", 50}},
              {net(), net(), net()});
    }
    return d;
}

/// Side x of a cut serves to get a circuit without topology check: random wiring makes loops of sources.
Circuit unchecked(const Drawing& drawing) {
    for (const Part& part : drawing.design().parts)
        if (part.terminals[0].net != "gnd") {
            auto opened = assemble_opened(drawing.design(), {part.ref, part.terminals[0].terminal});
            REQUIRE(opened);
            return *opened;
        }
    FAIL("all on gnd");
    return {};
}

/// Central difference of column k against the analytic one, each row against the size of its terms.
template <class Evaluate>
void check_column(const Circuit& circuit, const Vector& x, const Matrix& jacobian, int k, Evaluate evaluate) {
    const double h = 1e-6 * std::max(circuit.unknowns[k].typical, std::abs(x[k]));
    Vector up = x, down = x, y_up, y_down;
    up[k] += h, down[k] -= h;
    evaluate(up, y_up), evaluate(down, y_down);
    const Vector difference = (y_up - y_down) / (up[k] - down[k]);
    for (int row = 0; row < circuit.size(); ++row) {
        // Truncation goes with h², rounding with the size of f over h.
        const double rounding = 1e-15 * std::max(std::abs(y_up[row]), 1e-12) / h;
        const double bound = 1e-6 * std::abs(jacobian(row, k)) + 1e3 * rounding;
        INFO(circuit.unknowns[row].name << " by " << circuit.unknowns[k].name);
        CHECK(std::abs(difference[row] - jacobian(row, k)) <= bound);
    }
}

} // namespace

TEST_CASE("the linearised circuit is the derivative of its currents and charges, whatever the parts",
          "[circuit][ordinary]") {
    std::mt19937 random(11);
    for (int trial = 0; trial < 8; ++trial) {
        const Circuit circuit = unchecked(random_circuit(random));
        std::uniform_real_distribution<double> spread(-0.4, 0.4);
        Vector x(circuit.size());
        for (int k = 0; k < circuit.size(); ++k)
            x[k] = circuit.unknowns[k].start + circuit.unknowns[k].typical * spread(random) * 0.8;
        const Pencil pencil = linearise(circuit, x);
        for (int k = 0; k < circuit.size(); ++k) {
            check_column(circuit, x, pencil.G, k,
                         [&](const Vector& at, Vector& f) { evaluate_static(circuit, at, f, nullptr); });
            check_column(circuit, x, pencil.C, k,
                         [&](const Vector& at, Vector& q) { evaluate_charge(circuit, at, q, nullptr); });
        }
    }
}

TEST_CASE("a circuit of constant parts is its own linearisation", "[circuit][ordinary]") {
    const Circuit circuit = bridge_loop().circuit();
    const Pencil pencil = linearise(circuit, Vector::Constant(circuit.size(), 0.7));
    CHECK(pencil.G == circuit.G);
    CHECK(pencil.C == circuit.C);
    CHECK(pencil.size() == circuit.size());
}
