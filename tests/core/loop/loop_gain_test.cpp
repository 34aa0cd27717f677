#include "core/analysis/loop_gain.hpp"
#include "hand_circuits.hpp"
#include <catch2/catch.hpp>
#include <numbers>

using namespace sinewright;
using namespace sinewright::test;
using std::numbers::pi;

namespace {

Complex bridge_gain(double gain, double u) { return gain * Complex(0, u) / Complex(1 - u * u, 3 * u); }

/// L by its definition, from the admittances of the opened circuit; independent of the class under test.
Complex gain_by_admittances(const Pencil& opened, int x, int y, Complex s) {
    const int n = opened.size();
    const Eigen::MatrixXcd m = opened.G.cast<Complex>() + s * opened.C;
    std::vector<int> rest, ports{x, y};
    for (int k = 0; k < n; ++k)
        if (k != x && k != y) rest.push_back(k);
    const Eigen::MatrixXcd inner = Eigen::MatrixXcd(m(rest, rest)).fullPivLu().solve(Eigen::MatrixXcd(m(rest, ports)));
    const Eigen::MatrixXcd admittance = Eigen::MatrixXcd(m(ports, ports)) - Eigen::MatrixXcd(m(ports, rest)) * inner;
    return -(admittance(0, 1) + admittance(1, 0)) / (admittance(0, 0) + admittance(1, 1));
}

} // namespace

TEST_CASE("the loop gain of the equal-arm bridge is A jx/(1 - x^2 + 3jx)", "[loop_gain][ordinary]") {
    // Source: common practice, no source.
    const auto loop = LoopGain::prepare(opened_bridge(3.1).pencil, 4, 2);
    REQUIRE(loop);
    CHECK_FALSE(loop->falls_back_to_lu());
    for (const double u : {1e-4, 0.03, 0.5, 1.0, 1.7, 40.0, 1e5}) {
        const Complex wanted = bridge_gain(3.1, u), s(0, u * 1e4);
        CHECK(std::abs(loop->at(s) - wanted) < 1e-10 * std::abs(wanted));
        CHECK(std::abs(loop->at_by_lu(s) - wanted) < 1e-12 * std::abs(wanted));
    }
}

TEST_CASE("three equal RC sections oscillate at 1/(2 pi sqrt(6) RC) and need a gain of 29", "[loop_gain][ordinary]") {
    // Source: Ginzton & Hollingsworth 1941; the crossing lies at that frequency whatever the gain.
    const double wanted_hz = 1 / (2 * pi * std::sqrt(6.0) * 1e-4);
    for (const double gain : {28.0, 29.2, 60.0}) {
        const auto loop = LoopGain::prepare(opened_phase_shift(gain).pencil, 5, 3);
        REQUIRE(loop);
        const auto crossings = find_crossings(*loop);
        REQUIRE(crossings.size() == 1);
        CHECK(crossings[0].frequency_hz == Approx(wanted_hz).epsilon(1e-12));
        CHECK(crossings[0].gain == Approx(gain / 29).epsilon(1e-12));
        CHECK(crossings[0].falls);
        CHECK(crossings[0].startup_margin_db() == Approx(20 * std::log10(gain / 29)).margin(1e-11));
        CHECK(count_encirclements(*loop) == (gain > 29 ? 2 : 0)); // both halves of the curve, ω and −ω
        CHECK(loop->opened_right_half_plane() == 0);
    }
}

