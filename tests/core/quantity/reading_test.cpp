#include "core/quantity/quantity.hpp"
#include <catch2/catch.hpp>
#include <cmath>
#include <limits>

using namespace sinewright;

namespace {

struct Written {
    std::string_view text, unit;
    double value;
};

void check_all(std::initializer_list<Written> rows) {
    for (const Written& row : rows) {
        CAPTURE(row.text, row.unit);
        const auto read = parse_quantity(row.text, row.unit);
        REQUIRE(read);
        CHECK(*read == row.value); // to the last bit: both are the double nearest to the decimal number
    }
}

} // namespace

TEST_CASE("resistor codes of IEC 60062 are read: the letter stands for point and multiplier", "[quantity][ordinary]") {
    // Source: IEC 60062:2016, resistance.
    check_all({{"R10", "Ω", 0.1},
               {"R47", "Ω", 0.47},
               {"R332", "Ω", 0.332},
               {"1R0", "Ω", 1},
               {"3R32", "Ω", 3.32},
               {"10R", "Ω", 10},
               {"332R", "Ω", 332},
               {"1K0", "Ω", 1e3},
               {"3K32", "Ω", 3.32e3},
               {"4K7", "Ω", 4.7e3},
               {"10K", "Ω", 10e3},
               {"332K", "Ω", 332e3},
               {"1M0", "Ω", 1e6},
               {"10M", "Ω", 10e6},
               {"1G0", "Ω", 1e9},
               {"1T0", "Ω", 1e12},
               {"4L7", "Ω", 0.0047},
               {"10L", "Ω", 0.010},
               {"2M2", "Ω", 2.2e6}});
}

TEST_CASE("capacitor codes of IEC 60062 are read, with u for µ", "[quantity][ordinary]") {
    // Source: IEC 60062:2016, capacitance.
    check_all({{"p10", "F", 0.1e-12},  {"p33", "F", 0.33e-12}, {"1p0", "F", 1e-12},    {"4p7", "F", 4.7e-12},
               {"150p", "F", 150e-12}, {"n15", "F", 150e-12},  {"n332", "F", 332e-12}, {"1n0", "F", 1e-9},
               {"3n3", "F", 3.3e-9},   {"10n", "F", 10e-9},    {"100n", "F", 100e-9},  {"µ10", "F", 100e-9},
               {"µ332", "F", 332e-9},  {"1µ0", "F", 1e-6},     {"4µ7", "F", 4.7e-6},   {"1m0", "F", 1e-3},
               {"4u7", "F", 4.7e-6},   {"u10", "F", 100e-9},   {"2F2", "F", 2.2},      {"4\u03bc7", "F", 4.7e-6}});
}

TEST_CASE("inductors, frequencies and other quantities take prefixes, with or without the unit",
          "[quantity][ordinary]") {
    // Source: SI Brochure, 9th edition, prefixes; common practice for the codes of inductors.
    check_all(
        {{"1m5H", "H", 1.5e-3},     {"10m", "H", 10e-3},         {"100u", "H", 100e-6},      {"1.5 mH", "H", 1.5e-3},
         {"4.7 kΩ", "Ω", 4.7e3},    {"4.7kohm", "Ω", 4.7e3},     {"4.7k\u2126", "Ω", 4.7e3}, {"4k7Ω", "Ω", 4.7e3},
         {"10 nF", "F", 10e-9},     {"10\u00a0nF", "F", 10e-9},  {"4n7F", "F", 4.7e-9},      {"3M", "Hz", 3e6},
         {"10 MHz", "Hz", 10e6},    {"1 kHz", "Hz", 1e3},        {"700mV", "V", 0.7},        {"13 V/µs", "V/s", 13e6},
         {"5n", "V/√Hz", 5e-9},     {"5 nV/√Hz", "V/√Hz", 5e-9}, {"80n", "A", 80e-9},        {"20 ms", "s", 20e-3},
         {"-46.2 dB", "dB", -46.2}, {"−46.2 dB", "dB", -46.2},   {"25 °C", "°C", 25},        {"3900 K", "K", 3900}});
}

TEST_CASE("plain numbers are read as the double nearest to what is written", "[quantity][ordinary]") {
    check_all({{"1e-8", "F", 1e-8},
               {"1E3", "Ω", 1e3},
               {"1e+3", "Ω", 1e3},
               {"0.5", "", 0.5},
               {".5", "", 0.5},
               {"5.", "", 5},
               {"+5", "", 5},
               {"-5", "V", -5},
               {"  7 ", "Ω", 7},
               {"104", "F", 104},
               {"0.1", "", 0.1},
               {"4.35k", "Ω", 4350},
               {"1.005k", "Ω", 1005},
               {"0", "Ω", 0},
               {"00012", "Ω", 12}});
}

