#include "drawing.hpp"

using namespace sinewright;
using namespace sinewright::test;

namespace {
bool says(const Fault& fault, std::string_view words) { return fault.sentence.find(words) != std::string::npos; }
} // namespace

TEST_CASE("an end without a net is named by part and end", "[topology][errors]") {
    Drawing d = bridge_loop();
    d.resistor("R7", 1e3, "out", "");
    const Fault fault = d.fault();
    CHECK(fault.kind == FaultKind::unconnected_terminal);
    CHECK(fault.where == "R7.b");
    CHECK(says(fault, "R7 is not connected at its "));
    CHECK_FALSE(fault.remedy.empty());
}

TEST_CASE("a net at the free end of a capacitor reaches nothing else", "[topology][errors]") {
    Drawing d = bridge_loop();
    d.capacitor("C7", 1e-9, "out", "n4");
    const Fault fault = d.fault();
    CHECK(fault.kind == FaultKind::floating_net);
    CHECK(fault.where == "net n4");
    CHECK(fault.sentence == "Net n4 reaches nothing else: join it or remove C7.");
}

TEST_CASE("an input that nothing drives reaches nothing else", "[topology][errors]") {
    Drawing d = bridge_loop();
    d.ideal_opamp("U2", "lost", "o2", "o2");
    const Fault fault = d.fault();
    CHECK(fault.kind == FaultKind::floating_net);
    CHECK(says(fault, "Net lost reaches nothing else"));
    CHECK(says(fault, "U2"));
}

TEST_CASE("a net between two capacitors and an op-amp input has no DC path", "[topology][errors]") {
    Drawing d = bridge_loop();
    d.capacitor("C7", 1e-9, "out", "f").capacitor("C8", 1e-9, "f", "gnd").ideal_opamp("U2", "f", "o2", "o2");
    const Fault fault = d.fault();
    CHECK(fault.kind == FaultKind::floating_net);
    CHECK(says(fault, "Net f has no DC path to gnd"));
}

TEST_CASE("an ideal integrator's virtual earth floats when only capacitors reach it", "[topology][tricky]") {
    Drawing d;
    d.resistor("R1", 1e3, "in", "gnd").capacitor("C1", 1e-9, "in", "e").capacitor("C2", 1e-9, "e", "out");
    d.ideal_opamp("U1", "gnd", "e", "out");
    CHECK(says(d.fault(), "Net e has no DC path to gnd"));
    // Control: with a resistor, inside a loop that closes at DC, it is an integrator like any other.
    d.resistor("R2", 1e3, "in", "e").resistor("R3", 1e3, "out", "in");
    CHECK(assemble(d.design()));
}

TEST_CASE("floating nets that hang together are one fault", "[topology][errors]") {
    Drawing d = bridge_loop();
    d.capacitor("C7", 1e-9, "out", "a").resistor("R7", 1e3, "a", "b").resistor("R8", 1e3, "b", "c");
    const auto assembled = assemble(d.design());
    REQUIRE_FALSE(assembled);
    CHECK(assembled.faults().size() == 1);
    CHECK(says(assembled.fault(), "Nets a, b and c have no DC path to gnd"));
}

TEST_CASE("a drawing without gnd is told so once", "[topology][errors]") {
    Drawing d;
    d.resistor("R1", 1e3, "a", "b").capacitor("C1", 1e-9, "a", "b").inductor("L1", 1e-3, "a", "b", 3);
    const auto assembled = assemble(d.design());
    REQUIRE_FALSE(assembled);
    CHECK(assembled.faults().size() == 1);
    CHECK(says(assembled.fault(), "gnd"));
    CHECK(assembled.fault().where == "net gnd");
}

TEST_CASE("two supplies on one net contradict each other", "[topology][errors]") {
    Drawing d = bridge_loop();
    d.supply("V1", 5, "vcc").supply("V2", 6, "vcc").resistor("R7", 1e3, "vcc", "gnd");
    const Fault fault = d.fault();
    CHECK(fault.kind == FaultKind::source_loop);
    CHECK(fault.sentence == "V1 and V2 force different voltages on the same net.");
}

TEST_CASE("three supplies in a ring contradict each other", "[topology][errors]") {
    Drawing d = bridge_loop();
    d.supply("V1", 5, "a").supply("V2", 6, "b", "a").supply("V3", 7, "b").resistor("R7", 1e3, "b", "gnd");
    const Fault fault = d.fault();
    CHECK(fault.kind == FaultKind::source_loop);
    for (const char* ref : {"V1", "V2", "V3"}) CHECK(says(fault, ref));
}

TEST_CASE("a supply with both terminals on one net is shorted", "[topology][errors]") {
    Drawing d = bridge_loop();
    d.supply("V1", 5, "out", "out");
    const Fault fault = d.fault();
    CHECK(fault.kind == FaultKind::source_loop);
    CHECK(fault.where == "V1");
    CHECK(says(fault, "V1"));
}

