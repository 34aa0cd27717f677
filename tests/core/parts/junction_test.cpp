/// Diode, Zener diode, and the LED and cell of a photocell.
#include "tests/core/parts/recorded_part.hpp"
#include <catch2/catch.hpp>
#include <cmath>

using namespace sinewright;
using namespace sinewright::testing;
using Catch::WithinAbs;
using Catch::WithinRel;

namespace {

constexpr double k_j_per_k = 1.380649e-23, q_c = 1.602176634e-19; // SI 2019

double diode_current(const RecordedPart& diode, double v) { return diode.current("a", diode.at({{"a", v}})); }

double forward_drop_v(double current_a, double temperature_k, const Settings& settings = {}) {
    const RecordedPart diode = record("diode", settings, temperature_k);
    return solve_rising([&](double v) { return diode_current(diode, v); }, current_a, 0, 2);
}

} // namespace

TEST_CASE("a small-signal diode drops 494.343, 606.744 and 719.146 mV at 0.1, 1 and 10 mA", "[parts]") {
    // Source: v = n·kT/q·ln(1 + i/Is) (Shockley 1949) with Is = 4 nA, n = 1.9, 25 °C; half a unit of the last digit.
    CHECK_THAT(forward_drop_v(1e-4, 298.15), WithinAbs(0.494343, 0.5e-6));
    CHECK_THAT(forward_drop_v(1e-3, 298.15), WithinAbs(0.606744, 0.5e-6));
    CHECK_THAT(forward_drop_v(1e-2, 298.15), WithinAbs(0.719146, 0.5e-6));
}

TEST_CASE("an antiparallel diode pair at zero bias is 6.10199 megohms", "[parts]") {
    // Source: n·kT/q/(2·Is).
    const RecordedPart diode = record("diode");
    CHECK_THAT(1 / (2 * diode.df(diode.at({}))(0, 0)), WithinAbs(6.10199e6, 5));
}

TEST_CASE("the forward drop falls by about 2 mV per kelvin", "[parts]") {
    // Source: the junction law Is(T) with 1.11 eV, solved at 298.15 K ± h; printed to the microvolt per kelvin.
    const auto slope_v_per_k = [](double current_a) {
        return (forward_drop_v(current_a, 298.16) - forward_drop_v(current_a, 298.14)) / 0.02;
    };
    CHECK_THAT(slope_v_per_k(1e-4), WithinAbs(-2.323e-3, 0.5e-6));
    CHECK_THAT(slope_v_per_k(1e-3), WithinAbs(-1.946e-3, 0.5e-6));
    CHECK_THAT(slope_v_per_k(1e-2), WithinAbs(-1.569e-3, 0.5e-6));
    const RecordedPart at_25 = record("diode"), at_35 = record("diode", {}, 308.15);
    CHECK_THAT(diode_current(at_35, -1) / diode_current(at_25, -1), WithinAbs(2.203, 0.5e-3));
}

TEST_CASE("a diode follows the contract's equations at any temperature", "[parts]") {
    const double Is = 1e-12, n = 1.2, Eg = 0.69, tt = 6e-9, Cj = 4e-12, T = 330;
    const RecordedPart d = record("diode",
                                  {{"saturation_current", Is},
                                   {"ideality", n},
                                   {"bandgap", Eg},
                                   {"transit_time", tt},
                                   {"junction_capacitance", Cj}},
                                  T);
    const double Is_T =
        Is * std::pow(T / 298.15, 3 / n) * std::exp((Eg * q_c / (n * k_j_per_k)) * (1 / 298.15 - 1 / T));
    for (const double v : {-2.0, -0.1, 0.2, 0.45}) {
        const auto x = d.at({{"a", v + 0.25}, {"k", 0.25}});
        const double i = Is_T * (std::exp(v / (n * k_j_per_k * T / q_c)) - 1);
        CHECK_THAT(d.current("a", x), WithinRel(i, 1e-12));
        CHECK_THAT(d.charge("a", x), WithinRel(tt * i + Cj * v, 1e-12));
    }
}

TEST_CASE("the whole current of a diode flows through its series resistance", "[parts]") {
    const RecordedPart d = record("diode", {{"series_resistance", 10.0}, {"junction_capacitance", 4e-12}});
    const double v_j = 0.6, i = 4e-9 * (std::exp(v_j / (1.9 * k_j_per_k * 298.15 / q_c)) - 1);
    const auto x = d.at({{"a", v_j + 10 * i}, {"junction", v_j}}); // v_j = v_ak − i·Rs
    CHECK_THAT(d.current("a", x), WithinRel(i, 1e-12));
    CHECK_THAT(d.f(x)[d.index("junction")], WithinAbs(0, 1e-12 * i));
    CHECK_THAT(d.q(x)[d.index("junction")], WithinRel(4e-12 * v_j, 1e-14));
    CHECK(d.charge("a", x) == 0);
}

TEST_CASE("above an argument of 80 the exponential goes on straight, value and slope joined", "[parts]") {
    const RecordedPart d = record("diode");
    const double knee_v = 80 * 1.9 * k_j_per_k * 298.15 / q_c, step = 1e-9;
    const auto slope = [&](double v) { return d.df(d.at({{"a", v}}))(0, 0); };
    CHECK_THAT(diode_current(d, knee_v + step), WithinRel(diode_current(d, knee_v - step), 1e-7));
    CHECK_THAT(slope(knee_v + step), WithinRel(slope(knee_v - step), 1e-7));
    CHECK(slope(knee_v + 1) == slope(knee_v + 100));
    CHECK_THAT(diode_current(d, knee_v + 10), WithinRel(diode_current(d, knee_v) + 10 * slope(knee_v + step), 1e-12));
}