TEST_CASE("percent and ppm are read for tolerances and temperature coefficients", "[quantity][ordinary]") {
    check_all({{"1%", "", 0.01},
               {"1 %", "", 0.01},
               {"0.5%", "", 0.005},
               {"2‰", "", 0.002},
               {"50ppm", "1/K", 50e-6},
               {"50 ppm", "1/K", 50e-6},
               {"50 ppm/K", "1/K", 50e-6},
               {"-200ppm/°C", "1/K", -200e-6},
               {"0.4%/K", "1/K", 0.004},
               {"5e-5", "1/K", 5e-5},
               {"100ppm", "", 100e-6}});
}

TEST_CASE("case carries meaning for M and m only; k and K are both kilo", "[quantity][tricky]") {
    check_all({{"1M", "Ω", 1e6},
               {"1m", "Ω", 1e-3},
               {"1m", "F", 1e-3},
               {"1M", "Hz", 1e6},
               {"1k", "Ω", 1e3},
               {"1K", "Ω", 1e3},
               {"2M2", "H", 2.2e6},
               {"2m2", "H", 2.2e-3}});
    CHECK(*parse_quantity("1M", "Ω") != *parse_quantity("1m", "Ω"));
}

TEST_CASE("a moved point loses no bit, at either end of the range", "[quantity][tricky]") {
    // 0.1 is not 1e-1·(rounded); multiplying 4.7 by 1e-9 gives another double than the decimal number 4.7e-9.
    volatile double written = 4.7, nano = 1e-9;
    const double multiplied = written * nano;
    CHECK(*parse_quantity("4.7n", "F") == 4.7e-9);
    CHECK(multiplied != 4.7e-9); // control: the naive way is wrong here
    CHECK(*parse_quantity("5e-324", "Ω") == std::numeric_limits<double>::denorm_min());
    CHECK(*parse_quantity("1.7976931348623157e308", "Ω") == std::numeric_limits<double>::max());
    CHECK(*parse_quantity("1e-999", "Ω") == 0);
    const std::string zeros(5000, '0');
    CHECK(*parse_quantity("0." + zeros + "1e5001", "Ω") == 1);
    CHECK(*parse_quantity("1" + zeros + "e-5000", "Ω") == 1);
    CHECK(*parse_quantity("0e99999999999999999999", "Ω") == 0);
}

TEST_CASE("what is no quantity is refused with the text found and an example", "[quantity][errors]") {
    const std::string exactly_between = std::string("4k7") + std::string(36, '\xc3');
    for (const auto& [text, unit] :
         std::initializer_list<std::pair<std::string_view, std::string_view>>{{"4k7x", "Ω"},
                                                                              {"", "Ω"},
                                                                              {"   ", "Ω"},
                                                                              {"k", "Ω"},
                                                                              {"abc", "Ω"},
                                                                              {"4k7k", "Ω"},
                                                                              {"1.2.3", "Ω"},
                                                                              {"4.7k7", "Ω"},
                                                                              {"1e5k7", "Ω"},
                                                                              {"4k7F", "Ω"},
                                                                              {"10nH", "F"},
                                                                              {"10 V", "Ω"},
                                                                              {"4,7k", "Ω"},
                                                                              {"0x10", "Ω"},
                                                                              {"--5", "Ω"},
                                                                              {"5-", "Ω"},
                                                                              {"nan", "Ω"},
                                                                              {"inf", "Ω"},
                                                                              {"-inf", "Ω"},
                                                                              {"NaN", "Ω"},
                                                                              {"Infinity", "Ω"},
                                                                              {"1e999", "Ω"},
                                                                              {"-1e999", "Ω"},
                                                                              {"1e308k", "Ω"},
                                                                              {"9e999999999999999999", "Ω"},
                                                                              {"1e", "Ω"},
                                                                              {"1e+-5", "Ω"},
                                                                              {".", "Ω"},
                                                                              {"R", "Ω"},
                                                                              {"%", ""},
                                                                              {"1%", "Ω"},
                                                                              {"5k%", ""},
                                                                              {"10P", "F"},
                                                                              {"1 0", "Ω"},
                                                                              {"4k 7", "Ω"},
                                                                              {"4k7\n9", "Ω"},
                                                                              {"\xff\xfe", "Ω"},
                                                                              {exactly_between, "Ω"}}) {
        CAPTURE(text, unit);
        const auto read = parse_quantity(text, unit);
        REQUIRE_FALSE(read);
        CHECK(read.fault().kind == FaultKind::bad_quantity);
        CHECK(read.fault().sentence.front() == '`');
        CHECK(read.fault().sentence.find('\n') == std::string::npos);
        CHECK_FALSE(read.fault().remedy.empty());
    }
    CHECK(parse_quantity("4k7x", "Ω").fault().sentence.starts_with("`4k7x`: "));
    CHECK(parse_quantity("4k7x", "Ω").fault().remedy == "Write it like 4k7, 470R or 4.7 kΩ.");
    CHECK(parse_quantity("4,7k", "Ω").fault().sentence.find("point, not a comma") != std::string::npos);
    CHECK(parse_quantity("1e999", "Ω").fault().sentence.find("too large") != std::string::npos);
    CHECK(parse_quantity("inf", "Ω").fault().sentence.find("finite") != std::string::npos);
}

