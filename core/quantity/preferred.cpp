#include "core/quantity/preferred.hpp"
#include <algorithm>
#include <array>
#include <charconv>
#include <cmath>
#include <string>

namespace sinewright {

namespace {

// E3 to E24 are historical tables; eight members are not the rounded powers.
constexpr std::array<double, 24> e24{1.0, 1.1, 1.2, 1.3, 1.5, 1.6, 1.8, 2.0, 2.2, 2.4, 2.7, 3.0,
                                     3.3, 3.6, 3.9, 4.3, 4.7, 5.1, 5.6, 6.2, 6.8, 7.5, 8.2, 9.1};

std::vector<double> every(int step) {
    std::vector<double> decade;
    for (std::size_t k = 0; k < e24.size(); k += static_cast<std::size_t>(step)) decade.push_back(e24[k]);
    return decade;
}

std::vector<double> rounded_powers(int members) {
    std::vector<double> decade;
    for (int k = 0; k < members; ++k)
        decade.push_back(std::round(100 * std::pow(10.0, static_cast<double>(k) / members)) / 100);
    if (members == 192) decade[185] = 9.20; // the standard's one exception to the rule, which gives 9.19
    return decade;
}

/// mantissa·10^exponent as the nearest double of the decimal number.
double decimal(double mantissa, int exponent) {
    const std::string text = std::to_string(std::lround(mantissa * 100)) + "e" + std::to_string(exponent - 2);
    double value = 0;
    std::from_chars(text.data(), text.data() + text.size(), value);
    return value;
}

/// No preferred number is near zero, below it, or at the ends of what a double holds.
bool has_neighbours(double value) { return value > 1e-290 && value < 1e290; }

/// Number of the member nearest to `value`, counted through all decades.
long nearest_index(double value, std::span<const double> decade) {
    const int exponent = static_cast<int>(std::floor(std::log10(value)));
    const long size = static_cast<long>(decade.size());
    const double mantissa = value / std::pow(10.0, exponent);
    long best = 0;
    double least = INFINITY;
    for (long k = -1; k <= size; ++k) {
        const double member = k < 0 ? decade.back() / 10 : k == size ? 10 : decade[static_cast<std::size_t>(k)];
        const double distance = std::abs(std::log(mantissa / member));
        if (distance < least) least = distance, best = k;
    }
    return exponent * size + best;
}

double member_at(long index, std::span<const double> decade) {
    const long size = static_cast<long>(decade.size());
    const long exponent = index >= 0 ? index / size : -((size - 1 - index) / size);
    return decimal(decade[static_cast<std::size_t>(index - exponent * size)], static_cast<int>(exponent));
}

} // namespace

std::span<const double> decade_of(Series series) {
    static const std::vector<double> e3 = every(8), e6 = every(4), e12 = every(2), e24_all = every(1),
                                     e48 = rounded_powers(48), e96 = rounded_powers(96), e192 = rounded_powers(192);
    switch (series) {
    case Series::e3:
        return e3;
    case Series::e6:
        return e6;
    case Series::e12:
        return e12;
    case Series::e24:
        return e24_all;
    case Series::e48:
        return e48;
    case Series::e96:
        return e96;
    case Series::e192:
        return e192;
    }
    return e24_all;
}

double nearest_preferred(double value, Series series) {
    if (!has_neighbours(value)) return value;
    const auto decade = decade_of(series);
    return member_at(nearest_index(value, decade), decade);
}

double step_preferred(double value, Series series, int steps) {
    if (!has_neighbours(value)) return value;
    const auto decade = decade_of(series);
    long index = nearest_index(value, decade);
    const double here = member_at(index, decade);
    // Between members the neighbour in the direction of travel is one step away.
    const bool between = std::abs(here / value - 1) > 1e-9;
    if (between && steps > 0 && here > value) index -= 1;
    if (between && steps < 0 && here < value) index += 1;
    return member_at(index + steps, decade);
}

Series series_for_tolerance(double tolerance) {
    if (!(tolerance > 0)) return Series::e24;
    if (tolerance > 0.2) return Series::e3;
    if (tolerance > 0.1) return Series::e6;
    if (tolerance > 0.05) return Series::e12;
    if (tolerance > 0.02) return Series::e24;
    if (tolerance > 0.01) return Series::e48;
    if (tolerance > 0.005) return Series::e96;
    return Series::e192;
}

} // namespace sinewright
