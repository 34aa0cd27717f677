#include "core/quantity/preferred.hpp"
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <limits>
#include <random>
#include <set>

using namespace sinewright;

namespace {

std::vector<double> members(Series series) {
    const auto decade = decade_of(series);
    return {decade.begin(), decade.end()};
}

constexpr Series all_series[] = {Series::e3,  Series::e6,  Series::e12, Series::e24,
                                 Series::e48, Series::e96, Series::e192};

} // namespace

TEST_CASE("E3 to E24 are the tables of IEC 60063", "[preferred][ordinary]") {
    // Source: IEC 60063:2015.
    CHECK(members(Series::e3) == std::vector{1.0, 2.2, 4.7});
    CHECK(members(Series::e6) == std::vector{1.0, 1.5, 2.2, 3.3, 4.7, 6.8});
    CHECK(members(Series::e12) == std::vector{1.0, 1.2, 1.5, 1.8, 2.2, 2.7, 3.3, 3.9, 4.7, 5.6, 6.8, 8.2});
    CHECK(members(Series::e24) == std::vector{1.0, 1.1, 1.2, 1.3, 1.5, 1.6, 1.8, 2.0, 2.2, 2.4, 2.7, 3.0,
                                              3.3, 3.6, 3.9, 4.3, 4.7, 5.1, 5.6, 6.2, 6.8, 7.5, 8.2, 9.1});
}

TEST_CASE("E48, E96 and E192 are the tables of IEC 60063, each within the next", "[preferred][ordinary]") {
    // Source: IEC 60063:2015.
    const std::set<double> e48{1.00, 1.05, 1.10, 1.15, 1.21, 1.27, 1.33, 1.40, 1.47, 1.54, 1.62, 1.69,
                               1.78, 1.87, 1.96, 2.05, 2.15, 2.26, 2.37, 2.49, 2.61, 2.74, 2.87, 3.01,
                               3.16, 3.32, 3.48, 3.65, 3.83, 4.02, 4.22, 4.42, 4.64, 4.87, 5.11, 5.36,
                               5.62, 5.90, 6.19, 6.49, 6.81, 7.15, 7.50, 7.87, 8.25, 8.66, 9.09, 9.53};
    std::set<double> e96{1.02, 1.07, 1.13, 1.18, 1.24, 1.30, 1.37, 1.43, 1.50, 1.58, 1.65, 1.74,
                         1.82, 1.91, 2.00, 2.10, 2.21, 2.32, 2.43, 2.55, 2.67, 2.80, 2.94, 3.09,
                         3.24, 3.40, 3.57, 3.74, 3.92, 4.12, 4.32, 4.53, 4.75, 4.99, 5.23, 5.49,
                         5.76, 6.04, 6.34, 6.65, 6.98, 7.32, 7.68, 8.06, 8.45, 8.87, 9.31, 9.76};
    std::set<double> e192{1.01, 1.04, 1.06, 1.09, 1.11, 1.14, 1.17, 1.20, 1.23, 1.26, 1.29, 1.32, 1.35, 1.38,
                          1.42, 1.45, 1.49, 1.52, 1.56, 1.60, 1.64, 1.67, 1.72, 1.76, 1.80, 1.84, 1.89, 1.93,
                          1.98, 2.03, 2.08, 2.13, 2.18, 2.23, 2.29, 2.34, 2.40, 2.46, 2.52, 2.58, 2.64, 2.71,
                          2.77, 2.84, 2.91, 2.98, 3.05, 3.12, 3.20, 3.28, 3.36, 3.44, 3.52, 3.61, 3.70, 3.79,
                          3.88, 3.97, 4.07, 4.17, 4.27, 4.37, 4.48, 4.59, 4.70, 4.81, 4.93, 5.05, 5.17, 5.30,
                          5.42, 5.56, 5.69, 5.83, 5.97, 6.12, 6.26, 6.42, 6.57, 6.73, 6.90, 7.06, 7.23, 7.41,
                          7.59, 7.77, 7.96, 8.16, 8.35, 8.56, 8.76, 8.98, 9.20, 9.42, 9.65, 9.88};
    e96.insert(e48.begin(), e48.end());
    e192.insert(e96.begin(), e96.end());
    CHECK(members(Series::e48) == std::vector<double>(e48.begin(), e48.end()));
    CHECK(members(Series::e96) == std::vector<double>(e96.begin(), e96.end()));
    CHECK(members(Series::e192) == std::vector<double>(e192.begin(), e192.end()));
}

TEST_CASE("the one member of E192 that is not the rounded power is 9.20", "[preferred][tricky]") {
    const auto decade = members(Series::e192);
    for (int k = 0; k < 192; ++k) {
        const double rounded = std::round(100 * std::pow(10.0, k / 192.0)) / 100;
        CAPTURE(k);
        CHECK((decade[static_cast<std::size_t>(k)] == rounded) == (k != 185));
    }
    CHECK(decade[185] == 9.20);
}