TEST_CASE("the harmonics of a diode pair under a sine are Bessel functions", "[parts]") {
    // Source: Abramowitz & Stegun 9.6.34, i_k = 4·Is·I_k(A/(n·kT/q)); printed rows by an independent numeric run.
    struct Row {
        double amplitude_v, resistance_ohm, resistance_digit, third;
    };
    const RecordedPart diode = record("diode");
    const double slope_v = 1.9 * k_j_per_k * 298.15 / q_c;
    for (const Row& row :
         {Row{0.1, 3.755711e6, 1, 0.138985}, Row{0.3, 266.968e3, 1, 0.500139}, Row{0.4, 52.0466e3, 0.1, 0.598075},
          Row{0.5, 9.28129e3, 0.01, 0.665111}, Row{0.6, 1.56243e3, 0.01, 0.713395}}) {
        INFO(row.amplitude_v << " V");
        const auto current = over_a_cycle(256, [&](double phase) {
            const double v = row.amplitude_v * std::cos(phase);
            return diode_current(diode, v) - diode_current(diode, -v);
        });
        const double i_1 = cosine_harmonic(current, 1), x = row.amplitude_v / slope_v;
        CHECK_THAT(i_1, WithinRel(4 * 4e-9 * std::cyl_bessel_i(1.0, x), 1e-12));
        CHECK_THAT(cosine_harmonic(current, 3), WithinRel(4 * 4e-9 * std::cyl_bessel_i(3.0, x), 1e-12));
        CHECK_THAT(row.amplitude_v / i_1, WithinAbs(row.resistance_ohm, row.resistance_digit / 2));
        CHECK_THAT(cosine_harmonic(current, 3) / i_1, WithinAbs(row.third, 0.5e-6));
        CHECK_THAT(cosine_harmonic(current, 2) / i_1, WithinAbs(0, 1e-14));
    }
}

TEST_CASE("a Zener diode carries its breakdown current at its breakdown voltage", "[parts]") {
    const double Vz = 5.6, Iz = 5e-3, nz = 3, T = 310;
    const RecordedPart z = record(
        "zener",
        {{"breakdown_voltage", Vz}, {"breakdown_current", Iz}, {"breakdown_ideality", nz}, {"transit_time", 1e-8}}, T);
    const double Is_T =
        4e-9 * std::pow(T / 298.15, 3 / 1.9) * std::exp((1.11 * q_c / (1.9 * k_j_per_k)) * (1 / 298.15 - 1 / T));
    for (const double v : {-5.7, -5.6, -5.0, -1.0, 0.0, 0.3, 0.6}) {
        const double i = Is_T * (std::exp(v / (1.9 * k_j_per_k * T / q_c)) - 1) -
                         Iz * std::exp(-(v + Vz) / (nz * k_j_per_k * T / q_c));
        const auto x = z.at({{"a", v}});
        CHECK_THAT(z.current("a", x), WithinRel(i, 1e-12));
        CHECK_THAT(z.charge("a", x), WithinRel(1e-8 * i, 1e-12));
    }
    CHECK_THAT(z.current("k", z.at({{"k", Vz}})), WithinRel(Iz + Is_T, 1e-9)); // cathode positive
}

TEST_CASE("a photocell's conductance follows the light of its LED with a lag", "[parts]") {
    const double Is = 1e-17, n = 1.8, dark = 1e-6, g = 0.05, gamma = 0.7, lag = 0.1, T = 298.15;
    const RecordedPart p = record("photocell", {{"saturation_current", Is},
                                                {"ideality", n},
                                                {"dark_conductance", dark},
                                                {"sensitivity", g},
                                                {"gamma", gamma},
                                                {"lag", lag}});
    for (const double v : {0.9, 1.4}) {
        const double i_led = Is * (std::exp(v / (n * k_j_per_k * T / q_c)) - 1), G = 2e-4;
        const auto x = p.at({{"anode", v}, {"a", 0.3}, {"b", -0.2}, {"conductance", G}});
        CHECK_THAT(p.current("anode", x), WithinRel(i_led, 1e-12));
        CHECK_THAT(p.current("cathode", x), WithinRel(-i_led, 1e-12));
        CHECK_THAT(p.current("a", x), WithinRel(G * 0.5, 1e-14));
        CHECK_THAT(p.current("b", x), WithinRel(-G * 0.5, 1e-14));
        CHECK_THAT(p.rate("conductance", x), WithinRel((dark + g * std::pow(i_led, gamma) - G) / lag, 1e-11));
    }
}

TEST_CASE("with no light or a reversed LED the cell is dark, without any infinite slope", "[parts]") {
    const RecordedPart p = record("photocell", {{"sensitivity", 0.05}, {"gamma", 0.5}, {"lag", 0.1}});
    for (const double v : {0.0, -1.0, -5.0}) {
        const auto x = p.at({{"anode", v}});
        CHECK(p.rate("conductance", x) == 0); // it starts dark and stays so
        CHECK(p.df(x)(p.index("conductance"), p.index("anode")) == 0);
    }
    CHECK(p.unknowns[p.index("conductance")].start == 1e-8); // contract default
}
