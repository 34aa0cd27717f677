#include "../circuit/drawing.hpp"
#include "core/analysis/operating_point.hpp"
#include <cmath>

using namespace sinewright;
using namespace sinewright::test;

namespace {

constexpr double thermal_volts = 1.380649e-23 * 298.15 / 1.602176634e-19; ///< kT/q at 25 °C, exact SI values

struct Rest {
    Circuit circuit;
    OperatingPoint point;
    double v(std::string_view net) const { return voltage(circuit, point.x, net); }
};

/// Finds the operating point and puts it back into the equations.
Rest rest_of(const Drawing& drawing) {
    Rest rest{drawing.circuit(), {}};
    auto found = find_operating_point(rest.circuit);
    if (!found) FAIL(found.fault().sentence);
    rest.point = *found;
    CAPTURE(rest.point.method, rest.point.iterations);
    Vector f;
    Matrix jacobian;
    evaluate_static(rest.circuit, rest.point.x, f, &jacobian);
    for (int row = 0; row < rest.circuit.size(); ++row) {
        double size = 0;
        for (int k = 0; k < rest.circuit.size(); ++k)
            size += std::abs(jacobian(row, k)) * std::max(std::abs(rest.point.x[k]), rest.circuit.unknowns[k].typical);
        INFO(rest.circuit.unknowns[row].name);
        CHECK(std::abs(f[row]) <= 1e-11 * size);
    }
    return rest;
}

/// The one root of a function that changes sign between two arguments.
template <class Function> double bisect(double low, double high, Function function) {
    const bool rises = function(high) > 0;
    for (int k = 0; k < 200; ++k) {
        const double middle = (low + high) / 2;
        ((function(middle) > 0) == rises ? high : low) = middle;
    }
    return (low + high) / 2;
}

/// Junction voltage at a current, by Shockley's law of the contract's diode (1N-class defaults).
double diode_volts(double amps, double saturation = 4e-9, double ideality = 1.9) {
    return ideality * thermal_volts * std::log1p(amps / saturation);
}

} // namespace

TEST_CASE("a divider divides", "[operating_point][ordinary]") {
    Drawing d;
    d.supply("V1", 9, "in").resistor("R1", 1e3, "in", "mid").resistor("R2", 2e3, "mid", "gnd");
    const Rest rest = rest_of(d);
    CHECK(rest.v("mid") == Approx(6).epsilon(1e-13)); // Source: Ohm's law
    CHECK(rest.point.method == "Newton");
}

TEST_CASE("an inverting stage has the gain minus feedback over input resistor", "[operating_point][ordinary]") {
    Drawing d;
    d.supply("V1", 0.5, "in").resistor("R1", 1e3, "in", "m").resistor("R2", 4.7e3, "m", "out");
    d.ideal_opamp("U1", "gnd", "m", "out").resistor("RL", 600, "out", "gnd");
    const Rest rest = rest_of(d);
    CHECK(rest.v("out") == Approx(-0.5 * 4.7).epsilon(1e-13)); // Source: nullor, virtual earth
    CHECK(std::abs(rest.v("m")) < 1e-14);
}

TEST_CASE("an ordinary loop at rest takes one factorisation", "[operating_point][ordinary]") {
    const Rest rest = rest_of(bridge_loop());
    CHECK(rest.point.iterations == 1);
    CHECK(rest.point.x.cwiseAbs().maxCoeff() == 0);
}

