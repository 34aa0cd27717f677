#include "../circuit/drawing.hpp"
#include "core/analysis/operating_point.hpp"
#include <algorithm>
#include <limits>
#include <memory>

using namespace sinewright;
using namespace sinewright::test;

namespace {

/// Positive feedback of one half, negative of one in eleven, round an op-amp with swing ±13 V: it latches.
Drawing latch() {
    Drawing d;
    d.resistor("R1", 10e3, "out", "p").resistor("R2", 10e3, "p", "gnd");
    d.resistor("R3", 10e3, "out", "m").resistor("R4", 1e3, "m", "gnd").capacitor("C1", 10e-9, "m", "gnd");
    d.real_opamp("U1", "p", "m", "out");
    return d;
}

std::vector<double> outputs(const Circuit& circuit, const std::vector<Vector>& states, std::string_view net) {
    std::vector<double> volts;
    for (const Vector& x : states) volts.push_back(voltage(circuit, x, net));
    std::sort(volts.begin(), volts.end());
    return volts;
}

} // namespace

TEST_CASE("a latching stage rests at zero, and can also rest near either swing limit", "[operating_point][ordinary]") {
    const Circuit circuit = latch().circuit();
    const auto rest = find_operating_point(circuit);
    REQUIRE(rest);
    CHECK(rest->x.cwiseAbs().maxCoeff() == 0); // the state nearest power-up
    const auto others = find_other_states(circuit, rest->x);
    const std::vector<double> volts = outputs(circuit, others, "out");
    REQUIRE(volts.size() == 2);
    // Source: at the clamp S = S·exp((v_g − 13)/0.05), so v_g = 13 V less w·v_g/(A0·S) of 0.05 V; the 50 Ω divide.
    const double load_ohm = 1 / (1 / 20e3 + 1 / 11e3);
    CHECK(volts[1] == Approx(13 * load_ohm / (load_ohm + 50)).epsilon(1e-4));
    CHECK(volts[0] == Approx(-volts[1]).epsilon(1e-9));
    Vector f;
    for (const Vector& x : others) { // put back into the equations
        evaluate_static(circuit, x, f, nullptr);
        CHECK(f.cwiseAbs().maxCoeff() < 1e-9);
    }
}

TEST_CASE("a latch through five op-amps has three states", "[operating_point][tricky]") {
    Drawing d;
    d.resistor("R1", 10e3, "o5", "p").resistor("R2", 10e3, "p", "gnd");
    d.resistor("R3", 30e3, "o1", "m").resistor("R4", 10e3, "m", "gnd").real_opamp("U1", "p", "m", "o1");
    for (int k = 2; k <= 5; ++k) {
        const std::string in = "o" + std::to_string(k - 1), out = "o" + std::to_string(k);
        d.real_opamp("U" + std::to_string(k), in.c_str(), out.c_str(), out.c_str());
    }
    const Circuit circuit = d.circuit();
    const auto rest = find_operating_point(circuit);
    REQUIRE(rest);
    const auto volts = outputs(circuit, find_other_states(circuit, rest->x), "o5");
    REQUIRE(volts.size() == 2);
    // Near the swing limits of ±13 V; each follower loses some of the last 0.1 V to its own soft clamp.
    CHECK(volts[0] == Approx(-13).margin(0.2));
    CHECK(volts[1] == Approx(13).margin(0.2));
}

TEST_CASE("a loop with more negative than positive feedback at DC has one state", "[operating_point][ordinary]") {
    Drawing d = bridge_loop();
    const Circuit circuit = d.circuit();
    const auto rest = find_operating_point(circuit);
    REQUIRE(rest);
    CHECK(find_other_states(circuit, rest->x).empty());
}

TEST_CASE("what no equation settles by its values is named", "[operating_point][errors]") {
    // Positive feedback equal to negative feedback: the output of an ideal op-amp may stand anywhere.
    Drawing d;
    d.resistor("R1", 10e3, "out", "p").resistor("R2", 10e3, "p", "gnd");
    d.resistor("R3", 10e3, "out", "m").resistor("R4", 10e3, "m", "gnd").ideal_opamp("U1", "p", "m", "out");
    const auto found = find_operating_point(d.circuit());
    REQUIRE_FALSE(found);
    CHECK(found.fault().kind == FaultKind::singular_pencil);
    CHECK(found.fault().sentence.find("net out") != std::string::npos);
    CHECK_FALSE(found.fault().remedy.empty());
}