TEST_CASE("an op-amp output tied to a supply, to another output or to gnd is named", "[topology][errors]") {
    Drawing supply = bridge_loop();
    supply.supply("V1", 5, "out");
    CHECK(supply.fault().kind == FaultKind::source_loop);
    CHECK(says(supply.fault(), "output of U1"));
    CHECK(says(supply.fault(), "V1"));

    Drawing output = bridge_loop();
    output.ideal_opamp("U2", "p", "m", "out");
    CHECK(output.fault().kind == FaultKind::source_loop);
    CHECK(says(output.fault(), "U1"));
    CHECK(says(output.fault(), "U2"));

    Drawing ground;
    ground.resistor("R1", 1e3, "p", "gnd").ideal_opamp("U1", "p", "p", "gnd");
    CHECK(ground.fault().kind == FaultKind::source_loop);
    CHECK(says(ground.fault(), "output of U1"));
    CHECK(says(ground.fault(), "gnd"));

    // Control: behind its output resistance an op-amp may fight a supply; it only loses.
    Drawing real;
    real.supply("V1", 5, "out").resistor("R1", 1e3, "p", "gnd").resistor("R2", 1e3, "p", "out");
    real.real_opamp("U1", "p", "gnd", "out");
    CHECK(assemble(real.design()));
}

TEST_CASE("inductors without resistance may not close a loop", "[topology][errors]") {
    Drawing d = bridge_loop();
    d.inductor("L1", 1e-3, "out", "t").inductor("L2", 1e-3, "t", "gnd");
    const Fault fault = d.fault();
    CHECK(fault.kind == FaultKind::source_loop);
    CHECK(says(fault, "loop without resistance"));
    CHECK(says(fault, "L1"));
    CHECK(says(fault, "L2"));
    Drawing resistive = bridge_loop();
    resistive.inductor("L1", 1e-3, "out", "t", 5).inductor("L2", 1e-3, "t", "gnd");
    CHECK(assemble(resistive.design()));
}

TEST_CASE("an ideal op-amp without feedback at DC leaves its output undetermined", "[topology][errors]") {
    Drawing d;
    d.supply("V1", 1, "in").resistor("R1", 1e3, "in", "p").resistor("R2", 1e3, "p", "gnd");
    d.resistor("R3", 1e3, "out", "gnd").ideal_opamp("U1", "p", "gnd", "out");
    const Fault fault = d.fault();
    CHECK(fault.kind == FaultKind::singular_pencil);
    CHECK((says(fault, "net out") || says(fault, "U1")));
    CHECK((fault.remedy.find("feedback") != std::string::npos));
}

TEST_CASE("an ideal op-amp with both inputs on one net says nothing about its output", "[topology][errors]") {
    Drawing d;
    d.resistor("R1", 1e3, "p", "gnd").resistor("R2", 1e3, "p", "out").ideal_opamp("U1", "p", "p", "out");
    CHECK(d.fault().kind == FaultKind::singular_pencil);
}

