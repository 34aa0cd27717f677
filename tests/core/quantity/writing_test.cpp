#include "core/quantity/quantity.hpp"
#include <bit>
#include <catch2/catch.hpp>
#include <cmath>
#include <limits>
#include <random>

using namespace sinewright;

namespace {

constexpr std::string_view units[] = {"Ω",  "F",  "H", "V",   "A",   "Hz",   "s",     "",   "1/K",
                                      "dB", "°C", "K", "W/K", "V/s", "A/V²", "V/√Hz", "1/V"};

void check_round_trip(double value, std::string_view unit) {
    const std::string code = letter_code(value, unit);
    const auto read = parse_quantity(code, unit);
    if (read && std::bit_cast<std::uint64_t>(*read) == std::bit_cast<std::uint64_t>(value)) return;
    CAPTURE(value, unit, code);
    REQUIRE(read);
    CHECK(std::bit_cast<std::uint64_t>(*read) == std::bit_cast<std::uint64_t>(value));
}

} // namespace

TEST_CASE("values are written in the letter code of IEC 60062", "[quantity][ordinary]") {
    // Source: IEC 60062:2016.
    CHECK(letter_code(4700, "Ω") == "4k7");
    CHECK(letter_code(10e3, "Ω") == "10k");
    CHECK(letter_code(0.47, "Ω") == "R47");
    CHECK(letter_code(0.332, "Ω") == "R332");
    CHECK(letter_code(470, "Ω") == "470R");
    CHECK(letter_code(3.32, "Ω") == "3R32");
    CHECK(letter_code(2.2e6, "Ω") == "2M2");
    CHECK(letter_code(100e9, "Ω") == "100G");
    CHECK(letter_code(1e-8, "F") == "10n");
    CHECK(letter_code(0.33e-12, "F") == "p33");
    CHECK(letter_code(4.7e-12, "F") == "4p7");
    CHECK(letter_code(4.7e-6, "F") == "4µ7");
    CHECK(letter_code(1e-3, "F") == "1m");
    CHECK(letter_code(2.2, "F") == "2F2");
    CHECK(letter_code(1.5e-3, "H") == "1m5");
    CHECK(letter_code(-4700, "Ω") == "-4k7");
    CHECK(letter_code(15.915e-9, "F") == "15n915");
}

TEST_CASE("units without a letter code are written as number and prefix, pure numbers plainly",
          "[quantity][ordinary]") {
    CHECK(letter_code(3e6, "Hz") == "3M");
    CHECK(letter_code(1001.3, "Hz") == "1.0013k");
    CHECK(letter_code(0.7, "V") == "700m");
    CHECK(letter_code(13, "V") == "13");
    CHECK(letter_code(0.01, "") == "0.01");
    CHECK(letter_code(0.5, "") == "0.5");
    CHECK(letter_code(50e-6, "1/K") == "50ppm");
    CHECK(letter_code(-200e-6, "1/K") == "-200ppm");
    CHECK(letter_code(3900, "K") == "3900");
    CHECK(letter_code(-80, "dB") == "-80");
    CHECK(letter_code(0, "Ω") == "0");
}

TEST_CASE("every double reads back from its code to the same bits", "[quantity][round trip]") {
    std::mt19937_64 random(20160);
    std::uniform_real_distribution<double> magnitude(-18, 16), mantissa(1, 10);
    for (int k = 0; k < 6000; ++k) {
        // All bit patterns; the usual sizes; short decimal numbers as people type them.
        double any = std::bit_cast<double>(random());
        if (!std::isfinite(any)) any = 1;
        const double usual = mantissa(random) * std::pow(10, magnitude(random));
        const double typed = std::round(mantissa(random) * 100) / 100 * std::pow(10, std::floor(magnitude(random)));
        for (const std::string_view unit : units) {
            check_round_trip(any, unit);
            check_round_trip(usual, unit);
            check_round_trip(-typed, unit);
        }
    }
    for (const std::string_view unit : units)
        for (const double edge :
             {0.0, -0.0, std::numeric_limits<double>::denorm_min(), std::numeric_limits<double>::min(),
              std::numeric_limits<double>::max(), std::numeric_limits<double>::lowest(), 1e-18, 9.999999999999999e14,
              1e15, 0.09999999999999999, 999.9999999999999, 1e-13, 1e-15})
            check_round_trip(edge, unit);
}

TEST_CASE("a code is no longer than its digits, one letter and the zeros between", "[quantity][round trip]") {
    // Two significant digits never need more than four characters from a milliohm to a teraohm ("R47", "470k").
    for (int exponent = -1; exponent <= 14; ++exponent)
        for (int mantissa = 10; mantissa < 100; ++mantissa) {
            const double ohm = std::stod(std::to_string(mantissa) + "e" + std::to_string(exponent - 1));
            CAPTURE(ohm);
            CHECK(letter_code(ohm, "Ω").size() <= 4);
        }
}

TEST_CASE("texts for reading carry a true minus, thin spaces and a prefix in front of the unit",
          "[quantity][ordinary]") {
    CHECK(si_text(4700, "Ω") == "4.7 kΩ");
    CHECK(si_text(-46.2, "dB") == "−46.2 dB");
    CHECK(si_text(1001.3, "Hz", 5) == "1\u2009001.3 Hz");
    CHECK(si_text(1001.3, "Hz", 4) == "1\u2009001 Hz");
    CHECK(si_text(10013, "Hz", 5) == "10.013 kHz");
    CHECK(si_text(15.9154e-9, "F") == "15.92 nF");
    CHECK(si_text(9999.9, "Ω", 4) == "10 kΩ"); // rounding carries into the next prefix's digits
    CHECK(si_text(999999, "Ω", 4) == "1 MΩ");
    CHECK(si_text(0, "V") == "0 V");
    CHECK(si_text(0.25, "") == "0.25");
    CHECK(si_text(50e-6, "1/K") == "0.00005 1/K");
    CHECK(plain_text(-46.24, 1) == "−46.2");
    CHECK(plain_text(1234567.891, 2) == "1\u2009234\u2009567.89");
    CHECK(plain_text(-0.0001, 2) == "0.00"); // no minus before a zero
    CHECK(plain_text(std::nan(""), 2) == "–");
}

TEST_CASE("a size that no prefix reaches is shown with a power of ten, never as zero", "[quantity][tricky]") {
    CHECK(si_text(1e-18, "A") == "1·10⁻¹⁸ A"); // saturation current of a red LED
    CHECK(si_text(5.2e-14, "W/K⁴") == "5.2·10⁻¹⁴ W/K⁴");
    CHECK(si_text(-2.5e20, "Ω") == "−2.5·10²⁰ Ω");
}