TEST_CASE("a circuit with no DC solution is not converged, never a number", "[operating_point][errors]") {
    // v = v² + 1 has no real root: a multiplier squares its own output through an adder.
    Drawing d;
    d.supply("V1", 1, "one").add("multiplier", "M1", {{"scale", 1}}, {"y", "y", "q"});
    d.resistor("R1", 1e3, "one", "m").resistor("R2", 1e3, "q", "m").resistor("R3", 1e3, "m", "inv");
    d.ideal_opamp("U1", "gnd", "m", "inv").resistor("R4", 1e3, "inv", "n").resistor("R5", 1e3, "n", "y");
    d.ideal_opamp("U2", "gnd", "n", "y");
    const auto found = find_operating_point(d.circuit());
    REQUIRE_FALSE(found);
    CHECK(found.fault().kind == FaultKind::not_converged);
    CHECK(found.fault().sentence.find("source stepping") != std::string::npos);
    CHECK_FALSE(found.fault().where.empty());
}

TEST_CASE("a search for the operating point stops when asked", "[operating_point][errors]") {
    const auto stop = std::make_unique<std::stop_source>(); // on the heap: GCC 12 warns falsely of one on the stack
    stop->request_stop();
    const auto found = find_operating_point(latch().circuit(), {}, stop->get_token());
    REQUIRE_FALSE(found);
    CHECK(found.fault().kind == FaultKind::cancelled);
}

TEST_CASE("one solver serves circuits of any size, and a neighbouring solution is the shortest way",
          "[operating_point][ordinary]") {
    const auto zener_supply = [](double volts) {
        Drawing d;
        d.supply("V1", volts, "in").resistor("R1", 1e3, "in", "z");
        d.add("zener", "Z1", {{"breakdown_voltage", 5.1}}, {"gnd", "z"});
        return d.circuit();
    };
    OperatingPointSolver solver;
    const Circuit small = zener_supply(15), large = latch().circuit(), near = zener_supply(15.5);
    const auto first = solver.solve(small);
    REQUIRE(first);
    REQUIRE(solver.solve(large));
    const auto cold = solver.solve(near), warm = solver.solve_from(near, first->x);
    REQUIRE(cold);
    REQUIRE(warm);
    CHECK((cold->x - warm->x).cwiseAbs().maxCoeff() < 1e-12);
    CHECK(warm->iterations < cold->iterations);
    // Control: a start that is no number is left for power-up.
    const Vector lost = Vector::Constant(near.size(), std::numeric_limits<double>::quiet_NaN());
    const auto recovered = solver.solve_from(near, lost);
    REQUIRE(recovered);
    CHECK((recovered->x - cold->x).cwiseAbs().maxCoeff() < 1e-12);
}

TEST_CASE("from a stable state the others are found by deflation", "[operating_point][tricky]") {
    // v = 3v − v³/2 through a resistor that loads nothing: v = 0 and ±2. Source: the root of the cubic.
    Drawing d;
    d.add("limiter", "A1", {{"law", "cubic"}, {"gain", 3}, {"cubic", 0.5}}, {"v", "amp"});
    d.resistor("R1", 1e3, "amp", "v").capacitor("C1", 1e-7, "v", "gnd");
    const Circuit circuit = d.circuit();
    Vector settled = Vector::Zero(circuit.size());
    settled[circuit.net("v")] = settled[circuit.net("amp")] = 2;
    const auto stable = OperatingPointSolver().solve_from(circuit, settled);
    REQUIRE(stable);
    const auto volts = outputs(circuit, find_other_states(circuit, stable->x), "v");
    REQUIRE(volts.size() == 2);
    CHECK(volts[0] == Approx(-2).epsilon(1e-12));
    CHECK(std::abs(volts[1]) < 1e-12);
    OperatingPointOptions two;
    two.max_states = 2;
    CHECK(find_other_states(circuit, stable->x, two).size() == 1);
}
