#include "sketch.hpp"
#include <catch2/catch.hpp>

using namespace sinewright;
using namespace sinewright::test;

namespace {

/// x″ − ε(1 − x²)x′ + x = 0 as a tank with a cubic negative resistance: R = 1 kΩ, ω₀ = 1/√(LC), ε = √(L/C)/R.
Sketch van_der_pol(double epsilon, double w0_rad_per_s) {
    const double r_ohm = 1e3, z_ohm = epsilon * r_ohm;
    return Sketch()
        .capacitor("C1", "out", "gnd", 1 / (w0_rad_per_s * z_ohm))
        .inductor("L1", "out", "gnd", z_ohm / w0_rad_per_s)
        .resistor("R1", "amp", "out", r_ohm)
        .limiter("A1", "out", "amp", {{"law", "cubic"}, {"gain", 2}, {"cubic", 1.0 / 3}})
        .cut("A1", "in");
}

/// Largest value over the cycle of a waveform given by its harmonics.
double largest_over_cycle(const SteadyState& state, int unknown) {
    double largest = 0;
    for (int n = 0; n < 20000; ++n) {
        double v = 0;
        for (int k = 0; k < state.spectrum.rows(); ++k)
            v += (state.spectrum(k, unknown) * std::polar(1.0, 2 * M_PI * k * n / 20000)).real();
        largest = std::max(largest, v);
    }
    return largest;
}

} // namespace

TEST_CASE("van der Pol's equation rests at its published orbit at any frequency", "[steady_state][ordinary]") {
    // Source: integration at 1e-13 and Fourier collocation, agreeing in every digit printed (van der Pol 1926;
    // series of Andersen & Geer 1982).
    struct Row {
        double epsilon, largest, period, fundamental, third, fifth, exponent;
    };
    const std::vector<Row> table{
        {0.1, 2.0001039799, 6.2871112723, 2.00015620, 0.01249316, 0.00026021, -0.10006248},
        {0.5, 2.0024879304, 6.3806758018, 2.00387245, 0.06163433, 0.00637625, -0.50773109},
        {1, 2.0086198609, 6.6632868593, 2.01490646, 0.11794507, 0.02381609, -1.05937699},
        {2, 2.0198913847, 7.6298744797, 2.04736195, 0.19854667, 0.07110930, -2.38256049},
    };
    for (const Row& row : table)
        for (const double w0 : {2 * M_PI * 5, 1e4, 2 * M_PI * 1e6}) {
            INFO("epsilon " << row.epsilon << ", w0 " << w0);
            const SteadyState state = steady_state_of(van_der_pol(row.epsilon, w0));
            CHECK(1 / state.frequency_hz * w0 == Approx(row.period).epsilon(1e-10));
            CHECK(state.amplitude_v == Approx(row.fundamental).epsilon(1e-8));
            CHECK(largest_over_cycle(state, 0) == Approx(row.largest).epsilon(2e-8)); // of 20000 points on a parabola
            CHECK(std::abs(state.harmonics[2].peak_v / state.amplitude_v - row.third) < 6e-9);
            CHECK(std::abs(state.harmonics[4].peak_v / state.amplitude_v - row.fifth) < 6e-9);
            REQUIRE(state.envelope);
            REQUIRE(state.envelope->exponents.size() >= 1);
            CHECK(state.envelope->exponents[0].real() / w0 == Approx(row.exponent).epsilon(1e-7));
            CHECK(state.envelope->stable);
        }
}

TEST_CASE("a weak van der Pol oscillator follows the perturbation series", "[steady_state][ordinary]") {
    // Source: amplitude 2, relative third harmonic e/8, w = 1 − e²/16 + 17e⁴/3072, exponent −e (Andersen & Geer 1982).
    const double e = 1e-3, w0 = 1e4;
    const SteadyState state = steady_state_of(van_der_pol(e, w0));
    CHECK(2 * M_PI * state.frequency_hz / w0 - 1 == Approx(-e * e / 16).epsilon(1e-5));
    CHECK(state.amplitude_v == Approx(2).epsilon(1e-6));
    CHECK(state.harmonics[2].peak_v / state.amplitude_v == Approx(e / 8).epsilon(1e-5));
    CHECK(state.envelope->exponents[0].real() / w0 == Approx(-e).epsilon(1e-5));
    CHECK(std::none_of(state.harmonics.begin(), state.harmonics.end(),
                       [](const Harmonic& h) { return h.order % 2 == 0 && h.peak_v != 0; }));
}
