#include "core/quantity/quantity.hpp"
#include <algorithm>
#include <array>
#include <charconv>
#include <cmath>
#include <cstdlib>

namespace sinewright {

namespace {

struct Prefix {
    std::string_view text;
    int exponent;
};
/// SI prefixes accepted in front of a unit, or alone. Both k and K are kilo; u stands for µ; two code points are µ.
constexpr std::array<Prefix, 14> prefixes{{{"f", -15},
                                           {"p", -12},
                                           {"n", -9},
                                           {"µ", -6},
                                           {"μ", -6},
                                           {"u", -6},
                                           {"m", -3},
                                           {"k", 3},
                                           {"K", 3},
                                           {"M", 6},
                                           {"G", 9},
                                           {"T", 12},
                                           {"", 0},
                                           {"P", 15}}};

/// Letters that stand for the decimal point of a code; R, F and H stand for a factor of one.
std::string_view unit_letter(std::string_view unit) {
    if (unit == "Ω") return "R";
    if (unit == "F") return "F";
    if (unit == "H") return "H";
    return "";
}

/// Other ways to write a unit.
bool is_unit(std::string_view text, std::string_view unit) {
    if (text == unit) return true;
    if (unit == "Ω") return text == "Ω" /* U+2126 */ || text == "R" || text == "ohm" || text == "Ohm" || text == "ohms";
    if (unit == "1/K") return text == "/K" || text == "1/°C";
    return false;
}

std::string_view trimmed(std::string_view text) {
    constexpr std::array<std::string_view, 5> blanks{" ", "\t", "\u00a0", "\u2009", "\u202f"};
    for (bool again = true; again;) {
        again = false;
        for (const std::string_view blank : blanks) {
            if (text.starts_with(blank)) text.remove_prefix(blank.size()), again = true;
            if (text.ends_with(blank)) text.remove_suffix(blank.size()), again = true;
        }
    }
    return text;
}

Fault bad(std::string_view text, std::string_view unit, std::string_view why) {
    const std::string example = unit == "Ω"    ? "4k7, 470R or 4.7 kΩ"
                                : unit == "F"  ? "10n, 4p7 or 10 nF"
                                : unit == "H"  ? "1m5 or 1.5 mH"
                                : unit.empty() ? "0.5 or 1%"
                                               : "3M or 3 M" + std::string(unit);
    std::string shown(text.substr(0, 40));
    if (text.size() > 40) shown += "…";
    return {FaultKind::bad_quantity, "", "`" + shown + "`: " + std::string(why) + ".",
            "Write it like " + example + "."};
}

/// Digits with at most one decimal point and an optional exponent, as far as they reach.
struct Number {
    std::string digits; ///< without the point
    int decimals = 0;   ///< how many of the digits stand behind the point
    int exponent = 0;   ///< written with e
    bool negative = false, point = false, has_exponent = false;
};

/// Takes a number off the front of `text`. False when there is none.
bool take_number(std::string_view& text, Number& number) {
    if (text.starts_with("−"))
        number.negative = true, text.remove_prefix(std::string_view("−").size());
    else if (text.starts_with("-") || text.starts_with("+"))
        number.negative = text[0] == '-', text.remove_prefix(1);
    const auto is_digit = [](char c) { return c >= '0' && c <= '9'; };
    while (!text.empty() && (is_digit(text[0]) || (text[0] == '.' && !number.point))) {
        if (text[0] == '.')
            number.point = true;
        else
            number.digits += text[0], number.decimals += number.point;
        text.remove_prefix(1);
    }
    if (!number.digits.empty() && text.size() > 1 && (text[0] == 'e' || text[0] == 'E')) {
        const std::size_t from = text[1] == '+' ? 2 : 1; // from_chars takes no plus sign
        int exponent = 0;
        const auto end = std::from_chars(text.data() + from, text.data() + text.size(), exponent);
        if (end.ec == std::errc{}) {
            number.exponent = exponent, number.has_exponent = true;
            text.remove_prefix(static_cast<std::size_t>(end.ptr - text.data()));
        }
    }
    return !number.digits.empty();
}

/// The double nearest to the decimal number digits·10^(exponent − decimals): the point is moved in the text, not by
/// multiplying, so nothing is rounded twice.
bool to_double(const Number& number, int power, double& value) {
    const std::string text = number.digits + "e" + std::to_string(number.exponent - number.decimals + power);
    const auto end = std::from_chars(text.data(), text.data() + text.size(), value);
    if (end.ec == std::errc::result_out_of_range) {
        value = std::strtod(text.c_str(), nullptr); // too small is zero or subnormal, too large is infinite
        if (!std::isfinite(value)) return false;
    }
    if (number.negative) value = -value;
    return true;
}

const Prefix* prefix_of(std::string_view text) {
    const auto found = std::find_if(prefixes.begin(), prefixes.end(), [&](const Prefix& p) { return p.text == text; });
    return found == prefixes.end() ? nullptr : &*found;
}

/// Percent and ppm, for pure numbers and temperature coefficients.
bool is_ratio(std::string_view text, int& power) {
    if (text == "%") return power = -2, true;
    if (text == "‰") return power = -3, true;
    if (text == "ppm" || text == "ppm/K") return power = -6, true;
    return false;
}

/// What follows the number: a letter that is the decimal point with digits behind it, or a prefix and a unit.
bool take_scale(std::string_view text, std::string_view unit, Number& number, int& power) {
    power = 0;
    if (text.empty()) return true;
    if ((unit.empty() || unit == "1/K") && is_ratio(text, power)) return true;
    // Letter code: the letter, then only digits, and no point before.
    const std::string_view written = text;
    // A unit may stand behind a code too: 1m5H, 4k7Ω.
    if (!unit.empty() && text.size() > unit.size() && text.ends_with(unit)) {
        const char before = text[text.size() - unit.size() - 1];
        if (before >= '0' && before <= '9') text.remove_suffix(unit.size());
    }
    if (!number.point && !number.has_exponent) {
        const std::size_t tail =
            std::find_if(text.begin(), text.end(), [](char c) { return c >= '0' && c <= '9'; }) - text.begin();
        const std::string_view letter = text.substr(0, tail), fraction = text.substr(tail);
        const bool digits_only =
            std::all_of(fraction.begin(), fraction.end(), [](char c) { return c >= '0' && c <= '9'; });
        const Prefix* prefix = prefix_of(letter);
        const bool one = !unit.empty() && (letter == unit_letter(unit) || (unit == "Ω" && letter == "r"));
        const bool milliohm = unit == "Ω" && letter == "L";
        if (!fraction.empty() && digits_only && !letter.empty() && (prefix || one || milliohm)) {
            number.digits += fraction;
            number.decimals += static_cast<int>(fraction.size());
            power = prefix ? prefix->exponent : milliohm ? -3 : 0;
            return true;
        }
        if (fraction.empty() && (one || milliohm)) {
            power = milliohm ? -3 : 0;
            return !number.digits.empty();
        }
    }
    text = trimmed(written);
    if (!unit.empty() && is_unit(text, unit)) return true;
    for (const Prefix& prefix : prefixes) {
        if (prefix.text.empty() || !text.starts_with(prefix.text)) continue;
        const std::string_view rest = trimmed(text.substr(prefix.text.size()));
        if (rest.empty() || (!unit.empty() && is_unit(rest, unit))) return power = prefix.exponent, true;
    }
    return false;
}

/// Shortest digits that read back as the same double, as digits and the power of ten of the first.
void shortest(double value, std::string& digits, int& exponent) {
    std::array<char, 40> text{}; // atoi below needs the zero behind the number
    const auto end = std::to_chars(text.data(), text.data() + text.size(), value, std::chars_format::scientific);
    const std::string_view written(text.data(), static_cast<std::size_t>(end.ptr - text.data()));
    const std::size_t e = written.find('e');
    digits.clear();
    for (const char c : written.substr(0, e))
        if (c >= '0' && c <= '9') digits += c;
    const char* from = text.data() + e + 1 + (text[e + 1] == '+');
    std::from_chars(from, end.ptr, exponent);
    while (digits.size() > 1 && digits.back() == '0') digits.pop_back();
}

std::string with_thin_spaces(std::string digits) {
    for (int at = static_cast<int>(digits.size()) - 3; at > 0; at -= 3)
        digits.insert(static_cast<std::size_t>(at), "\u2009");
    return digits;
}

} // namespace

Result<double> parse_quantity(std::string_view text, std::string_view unit) {
    const std::string_view whole = trimmed(text);
    std::string_view rest = whole;
    if (rest.empty()) return bad(text, unit, "nothing is written here");
    Number number;
    take_number(rest, number);
    int power = 0;
    if (rest == "inf" || rest == "nan" || rest == "Infinity" || rest == "NaN")
        return bad(text, unit, "only finite numbers are allowed");
    if (number.digits.empty() && rest.empty()) return bad(text, unit, "this is no number");
    if (!take_scale(rest, unit, number, power) || number.digits.empty())
        return bad(text, unit,
                   number.digits.empty()
                       ? "this is no number"
                       : "`" + std::string(rest.substr(0, 12)) + "` behind the number is neither a prefix nor " +
                             (unit.empty() ? "%" : "the unit " + std::string(unit)));
    double value = 0;
    if (!to_double(number, power, value)) return bad(text, unit, "this number is too large");
    return value;
}

std::string letter_code(double value, std::string_view unit) {
    if (value == 0) return std::signbit(value) ? "-0" : "0";
    std::string digits;
    int exponent = 0;
    shortest(std::abs(value), digits, exponent);
    const std::string sign = value < 0 ? "-" : "";
    const std::string_view one = unit_letter(unit);
    // Values that no letter reaches in a readable way are written with a power of ten.
    const int lowest = one.empty() || unit == "F" || unit == "H" ? -12 : -1, highest = 14;
    if (exponent < lowest || exponent > highest) {
        std::array<char, 40> text;
        const auto end = std::to_chars(text.data(), text.data() + text.size(), value);
        return {text.data(), end.ptr};
    }
    int power = static_cast<int>(std::floor(exponent / 3.0)) * 3;
    if (unit == "Ω" && power < 0) power = 0;
    const Prefix* prefix = nullptr;
    for (const Prefix& candidate : prefixes)
        if (candidate.exponent == power && (!prefix || candidate.text == "µ")) prefix = prefix ? prefix : &candidate;
    const std::string letter(power == 0 ? one : prefix->text);
    const int whole = exponent - power + 1; // digits before the point
    if (whole <= 0)
        return sign + (letter.empty() ? "0." : letter) + std::string(static_cast<std::size_t>(-whole), '0') + digits;
    if (static_cast<int>(digits.size()) <= whole)
        return sign + digits + std::string(static_cast<std::size_t>(whole) - digits.size(), '0') + letter;
    const std::string point = letter.empty() ? "." : letter;
    return sign + digits.substr(0, static_cast<std::size_t>(whole)) + point +
           digits.substr(static_cast<std::size_t>(whole));
}

std::string plain_text(double value, int decimals) {
    if (std::isnan(value)) return "–";
    if (std::isinf(value)) return value > 0 ? "∞" : "−∞";
    std::array<char, 400> text;
    const auto end =
        std::to_chars(text.data(), text.data() + text.size(), std::abs(value), std::chars_format::fixed, decimals);
    const std::string_view written(text.data(), static_cast<std::size_t>(end.ptr - text.data()));
    const std::size_t point = std::min(written.find('.'), written.size());
    const bool zero = written.find_first_not_of("0.") == std::string_view::npos;
    return (value < 0 && !zero ? "−" : "") + with_thin_spaces(std::string(written.substr(0, point))) +
           std::string(written.substr(point));
}

std::string si_text(double value, std::string_view unit, int digits) {
    const std::string tail = unit.empty() ? "" : " " + std::string(unit);
    if (!std::isfinite(value)) return plain_text(value, 0) + tail;
    if (value == 0) return "0" + tail;
    std::array<char, 40> rounded_text;
    const auto end = std::to_chars(rounded_text.data(), rounded_text.data() + rounded_text.size(), value,
                                   std::chars_format::scientific, std::max(digits - 1, 0));
    double rounded = value;
    std::from_chars(rounded_text.data(), end.ptr, rounded);
    const int exponent = static_cast<int>(std::floor(std::log10(std::abs(rounded)) + 1e-12));
    const bool scales = !unit.empty() && unit != "dB" && unit != "%" && unit != "°" &&
                        unit.find('/') == std::string_view::npos && unit.find('\xc2') == std::string_view::npos;
    int power = static_cast<int>(std::floor(exponent / 3.0)) * 3;
    if (!scales || power < -15 || power > 12) power = 0;
    if (power == 3 && exponent == 3 && (unit == "Hz" || unit == "V"))
        power = 0; // 1 001.3 Hz reads better than 1.0013 kHz
    std::string prefix;
    for (const Prefix& candidate : prefixes)
        if (candidate.exponent == power && prefix.empty()) prefix = candidate.text;
    int decimals = std::clamp(digits - 1 - (exponent - power), 0, 17);
    std::string number = plain_text(rounded * std::pow(10.0, -power), decimals);
    if (number.find('.') != std::string::npos) {
        while (number.back() == '0') number.pop_back();
        if (number.back() == '.') number.pop_back();
    }
    return number + (unit.empty() ? "" : " " + prefix + std::string(unit));
}

} // namespace sinewright