TEST_CASE("a diode behind a resistor takes the current its exponential and Ohm's law share",
          "[operating_point][ordinary]") {
    const auto [volts, ohm] =
        GENERATE(table<double, double>({{5, 1e3}, {0.3, 1e5}, {100, 1}, {1000, 1e-1}, {-50, 1e3}}));
    Drawing d;
    d.supply("V1", volts, "in").resistor("R1", ohm, "in", "a").add("diode", "D1", {}, {"a", "gnd"});
    const Rest rest = rest_of(d);
    // Source: Shockley 1949; the root by bisection in the test. Above an argument of 80 the law goes on straight.
    const auto current = [&](double v) {
        const double u = v / (1.9 * thermal_volts);
        return 4e-9 * ((u <= 80 ? std::exp(u) : std::exp(80) * (1 + u - 80)) - 1);
    };
    const double expected = bisect(-60, 1001, [&](double v) { return current(v) - (volts - v) / ohm; });
    CHECK(rest.v("a") == Approx(expected).epsilon(1e-9));
    // The junction is linearised where it passes the predicted current, so no drive makes Newton wander.
    CHECK(rest.point.method == "Newton");
    CHECK(rest.point.iterations <= 15);
}

TEST_CASE("a diode with series resistance drops both", "[operating_point][ordinary]") {
    Drawing d;
    d.supply("V1", 5, "in").resistor("R1", 1e3, "in", "a");
    d.add("diode", "D1", {{"series_resistance", 12}}, {"a", "gnd"});
    const Rest rest = rest_of(d);
    const double amps = (5 - rest.v("a")) / 1e3;
    CHECK(rest.v("a") == Approx(diode_volts(amps) + 12 * amps).epsilon(1e-11)); // Source: Shockley 1949, Ohm's law
}

TEST_CASE("a Zener diode holds its voltage from a 15 V supply through 1 kilo-ohm", "[operating_point][ordinary]") {
    Drawing d;
    d.supply("V1", 15, "in").resistor("R1", 1e3, "in", "z");
    d.add("zener", "Z1", {{"breakdown_voltage", 5.1}}, {"gnd", "z"});
    const Rest rest = rest_of(d);
    // Source: the contract's law −Iz·exp(−(v + Vz)/(nz·kT/q)), Iz 1 mA, nz 2; saturation current 4 nA adds.
    const double expected = bisect(4, 7, [&](double v) {
        return 1e-3 * std::exp((v - 5.1) / (2 * thermal_volts)) + 4e-9 * (1 - std::exp(-v / (1.9 * thermal_volts))) -
               (15 - v) / 1e3;
    });
    CHECK(rest.v("z") == Approx(expected).epsilon(1e-11));
}

TEST_CASE("a diode bridge rectifies either polarity with two drops", "[operating_point][ordinary]") {
    const double volts = GENERATE(12.0, -12.0);
    Drawing d;
    d.supply("V1", volts, "l", "n").resistor("RG", 1e6, "n", "gnd").resistor("RL", 1e3, "p", "m");
    d.add("diode", "D1", {}, {"l", "p"}).add("diode", "D2", {}, {"n", "p"});
    d.add("diode", "D3", {}, {"m", "l"}).add("diode", "D4", {}, {"m", "n"});
    const Rest rest = rest_of(d);
    const double load = rest.v("p") - rest.v("m");
    const double amps = load / 1e3;
    // Source: Shockley 1949 twice; the two idle diodes leak 4 nA each and no more.
    CHECK(load == Approx(12 - 2 * diode_volts(amps)).epsilon(1e-5));
}

TEST_CASE("a FET with source resistor settles on the root of the square law", "[operating_point][ordinary]") {
    Drawing d;
    const double vp = -2, beta = 2e-3, rs = 1e3, rd = 1e3;
    d.supply("V1", 15, "vdd").resistor("RD", rd, "vdd", "d").resistor("RS", rs, "s", "gnd");
    d.resistor("RG", 1e6, "g", "gnd").add("jfet", "J1", {{"pinch_off", vp}, {"beta", beta}}, {"d", "g", "s"});
    const Rest rest = rest_of(d);
    // β(−i·Rs − Vp)² = i: Source: Shockley 1952 square law, quadratic formula, the root with the channel open.
    const double b = 2 * vp * rs - 1 / beta, a = rs * rs, c = vp * vp;
    const double amps = (-b - std::sqrt(b * b - 4 * a * c)) / (2 * a);
    CHECK(rest.v("s") == Approx(amps * rs).epsilon(1e-11));
    CHECK(rest.v("d") == Approx(15 - amps * rd).epsilon(1e-11));
}

