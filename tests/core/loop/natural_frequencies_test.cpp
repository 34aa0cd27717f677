#include "core/analysis/natural_frequencies.hpp"
#include "hand_circuits.hpp"
#include <catch2/catch.hpp>
#include <numbers>

using namespace sinewright;
using namespace sinewright::test;

namespace {

void check_root(Complex found, Complex wanted, double relative) {
    CHECK(std::abs(found - wanted) <= relative * std::abs(wanted));
}

} // namespace

TEST_CASE("the equal-arm bridge grows by (G-3)/(2 tau) per second", "[natural_frequencies][ordinary]") {
    // s²τ² − (G − 3)sτ + 1 = 0. Source: derived from the bridge's transfer function; common practice, no source.
    const double tau_s = 10e3 * 10e-9;
    for (const double gain : {2.9, 3.001, 3.1, 4.0}) {
        const auto roots = natural_frequencies(joined(opened_bridge(gain), 2));
        REQUIRE(roots);
        REQUIRE(roots->size() == 2);
        const double half = (gain - 3) / 2;
        check_root((*roots)[0], Complex(half, std::sqrt(1 - half * half)) / tau_s, 1e-12);
        CHECK((*roots)[1] == std::conj((*roots)[0]));
    }
}

TEST_CASE("above a gain of 5 the equal-arm bridge has two real growing roots: starts, but overdriven",
          "[natural_frequencies][ordinary]") {
    // Source: the same quadratic; its discriminant changes sign at G = 5.
    const auto roots = natural_frequencies(joined(opened_bridge(6.0), 2));
    REQUIRE(roots);
    const double tau_s = 1e-4, root = std::sqrt(1.5 * 1.5 - 1);
    check_root((*roots)[0], (1.5 + root) / tau_s, 1e-12);
    check_root((*roots)[1], (1.5 - root) / tau_s, 1e-12);
    const SmallSignal judged = judge_start(*roots);
    CHECK(judged.outcome == Outcome::starts);
    CHECK_FALSE(judged.frequency_hz);
    CHECK_FALSE(judged.frequency_reason.empty());
}

TEST_CASE("circuits with ideal op-amps (index two) show only their finite natural frequencies",
          "[natural_frequencies][tricky]") {
    // Inverting amplifier, integrator and inverter round a loop: s² + ω0² = 0. Source: Kerwin, Huelsman & Newcomb 1967.
    // Nets: 0 a, 1 out1, 2 b, 3 out2, 4 c, 5 out3; branches 6, 7, 8.
    HandCircuit h(9);
    h.resistor(5, 0, 10e3).capacitor(0, 1, 10e-9).nullor(-1, 0, 1, 6);
    h.resistor(1, 2, 10e3).capacitor(2, 3, 10e-9).nullor(-1, 2, 3, 7);
    h.resistor(3, 4, 10e3).resistor(4, 5, 10e3).nullor(-1, 4, 5, 8);
    const auto roots = natural_frequencies(h.pencil);
    REQUIRE(roots);
    REQUIRE(roots->size() == 2);
    CHECK(std::abs((*roots)[0].real()) < 1e-9 * 1e4);
    CHECK(std::abs((*roots)[0].imag() - 1e4) < 1e-9 * 1e4);
    CHECK(judge_start(*roots).outcome == Outcome::decays); // neither grows nor dies: growth is zero to rounding
}

TEST_CASE("a loop of capacitors holds one state fewer than it has capacitors", "[natural_frequencies][tricky]") {
    // Three capacitors in a triangle with a resistor from each of two corners to gnd, the third corner tied by R too.
    HandCircuit h(3);
    h.capacitor(0, 1, 1e-9).capacitor(1, 2, 2e-9).capacitor(2, 0, 3e-9);
    h.resistor(0, -1, 1e3).resistor(1, -1, 2e3).resistor(2, -1, 4e3);
    const auto roots = natural_frequencies(h.pencil);
    REQUIRE(roots);
    CHECK(roots->size() == 2); // rank of C; the sum of the charges is fixed by the resistors alone
    for (const Complex s : *roots) {
        CHECK(s.real() < 0);
        const Eigen::MatrixXcd m = h.pencil.G.cast<Complex>() + s * h.pencil.C;
        CHECK(m.jacobiSvd().singularValues()[2] < 1e-12 * m.norm()); // put back into det(G + sC) = 0
    }
}

TEST_CASE("poles chosen from millihertz to gigahertz are found again", "[natural_frequencies][large]") {
    // A chain of buffered RC sections has the roots −1/(RC) that it was built with. Source: common practice, no source.
    const std::vector<double> rates{1e-2, 3.0, 1e3, 1.0001e3, 2e5, 7e7, 4e9};
    const int n = static_cast<int>(rates.size());
    HandCircuit h(2 * n);
    for (int k = 0; k < n; ++k) {
        h.resistor(k, -1, 1e4).capacitor(k, -1, 1 / (1e4 * rates[k]));
        if (k + 1 < n) h.transconductance(k, k + 1, -3e-5);
        h.resistor(n + k, -1, 50.0); // an algebraic unknown each
        h.pencil.G(n + k, k) -= 1e-3;
    }
    const auto roots = natural_frequencies(h.pencil);
    REQUIRE(roots);
    REQUIRE(roots->size() == rates.size());
    for (int k = 0; k < n; ++k) check_root((*roots)[k], -rates[k], 1e-7);
}

TEST_CASE("a net that no equation determines is named", "[natural_frequencies][errors]") {
    HandCircuit h(3);
    h.resistor(0, -1, 1e3).capacitor(0, -1, 1e-9); // unknowns 1 and 2 carry a nullor with both inputs on gnd
    h.nullor(-1, -1, 1, 2);
    const std::vector<std::string> names{"net a", "net out", "U1 output current"};
    const auto roots = natural_frequencies(h.pencil, names);
    REQUIRE_FALSE(roots);
    CHECK(roots.fault().kind == FaultKind::singular_pencil);
    CHECK(roots.fault().sentence.find("net out") != std::string::npos);
}

TEST_CASE("the outcome is latching when an odd number of real roots grows", "[natural_frequencies][ordinary]") {
    // Source: the definition of the three outcomes (a DC state is left monotonically; Routh-Hurwitz sign of det G).
    CHECK(judge_start({{3e6, 0}, {-9e4, 0}}).outcome == Outcome::latches);
    CHECK(judge_start({{3e6, 0}, {1e3, 4e3}, {1e3, -4e3}}).outcome == Outcome::latches);
    CHECK(judge_start({{3e6, 0}, {2e6, 0}}).outcome == Outcome::starts);
    const SmallSignal pair = judge_start({{500, 1e4}, {500, -1e4}});
    CHECK(pair.outcome == Outcome::starts);
    CHECK(*pair.growth_per_cycle == Approx(std::exp(2 * std::numbers::pi * 0.05) - 1).epsilon(1e-14));
    CHECK(*pair.frequency_hz == Approx(1e4 / (2 * std::numbers::pi)).epsilon(1e-14));
    CHECK(judge_start({{-1, 1e4}, {-1, -1e4}}).outcome == Outcome::decays);
    CHECK(judge_start({}).outcome == Outcome::decays);
}