TEST_CASE("thirteen members of E24 are not in E192, and eight are not rounded powers", "[preferred][tricky]") {
    std::vector<double> missing, unlike_formula;
    const auto fine = members(Series::e192), e24 = members(Series::e24);
    for (std::size_t k = 0; k < e24.size(); ++k) {
        if (std::find(fine.begin(), fine.end(), e24[k]) == fine.end()) missing.push_back(e24[k]);
        if (e24[k] != std::round(10 * std::pow(10.0, static_cast<double>(k) / 24)) / 10)
            unlike_formula.push_back(e24[k]);
    }
    // Source: counted from IEC 60063:2015.
    CHECK(missing == std::vector{2.2, 2.7, 3.0, 3.3, 3.6, 3.9, 4.3, 5.1, 5.6, 6.2, 6.8, 8.2, 9.1});
    CHECK(unlike_formula == std::vector{2.7, 3.0, 3.3, 3.6, 3.9, 4.3, 4.7, 8.2});
}

TEST_CASE("the nearest preferred value is nearest in ratio and an exact decimal number", "[preferred][ordinary]") {
    CHECK(nearest_preferred(4800, Series::e12) == 4700);
    CHECK(nearest_preferred(4.71e-9, Series::e24) == 4.7e-9);
    CHECK(nearest_preferred(9600, Series::e12) == 10e3); // across the decade
    CHECK(nearest_preferred(0.97, Series::e24) == 1);    // 0.97 is 6.4 % above 0.91 and 3 % below 1
    CHECK(nearest_preferred(15915, Series::e96) == 15.8e3);
    // In ratio, not in difference: √(1·2.2) = 1.483 parts 1 from 2.2, where the middle would be 1.6.
    CHECK(nearest_preferred(1.5, Series::e3) == 2.2);
    CHECK(nearest_preferred(1.47, Series::e3) == 1);
}

TEST_CASE("no member is nearer than the one chosen, and members stay", "[preferred][tricky]") {
    std::mt19937_64 random(60063);
    std::uniform_real_distribution<double> exponent(-13, 13);
    for (int k = 0; k < 2000; ++k) {
        const double value = std::pow(10.0, exponent(random));
        for (const Series series : all_series) {
            const double chosen = nearest_preferred(value, series);
            CAPTURE(value, chosen, static_cast<int>(series));
            REQUIRE(nearest_preferred(chosen, series) == chosen);
            const double distance = std::abs(std::log(chosen / value));
            for (const int step : {-1, 1})
                REQUIRE(std::abs(std::log(step_preferred(chosen, series, step) / value)) >= distance * (1 - 1e-9));
        }
    }
}

TEST_CASE("steps walk the series up and down and come back", "[preferred][ordinary]") {
    CHECK(step_preferred(4700, Series::e24, 1) == 5100);
    CHECK(step_preferred(4700, Series::e24, -1) == 4300);
    CHECK(step_preferred(4700, Series::e3, 1) == 10e3);
    CHECK(step_preferred(1000, Series::e12, -1) == 820);
    CHECK(step_preferred(4800, Series::e24, 1) == 5100); // between members: to the neighbour
    CHECK(step_preferred(4800, Series::e24, -1) == 4700);
    CHECK(step_preferred(5000, Series::e24, -1) == 4700);
    CHECK(step_preferred(5000, Series::e24, 2) == 5600);
    for (const Series series : all_series) {
        const int size = static_cast<int>(decade_of(series).size());
        CHECK(step_preferred(1e-9, series, 3 * size) == 1e-6); // a decade is as many steps as the series has members
        double value = 1e-12;
        for (int k = 0; k < 2 * size; ++k) value = step_preferred(value, series, 1);
        for (int k = 0; k < 2 * size; ++k) value = step_preferred(value, series, -1);
        CHECK(value == 1e-12);
    }
}

TEST_CASE("a value that has no preferred neighbour comes back as it is", "[preferred][errors]") {
    const double infinity = std::numeric_limits<double>::infinity();
    for (const double value : {0.0, -4700.0, infinity, -infinity, std::numeric_limits<double>::denorm_min()}) {
        CAPTURE(value);
        CHECK(nearest_preferred(value, Series::e24) == value);
        CHECK(step_preferred(value, Series::e24, 1) == value);
    }
    CHECK(std::isnan(nearest_preferred(std::nan(""), Series::e24)));
}

TEST_CASE("each tolerance has its series", "[preferred][ordinary]") {
    // Source: IEC 60063:2015: E3 above 20 %, E6 20 %, E12 10 %, E24 5 %, E48 2 %, E96 1 %, E192 0.5 % and closer.
    CHECK(series_for_tolerance(0.3) == Series::e3);
    CHECK(series_for_tolerance(0.2) == Series::e6);
    CHECK(series_for_tolerance(0.1) == Series::e12);
    CHECK(series_for_tolerance(0.05) == Series::e24);
    CHECK(series_for_tolerance(0.02) == Series::e48);
    CHECK(series_for_tolerance(0.01) == Series::e96);
    CHECK(series_for_tolerance(0.005) == Series::e192);
    CHECK(series_for_tolerance(0.001) == Series::e192);
    CHECK(series_for_tolerance(0) == Series::e24);
    CHECK(series_for_tolerance(std::nan("")) == Series::e24);
}