TEST_CASE("a FET held past pinch-off passes nothing", "[operating_point][tricky]") {
    Drawing d;
    d.supply("V1", 15, "vdd").resistor("RD", 1e4, "vdd", "d").supply("V2", -5, "g");
    d.resistor("RS", 1e3, "s", "gnd").add("jfet", "J1", {{"pinch_off", -2}, {"beta", 2e-3}}, {"d", "g", "s"});
    const Rest rest = rest_of(d);
    CHECK(rest.v("d") == Approx(15).epsilon(1e-13));
    CHECK(std::abs(rest.v("s")) < 1e-12);
}

TEST_CASE("a driven op-amp stops where its clamp takes the whole slewing current", "[operating_point][tricky]") {
    const double sign = GENERATE(1.0, -1.0);
    Drawing d;
    d.supply("V1", sign * 1, "in").real_opamp("U1", "in", "gnd", "out").resistor("RL", 10e3, "out", "gnd");
    const Rest rest = rest_of(d);
    // S·tanh(w/S) − (w/A0)·v_g = S·exp((v_g − 13)/0.05): Source: the contract's macro, root by bisection in the test.
    const double w = 2 * 3.14159265358979323846 * 1e7, s = 5e6;
    const double v_g =
        bisect(12, 14, [&](double v) { return std::exp((v - 13) / 0.05) - std::tanh(w / s) + w / 1e5 * v / s; });
    CHECK(rest.v("out") == Approx(sign * v_g * 10e3 / 10.05e3).epsilon(1e-10));
}

TEST_CASE("a follower's error is its output over its gain", "[operating_point][ordinary]") {
    Drawing d;
    d.supply("V1", 2, "in").real_opamp("U1", "in", "out", "out").resistor("RL", 10e3, "out", "gnd");
    const Rest rest = rest_of(d);
    // v_g = out·(1 + 50/10k) = (S/w)·A0·tanh(w·v_d/S): Source: the contract's macro.
    const double w = 2 * 3.14159265358979323846 * 1e7, s = 5e6;
    const double v_d = s / w * std::atanh(rest.v("out") * 1.005 / 1e5 * w / s);
    CHECK(rest.v("out") == Approx(2 - v_d).epsilon(1e-12));
}

TEST_CASE("a filament across a supply radiates what it draws", "[operating_point][tricky]") {
    Drawing d;
    d.supply("V1", 10, "in")
        .add("lamp", "LA1",
             {{"cold_resistance", 50},
              {"exponent", 1.2},
              {"heat_capacity", 1e-5},
              {"conduction", 1e-5},
              {"radiation", 4e-14}},
             {"in", "gnd"});
    const Rest rest = rest_of(d);
    const double ambient = 298.15;
    const double theta = bisect(ambient, 5000, [&](double t) { // Source: the contract's power balance
        return 1e-5 * (t - ambient) + 4e-14 * (std::pow(t, 4) - std::pow(ambient, 4)) -
               100 / (50 * std::pow(t / ambient, 1.2));
    });
    CHECK(theta > 1000);
    int found = -1;
    for (int k = 0; k < rest.circuit.size(); ++k)
        if (rest.circuit.unknowns[k].unit == "K") found = k;
    REQUIRE(found >= 0);
    CHECK(rest.point.x[found] == Approx(theta).epsilon(1e-11));
}