TEST_CASE("ordinary oscillators raise no fault", "[topology][ordinary]") {
    SECTION("two integrators and an inverter") {
        Drawing d;
        d.resistor("R1", 10e3, "q", "a").capacitor("C1", 1e-8, "a", "out").ideal_opamp("U1", "gnd", "a", "out");
        d.resistor("R2", 10e3, "out", "b").capacitor("C2", 1e-8, "b", "w").ideal_opamp("U2", "gnd", "b", "w");
        d.resistor("R3", 10e3, "w", "i").resistor("R4", 10e3, "i", "q").ideal_opamp("U3", "gnd", "i", "q");
        CHECK(assemble(d.design()));
    }
    SECTION("quadrature with a non-inverting integrator") {
        Drawing d;
        d.resistor("R1", 10e3, "q", "a").capacitor("C1", 1e-8, "a", "out").ideal_opamp("U1", "gnd", "a", "out");
        d.resistor("R2", 10e3, "out", "b").capacitor("C2", 1e-8, "b", "gnd").ideal_opamp("U2", "b", "c", "q");
        d.resistor("R3", 9.8e3, "c", "gnd").capacitor("C3", 1e-8, "c", "q");
        CHECK(assemble(d.design()));
    }
    SECTION("Colpitts with FET, gate grounded through the inductor") {
        Drawing d;
        d.supply("V1", 12, "vdd").add("jfet", "J1", {{"pinch_off", -2}, {"beta", 2e-3}}, {"vdd", "g", "s"});
        d.inductor("L1", 1e-3, "g", "gnd").capacitor("C1", 1e-9, "g", "s").capacitor("C2", 1e-9, "s", "gnd");
        d.resistor("RS", 1e3, "s", "gnd");
        CHECK(assemble(d.design()));
    }
    SECTION("tank to gnd with a cubic negative conductance") {
        Drawing d;
        d.capacitor("C1", 1e-7, "out", "gnd").inductor("L1", 0.1, "out", "gnd").resistor("R1", 1e3, "amp", "out");
        d.add("limiter", "A1", {{"law", "cubic"}, {"gain", 2}, {"cubic", 0.333}}, {"out", "amp"});
        CHECK(assemble(d.design()));
    }
    SECTION("lamp, photocell and multiplier with servo, outputs left free") {
        Drawing d = bridge_loop();
        d.add("lamp", "LA1", {{"cold_resistance", 480}, {"heat_capacity", 1e-5}, {"conduction", 4e-5}}, {"m", "gnd"});
        d.add("servo", "S1", {{"detector_lag", 1e-3}, {"setpoint", 2}, {"rate", 2}}, {"out", "c"});
        d.add("multiplier", "M1", {{"scale", 0.1}}, {"out", "c", "unused"});
        d.resistor("RL", 1e3, "c", "led")
            .add("photocell", "PC1", {{"sensitivity", 0.1}, {"lag", 0.01}}, {"led", "gnd", "out", "m"});
        CHECK(assemble(d.design()));
    }
    SECTION("a resistor to nowhere is odd, but no sum goes wrong") {
        Drawing d = bridge_loop();
        d.resistor("R7", 1e3, "out", "tp");
        CHECK(assemble(d.design()));
    }
    SECTION("an input held only by the op-amp's own input resistance") {
        Drawing d = bridge_loop();
        d.add("opamp", "U2", {{"model", "macro"}, {"gbw", 1e6}, {"input_resistance", 2e6}}, {"f", "p", "o2"});
        d.capacitor("C7", 1e-9, "out", "f");
        CHECK(assemble(d.design()));
    }
}

TEST_CASE("several faults are told at once", "[topology][errors]") {
    Drawing d = bridge_loop();
    d.supply("V1", 5, "vcc").supply("V2", 6, "vcc").resistor("R7", 1e3, "vcc", "gnd").capacitor("C7", 1e-9, "out", "x");
    const auto assembled = assemble(d.design());
    REQUIRE_FALSE(assembled);
    CHECK(assembled.faults().size() == 2);
}

TEST_CASE("a sheet without parts, or with all of them on gnd, is told so", "[topology][errors]") {
    CHECK(Drawing().fault().sentence == "The design has no parts.");
    Drawing d;
    d.resistor("R1", 1e3, "gnd", "gnd");
    CHECK(d.fault().kind == FaultKind::floating_net);
    CHECK(says(d.fault(), "on gnd"));
}

TEST_CASE("a part of an unknown kind or short of a terminal is a fault, in the opened circuit too",
          "[topology][errors]") {
    Drawing d = bridge_loop();
    d.design().parts[0].kind = "flux_gate";
    CHECK(d.fault().kind == FaultKind::unknown_key);
    CHECK(says(d.fault(), "flux_gate"));
    CHECK_FALSE(assemble_opened(d.design(), {"U1", "plus"}));
    Drawing e = bridge_loop();
    e.design().parts[1].terminals.pop_back();
    CHECK(e.fault().kind == FaultKind::unconnected_terminal);
    CHECK(e.fault().where == "C1.b");
    CHECK_FALSE(assemble_opened(e.design(), {"U1", "plus"}));
}

TEST_CASE("a thousand contradictory supplies are answered at once", "[topology][large]") {
    Drawing d;
    for (int k = 0; k < 1000; ++k) {
        const std::string from = k == 0 ? "gnd" : "n" + std::to_string(k - 1), to = "n" + std::to_string(k);
        d.supply("VA" + std::to_string(k), 1, to.c_str(), from.c_str());
        d.supply("VB" + std::to_string(k), 2, to.c_str(), from.c_str());
    }
    const auto assembled = assemble(d.design());
    REQUIRE_FALSE(assembled);
    CHECK(assembled.fault().sentence == "VA0 and VB0 force different voltages on the same net.");
    CHECK(assembled.faults().size() < 50);
}

TEST_CASE("more unknowns than can be solved are refused with the limit", "[topology][large]") {
    Drawing d;
    d.resistor("R0", 1e3, "in", "gnd");
    for (int k = 0; k < 1999; ++k) {
        const std::string out = "o" + std::to_string(k);
        d.add("opamp", "U" + std::to_string(k), {{"model", "macro"}, {"gbw", 1e6}, {"second_pole", 1e7}},
              {"in", out.c_str(), out.c_str()});
    }
    CHECK(d.fault().kind == FaultKind::limit_exceeded);
    CHECK(says(d.fault(), "at most 6000"));
}
