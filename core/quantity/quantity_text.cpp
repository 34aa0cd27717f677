#include "core/quantity/prefixes.hpp"
#include "core/quantity/quantity.hpp"
#include <algorithm>
#include <charconv>
#include <cmath>

namespace sinewright {

namespace {

/// A decimal number d.ddd·10^exponent.
struct Decimal {
    std::string digits; ///< without the point
    int exponent = 0;   ///< of the first digit
};

/// Of a positive finite value; `places` behind the first digit, or as few as read back to the same double (−1).
Decimal decimal_of(double value, int places) {
    std::array<char, 1200> text;
    char* const last = text.data() + text.size();
    const auto end = places < 0 ? std::to_chars(text.data(), last, value, std::chars_format::scientific)
                                : std::to_chars(text.data(), last, value, std::chars_format::scientific, places);
    Decimal decimal;
    const char* at = text.data();
    for (; *at != 'e'; ++at)
        if (*at != '.') decimal.digits += *at;
    at += at[1] == '+' ? 2 : 1; // from_chars takes no plus sign
    std::from_chars(at, end.ptr, decimal.exponent);
    while (decimal.digits.size() > 1 && decimal.digits.back() == '0') decimal.digits.pop_back();
    return decimal;
}

/// The digits with `point` set behind the place of 10^power, zeros filled in; no point when nothing stands behind it.
std::string with_point(const Decimal& decimal, int power, std::string_view point) {
    const int whole = decimal.exponent - power + 1; // digits in front of the point
    const int size = static_cast<int>(decimal.digits.size());
    if (whole <= 0)
        return "0" + std::string(point) + std::string(static_cast<std::size_t>(-whole), '0') + decimal.digits;
    if (size <= whole) return decimal.digits + std::string(static_cast<std::size_t>(whole - size), '0');
    std::string text = decimal.digits;
    return text.insert(static_cast<std::size_t>(whole), point);
}

std::string shortest_text(double value) {
    std::array<char, 40> text;
    return {text.data(), std::to_chars(text.data(), text.data() + text.size(), value).ptr};
}

int thousands_below(int exponent) { return static_cast<int>(std::floor(exponent / 3.0)) * 3; }

/// The letter in place of the point, IEC 60062: "4k7", "R47", "p10", "10n".
std::string with_letter(const Decimal& decimal, std::string_view unit) {
    const int lowest = unit == "Ω" ? 0 : -12; // the smallest multiplier with a letter in use
    const int power = std::max(thousands_below(decimal.exponent), lowest);
    const std::string letter(power == 0 ? unit_letter(unit) : prefix_text(power));
    std::string text = with_point(decimal, power, letter);
    if (text.starts_with("0" + letter)) return text.substr(1);
    return text.find(letter) == std::string::npos ? text + letter : text;
}

/// Units in which people read 0.001 rather than 1m.
bool takes_no_prefix(std::string_view unit) {
    return unit.empty() || unit == "dB" || unit == "°C" || unit == "K" || unit.starts_with("1/");
}

std::string with_thin_spaces(std::string digits) {
    for (int at = static_cast<int>(digits.size()) - 3; at > 0; at -= 3)
        digits.insert(static_cast<std::size_t>(at), "\u2009");
    return digits;
}

std::string superscript(int number) {
    constexpr std::array<std::string_view, 10> raised{"⁰", "¹", "²", "³", "⁴", "⁵", "⁶", "⁷", "⁸", "⁹"};
    std::string text = number < 0 ? "⁻" : "";
    for (const char c : std::to_string(std::abs(number))) text += raised[static_cast<std::size_t>(c - '0')];
    return text;
}

/// Thin spaces between the thousands in front of the point.
std::string grouped(const std::string& text) {
    const std::size_t point = std::min(text.find('.'), text.size());
    return with_thin_spaces(text.substr(0, point)) + text.substr(point);
}

/// The prefix's power of ten for reading; nothing when none fits and the number itself would be unreadable.
std::optional<int> reading_power(int exponent, std::string_view unit) {
    const bool scales = !takes_no_prefix(unit) && unit != "%" && unit != "°" &&
                        unit.find('/') == std::string_view::npos && unit.find("°") == std::string_view::npos;
    const int power = thousands_below(exponent);
    if (scales && power >= -15 && power <= 12)
        return exponent == 3 && (unit == "Hz" || unit == "V") ? 0 : power; // 1 001.3 Hz reads better than 1.0013 kHz
    constexpr int smallest = -5, largest = 14; // 0.00005 and 15 digits are still read at a glance
    if (exponent >= smallest && exponent <= largest) return 0;
    return std::nullopt;
}

} // namespace

std::string letter_code(double value, std::string_view unit) {
    if (value == 0 || !std::isfinite(value)) return shortest_text(value);
    const Decimal decimal = decimal_of(std::abs(value), -1);
    const std::string sign = value < 0 ? "-" : "";
    constexpr int highest = 14;
    // Values that no letter reaches in a readable way are written with a power of ten.
    if (!unit_letter(unit).empty()) {
        const int lowest = unit == "Ω" ? -1 : -13;
        if (decimal.exponent < lowest || decimal.exponent > highest) return shortest_text(value);
        return sign + with_letter(decimal, unit);
    }
    if (unit == "1/K" && decimal.exponent >= -9 && decimal.exponent <= -3)
        return sign + with_point(decimal, -6, ".") + "ppm";
    if (takes_no_prefix(unit) || decimal.exponent < -15 || decimal.exponent > highest) return shortest_text(value);
    const int power = thousands_below(decimal.exponent);
    return sign + with_point(decimal, power, ".") + std::string(prefix_text(power));
}

std::string plain_text(double value, int decimals) {
    if (std::isnan(value)) return "–";
    if (std::isinf(value)) return value > 0 ? "∞" : "−∞";
    std::array<char, 1500> text;
    const auto end = std::to_chars(text.data(), text.data() + text.size(), std::abs(value), std::chars_format::fixed,
                                   std::clamp(decimals, 0, 1000));
    const std::string written(text.data(), end.ptr);
    const bool zero = written.find_first_not_of("0.") == std::string::npos;
    return (value < 0 && !zero ? "−" : "") + grouped(written);
}

std::string si_text(double value, std::string_view unit, int digits) {
    const std::string sign = value < 0 ? "−" : "", tail = unit.empty() ? "" : " " + std::string(unit);
    if (!std::isfinite(value)) return plain_text(value, 0) + tail;
    if (value == 0) return "0" + tail;
    const Decimal decimal = decimal_of(std::abs(value), std::clamp(digits - 1, 0, 1000));
    const auto power = reading_power(decimal.exponent, unit);
    if (!power) return sign + with_point(decimal, decimal.exponent, ".") + "·10" + superscript(decimal.exponent) + tail;
    const std::string number = grouped(with_point(decimal, *power, "."));
    return sign + number + (unit.empty() ? "" : " " + std::string(prefix_text(*power)) + std::string(unit));
}

} // namespace sinewright