TEST_CASE("a long wrong text is shortened in the message without cutting a character", "[quantity][errors]") {
    std::string text;
    while (text.size() < 300) text += "µ";
    const std::string sentence = parse_quantity("x" + text, "F").fault().sentence;
    CHECK(sentence.size() < 200);
    CHECK(sentence.find("µ…") != std::string::npos); // the last character before the dots is whole
}

TEST_CASE("a tolerance letter behind the code is told apart from a prefix", "[quantity][component code]") {
    struct Row {
        std::string_view text, unit;
        double value, tolerance; // below zero: none
    };
    // Source: IEC 60062:2016, tolerance letters; "10K is 10 kΩ, never 10 ± 10 %".
    for (const Row& row : std::initializer_list<Row>{
             {"4K7J", "Ω", 4700, 0.05},   {"10nK", "F", 10e-9, 0.1},   {"10K", "Ω", 10e3, -1},
             {"10KK", "Ω", 10e3, 0.1},    {"10M", "Ω", 10e6, -1},      {"R47M", "Ω", 0.47, 0.2},
             {"47RG", "Ω", 47, 0.02},     {"1M0F", "Ω", 1e6, 0.01},    {"332RB", "Ω", 332, 0.001},
             {"4K7E", "Ω", 4700, 5e-5},   {"4K7L", "Ω", 4700, 1e-4},   {"4K7P", "Ω", 4700, 2e-4},
             {"4K7W", "Ω", 4700, 5e-4},   {"4K7C", "Ω", 4700, 0.0025}, {"4K7D", "Ω", 4700, 0.005},
             {"4K7H", "Ω", 4700, 0.03},   {"4K7N", "Ω", 4700, 0.3},    {"100nJ", "F", 100e-9, 0.05},
             {"4n7F", "F", 4.7e-9, -1},   {"1m5H", "H", 1.5e-3, -1},   {"1m5K", "H", 1.5e-3, 0.1},
             {"4k7", "Ω", 4700, -1},      {"10 nF", "F", 10e-9, -1},   {"10pJ", "F", 10e-12, 0.05},
             {"10pD", "F", 10e-12, 0.005}}) {
        CAPTURE(row.text);
        const auto read = parse_component_code(row.text, row.unit);
        REQUIRE(read);
        CHECK(read->value == row.value);
        REQUIRE(read->tolerance.has_value() == (row.tolerance >= 0));
        if (row.tolerance >= 0) CHECK(*read->tolerance == Approx(row.tolerance).epsilon(1e-15));
    }
    // Below 10 pF the letter counts picofarads: C is ± 0.25 pF.
    CHECK(*parse_component_code("3p3C", "F")->tolerance == Approx(0.25 / 3.3).epsilon(1e-14));
    CHECK(*parse_component_code("1p0B", "F")->tolerance == Approx(0.1).epsilon(1e-14));
    CHECK(*parse_component_code("3p3J", "F")->tolerance == Approx(0.05).epsilon(1e-14));
}

TEST_CASE("markings that are no code with a tolerance are refused", "[quantity][component code][errors]") {
    for (const std::string_view text : {"104J", "4K7Z", "4K7Q", "4K7X", "J", "4K7JJ", "", "KJ"}) {
        CAPTURE(text);
        const auto read = parse_component_code(text, "Ω");
        REQUIRE_FALSE(read);
        CHECK(read.fault().kind == FaultKind::bad_quantity);
    }
    CHECK(parse_component_code("4K7Z", "Ω").fault().sentence.find("unsymmetric") != std::string::npos);
    CHECK_FALSE(parse_component_code("10mJ", "V")); // only components carry such marks
}