TEST_CASE("a cut that loads the loop from both sides follows the bilateral definition", "[loop_gain][tricky]") {
    // Transconductance stage with feedback through R and C into a loaded input: y11, y12, y21, y22 all count.
    // Source: L = -(y12 + y21)/(y11 + y22), Tian, Visvanathan, Hantgan & Kundert 2001.
    HandCircuit h(5); // 0 network, 1 stage output, 2 middle, 3 y, 4 x
    h.resistor(0, -1, 3.3e3).capacitor(0, 1, 4.7e-9).resistor(1, -1, 1e4).capacitor(1, 2, 1e-9).resistor(2, 3, 2.2e3);
    h.capacitor(3, -1, 3e-9)
        .resistor(3, 0, 5e3)
        .resistor(4, -1, 8e3)
        .capacitor(4, 1, 0.5e-9)
        .transconductance(4, 1, 4e-3);
    const auto loop = LoopGain::prepare(h.pencil, 4, 3), turned = LoopGain::prepare(h.pencil, 3, 4);
    REQUIRE(loop);
    REQUIRE(turned);
    for (const double f_hz : {10.0, 3e3, 2e4, 9e4, 1e6, 1e8}) {
        const Complex s(0, 2 * pi * f_hz), wanted = gain_by_admittances(h.pencil, 4, 3, s);
        CHECK(std::abs(loop->at(s) - wanted) < 1e-9 * std::abs(wanted));
        CHECK(std::abs(loop->at_by_lu(s) - wanted) < 1e-11 * std::abs(wanted));
        CHECK(std::abs(turned->at(s) - loop->at(s)) < 1e-10 * std::abs(wanted)); // direction of the cut does not matter
    }
    // Encirclements are right-half-plane roots joined less opened (Nyquist 1932), and neither count knows the other.
    const auto joined_roots = natural_frequencies(joined(h, 3));
    REQUIRE(joined_roots);
    REQUIRE(loop->opened_right_half_plane());
    CHECK(count_encirclements(*loop) == judge_start(*joined_roots).right_half_plane - *loop->opened_right_half_plane());
}

TEST_CASE("where arg L rises through zero, a gain below one is what starts", "[loop_gain][tricky]") {
    // L = −K(s + 1)²/s³: arg L = 0 at ω = 1 with |L| = 2K; it grows only for K < ½. Source: Nyquist 1932 (conditional
    // stability), closed form derived; K = 5: −2.137841 ± 1.527312j, K = ¼: 0.091020 ± 0.755225j.
    for (const double k : {5.0, 0.25}) {
        // Three integrators x1' = u, x2' = x1, x3' = x2 and u = −K(x1 + 2 x2 + x3): unknowns x1, x2, x3, y = sum, x.
        HandCircuit h(5);
        for (int i = 0; i < 3; ++i) h.pencil.C(i, i) = 1;
        h.pencil.G(0, 4) = 1; // x1' = −x  (the amplifier's sign)
        h.pencil.G(1, 0) = -1;
        h.pencil.G(2, 1) = -1;
        h.pencil.G(3, 3) = 1, h.pencil.G(3, 0) = -k, h.pencil.G(3, 1) = -2 * k, h.pencil.G(3, 2) = -k;
        const auto loop = LoopGain::prepare(h.pencil, 4, 3);
        REQUIRE(loop);
        const auto crossings = find_crossings(*loop);
        REQUIRE(crossings.size() == 1);
        CHECK(crossings[0].frequency_hz == Approx(1 / (2 * pi)).epsilon(1e-12));
        CHECK(crossings[0].gain == Approx(2 * k).epsilon(1e-12));
        CHECK_FALSE(crossings[0].falls);
        auto roots = loop->joined_roots();
        std::sort(roots.begin(), roots.end(), [](Complex a, Complex b) { return a.imag() > b.imag(); });
        const Complex wanted = k == 5 ? Complex(-2.137841, 1.527312) : Complex(0.091020, 0.755225);
        CHECK(std::abs(roots[0] - wanted) < 1e-6);
        CHECK((crossings[0].startup_margin_db() > 0) == (roots[0].real() > 0));
        CHECK(count_encirclements(*loop) == (k == 5 ? 0 : 2));
    }
}