TEST_CASE("a photocell's cell is lit by 10 mA in its LED", "[operating_point][ordinary]") {
    Drawing d;
    const double red = 2 * thermal_volts * std::log1p(10e-3 / 1e-18); // drop of the default LED at 10 mA
    d.supply("V1", red + 1, "in").resistor("R1", 100, "in", "led").supply("V2", 1, "hi").resistor("R2", 1e3, "hi", "x");
    d.add("photocell", "PC1", {{"sensitivity", 0.2}, {"gamma", 0.7}, {"lag", 0.01}}, {"led", "gnd", "x", "gnd"});
    const Rest rest = rest_of(d);
    CHECK(rest.v("led") == Approx(red).epsilon(1e-11));
    const double siemens = 1e-8 + 0.2 * std::pow(10e-3, 0.7); // Source: the contract's photocell
    CHECK(rest.v("x") == Approx(1 / (1 + 1e3 * siemens)).epsilon(1e-9));
}

TEST_CASE("a servo with no signal rests at its upper control voltage", "[operating_point][ordinary]") {
    Drawing d = bridge_loop();
    d.add("servo", "S1", {{"detector_lag", 1e-3}, {"setpoint", 2}, {"rate", 2}, {"control_high", 4}, {"bias", 0.25}},
          {"out", "c"});
    d.resistor("RC", 1e3, "c", "gnd");
    // P²/2 = (P²/2)·exp((v − high)/0.05) at m = 0: Source: the contract's servo.
    CHECK(rest_of(d).v("c") == Approx(4.25).epsilon(1e-12));
}

TEST_CASE("a thermistor that heats itself settles on its falling branch", "[operating_point][tricky]") {
    // 2 mA through a bead of 10 kΩ: by far past the peak of its voltage, 4.2 V at 1.0 mA.
    Drawing d;
    d.supply("V1", 200, "in").resistor("R1", 100e3, "in", "t");
    d.add("thermistor", "TH1", {{"resistance_25", 1e4}, {"beta", 3500}, {"heat_capacity", 1e-4}, {"dissipation", 1e-4}},
          {"t", "gnd"});
    const Rest rest = rest_of(d);
    const auto ohm = [](double t) { return 1e4 * std::exp(3500 * (1 / t - 1 / 298.15)); };
    const double theta = bisect(298.15, 900, [&](double t) { // Source: the contract's power balance
        const double amps = 200 / (100e3 + ohm(t));
        return 1e-4 * (t - 298.15) - amps * amps * ohm(t);
    });
    CHECK(rest.v("t") == Approx(200 / (100e3 + ohm(theta)) * ohm(theta)).epsilon(1e-10));
}

TEST_CASE("300 parts of resistors and diodes in a ladder come to rest", "[operating_point][large]") {
    Drawing d;
    d.supply("V1", 50, "n0");
    for (int k = 0; k < 100; ++k) {
        const std::string here = "n" + std::to_string(k), next = "n" + std::to_string(k + 1);
        d.resistor("RS" + std::to_string(k), 100, here.c_str(), next.c_str());
        d.resistor("RP" + std::to_string(k), 10e3, next.c_str(), "gnd");
        if (k % 5 == 4) d.add("diode", "D" + std::to_string(k), {}, {next.c_str(), "gnd"});
    }
    const Rest rest = rest_of(d);
    CHECK(rest.v("n100") < 0.5);
    CHECK(rest.v("n100") > 0);
}

TEST_CASE("a ladder of 1,000 equal resistor sections falls by the golden ratio at each", "[operating_point][large]") {
    Drawing d;
    d.supply("V1", 1, "n0");
    for (int k = 0; k < 999; ++k) {
        const std::string here = "n" + std::to_string(k), next = "n" + std::to_string(k + 1);
        d.resistor("RS" + std::to_string(k), 1e3, here.c_str(), next.c_str());
        d.resistor("RP" + std::to_string(k), 1e3, next.c_str(), "gnd");
    }
    const Circuit circuit = d.circuit();
    const auto found = find_operating_point(circuit);
    REQUIRE(found);
    // Source: continued fraction of a long ladder; v₁/v₀ = (3 − √5)/2.
    CHECK(found->x[circuit.net("n1")] == Approx((3 - std::sqrt(5.0)) / 2).epsilon(1e-12));
}
