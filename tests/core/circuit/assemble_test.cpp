#include "drawing.hpp"
#include <random>

using namespace sinewright;
using namespace sinewright::test;

TEST_CASE("nets are the first unknowns, in order of first mention, and gnd is none of them", "[circuit][ordinary]") {
    const Circuit circuit = bridge_loop().circuit();
    CHECK(circuit.nets == std::vector<std::string>{"out", "s", "p", "m"});
    CHECK(circuit.net_count == 4);
    CHECK(circuit.net("gnd") == -1);
    CHECK(circuit.net("nowhere") == -2);
    CHECK(circuit.net("p") == 2);
    CHECK(circuit.unknowns[2].name == "net p");
    CHECK(circuit.unknowns[2].unit == "V");
    REQUIRE(circuit.size() == 5);
    CHECK(circuit.unknowns[4].part == "U1");
    CHECK(circuit.unknowns[4].kind == UnknownKind::branch_current);
    CHECK(circuit.opened == -1);
}

TEST_CASE("a divider's equations are Kirchhoff's current law in conductances", "[circuit][ordinary]") {
    Drawing d;
    d.supply("V1", 9, "in").resistor("R1", 1e3, "in", "mid").resistor("R2", 2e3, "mid", "gnd");
    const Circuit c = d.circuit();
    const int mid = c.net("mid"), in = c.net("in");
    // Source: Kirchhoff's current law; sum of the conductances on the diagonal.
    CHECK(c.G(mid, mid) == Approx(1 / 1e3 + 1 / 2e3).epsilon(1e-15));
    CHECK(c.G(mid, in) == Approx(-1 / 1e3).epsilon(1e-15));
    Vector f;
    Vector x = Vector::Zero(c.size());
    x[in] = 9, x[mid] = 6, x[2] = -3e-3; // the current into the plus terminal of a supply that delivers 3 mA
    evaluate_static(c, x, f, nullptr);
    CHECK(f.cwiseAbs().maxCoeff() < 1e-15);
}

TEST_CASE("opening a cut adds one unknown at the end and moves no other", "[circuit][ordinary]") {
    Drawing d = bridge_loop();
    d.real_opamp("U2", "out", "b", "b").resistor("R9", 1e3, "b", "gnd");
    d.add("diode", "D1", {{"series_resistance", 10}}, {"out", "m"});
    const Circuit closed = d.circuit();
    std::mt19937 random(7);
    std::uniform_real_distribution<double> volts(-0.3, 0.3);
    for (const Part& part : d.design().parts)
        for (const TerminalNet& terminal : part.terminals) {
            if (terminal.net == "gnd") continue;
            INFO(part.ref << " " << terminal.terminal);
            const auto opened = assemble_opened(d.design(), {part.ref, terminal.terminal});
            REQUIRE(opened);
            const int n = closed.size();
            REQUIRE(opened->size() == n + 1);
            CHECK(opened->opened == n);
            CHECK(opened->rest == closed.net(*terminal.net));
            for (int k = 0; k < n; ++k) CHECK(opened->unknowns[k].name == closed.unknowns[k].name);
            // Joined again (same voltage, currents added) the opened equations are the closed ones.
            Vector x(n);
            for (double& v : x) v = volts(random);
            Vector f_closed, f_opened;
            evaluate_static(closed, x, f_closed, nullptr);
            evaluate_static(*opened, extend_to_opened(*opened, x), f_opened, nullptr);
            f_opened[opened->rest] += f_opened[n];
            CHECK((f_opened.head(n) - f_closed).cwiseAbs().maxCoeff() <= 1e-12 * f_closed.cwiseAbs().maxCoeff());
            // Control: the cut part's share is really on side x alone.
            CHECK((opened->G.col(n).cwiseAbs().sum() + opened->C.col(n).cwiseAbs().sum() > 0 ||
                   !opened->elements.empty()));
        }
}

TEST_CASE("only the named terminal of a part changes sides, though another one shares its net", "[circuit][tricky]") {
    Drawing d;
    d.supply("V1", 1, "in").resistor("R1", 1e3, "in", "p").resistor("R2", 1e3, "out", "gnd");
    d.ideal_opamp("U1", "p", "out", "out");
    const auto opened = assemble_opened(d.design(), {"U1", "minus"});
    REQUIRE(opened);
    const int x = opened->opened, out = opened->net("out");
    const int j = opened->size() - 2; // the op-amp's output current, the last inner unknown
    CHECK(opened->G(j, x) != 0);
    CHECK(opened->G(j, out) == 0);
    CHECK(opened->G(out, j) != 0);
}

TEST_CASE("a cut at a part or terminal that is not there, or on gnd, is refused by name", "[circuit][errors]") {
    const Drawing d = bridge_loop();
    const auto no_part = assemble_opened(d.design(), {"U7", "plus"});
    REQUIRE_FALSE(no_part);
    CHECK(no_part.fault().kind == FaultKind::missing_reference);
    CHECK(no_part.fault().sentence.find("U7") != std::string::npos);
    const auto no_terminal = assemble_opened(d.design(), {"U1", "gate"});
    REQUIRE_FALSE(no_terminal);
    CHECK(no_terminal.fault().kind == FaultKind::missing_reference);
    CHECK(no_terminal.fault().sentence.find("gate") != std::string::npos);
    const auto grounded = assemble_opened(d.design(), {"R2", "b"});
    REQUIRE_FALSE(grounded);
    CHECK(grounded.fault().kind == FaultKind::no_loop_gain);
}

TEST_CASE("2,000 resistors in a ladder assemble", "[circuit][large]") {
    Drawing d;
    d.supply("V1", 1, "n0");
    for (int k = 0; k + 2 < 2000; k += 2) {
        const std::string here = "n" + std::to_string(k / 2), next = "n" + std::to_string(k / 2 + 1);
        d.resistor("RS" + std::to_string(k), 1e3, here.c_str(), next.c_str());
        d.resistor("RP" + std::to_string(k), 1e3, next.c_str(), "gnd");
    }
    REQUIRE(d.design().parts.size() == 1999);
    CHECK(d.circuit().net_count == 1000);
}