TEST_CASE("an ideal two-integrator loop has no Barkhausen point", "[loop_gain][tricky]") {
    // L = (ω0/ω)² has zero phase at every frequency. Source: s² + ω0², Kerwin, Huelsman & Newcomb 1967.
    HandCircuit h(10);
    h.resistor(9, 0, 10e3).capacitor(0, 1, 10e-9).nullor(-1, 0, 1, 6);
    h.resistor(1, 2, 10e3).capacitor(2, 3, 10e-9).nullor(-1, 2, 3, 7);
    h.resistor(3, 4, 10e3).resistor(4, 5, 10e3).nullor(-1, 4, 5, 8);
    const auto loop = LoopGain::prepare(h.pencil, 9, 5);
    REQUIRE(loop);
    CHECK(std::abs(loop->at(Complex(0, 2e4)) - 0.25) < 1e-12);
    CHECK(find_crossings(*loop).empty());
    std::string reason;
    CHECK_FALSE(governing_point({}, judge_start(*natural_frequencies(joined(h, 5))), reason));
    CHECK_FALSE(reason.empty());
}

TEST_CASE("a cut at an ideal op-amp's output has no finite loop gain and says so", "[loop_gain][errors]") {
    HandCircuit h(6); // equal-arm bridge with nullor; 0 out net (y), 1 s, 2 p, 3 m, 4 branch, 5 op-amp side (x)
    h.resistor(0, 1, 1e4).capacitor(1, 2, 1e-8).resistor(2, -1, 1e4).capacitor(2, -1, 1e-8);
    h.resistor(0, 3, 21e3).resistor(3, -1, 1e4).nullor(2, 3, 5, 4);
    const auto loop = LoopGain::prepare(h.pencil, 5, 0);
    REQUIRE_FALSE(loop);
    CHECK(loop.fault().kind == FaultKind::no_loop_gain);
}

TEST_CASE("a very sharp resonance in the loop is not stepped over", "[loop_gain][tricky]") {
    // Series L C R from an amplifier into a load: L(jω) = A R/(R + r + j(ωL − 1/ωC)): one crossing, at 1/√(LC), gain
    // A·R/(R + r). Q is ωL/(R + r). Source: common practice, no source.
    for (const double q : {0.3, 30.0, 1e4, 1e6}) {
        const double w0 = 2 * pi * 12345.0, henry = 1e-3, farad = 1 / (w0 * w0 * henry), ohm = w0 * henry / q;
        // 0 out, 1 inductor current, 2 y, 3 branch, 4 x, 5 between L and C
        HandCircuit g(6);
        g.capacitor(5, 2, farad).resistor(2, -1, ohm).amplifier(4, 0, 1.01, 3);
        g.pencil.G(0, 1) += 1, g.pencil.G(5, 1) -= 1; // inductor current from 0 to 5
        g.pencil.G(1, 0) += 1, g.pencil.G(1, 5) -= 1, g.pencil.C(1, 1) -= henry;
        const auto loop = LoopGain::prepare(g.pencil, 4, 2);
        REQUIRE(loop);
        const auto crossings = find_crossings(*loop);
        REQUIRE(crossings.size() == 1);
        CHECK(crossings[0].frequency_hz == Approx(12345.0).epsilon(1e-10));
        CHECK(crossings[0].gain == Approx(1.01).epsilon(1e-9));
    }
}

TEST_CASE("the fast form of a sweep equals LU at every point", "[loop_gain][ordinary]") {
    const auto loop = LoopGain::prepare(opened_phase_shift(31.0).pencil, 5, 3);
    REQUIRE(loop);
    const LoopCurve curve = loop->sweep(1, 1e6, 601);
    REQUIRE(curve.frequency_hz.size() == 601);
    CHECK(curve.frequency_hz.front() == 1);
    CHECK(curve.frequency_hz.back() == 1e6);
    for (std::size_t k = 0; k < curve.gain.size(); ++k) {
        const Complex plain = loop->at_by_lu(Complex(0, 2 * pi * curve.frequency_hz[k]));
        CHECK(std::abs(curve.gain[k] - plain) <= 1e-9 * std::abs(plain));
    }
}
