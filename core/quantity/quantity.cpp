#include "core/quantity/quantity.hpp"
#include "core/quantity/prefixes.hpp"
#include <algorithm>
#include <cctype>
#include <charconv>
#include <cmath>
#include <cstdlib>
#include <optional>

namespace sinewright {

namespace {

bool is_digit(char c) { return c >= '0' && c <= '9'; }

/// Ways to write a unit, or a factor and a unit, beside the unit itself.
struct Spelling {
    std::string_view unit, written;
    int exponent;
};
constexpr std::array<Spelling, 20> spellings{
    {{"Ω", "\u2126", 0}, // the ohm sign
     {"Ω", "R", 0},          {"Ω", "ohm", 0},    {"Ω", "ohms", 0},     {"Ω", "Ohm", 0},      {"V/√Hz", "V/rtHz", 0},
     {"A/√Hz", "A/rtHz", 0}, {"V/s", "V/µs", 6}, {"V/s", "V/μs", 6},   {"V/s", "V/us", 6},   {"", "%", -2},
     {"", "‰", -3},          {"", "ppm", -6},    {"1/K", "/K", 0},     {"1/K", "1/°C", 0},   {"1/K", "%", -2},
     {"1/K", "%/K", -2},     {"1/K", "ppm", -6}, {"1/K", "ppm/K", -6}, {"1/K", "ppm/°C", -6}}};

/// The power of ten that comes with a written unit; nothing when it is not this unit.
std::optional<int> unit_exponent(std::string_view text, std::string_view unit) {
    if (text == unit) return 0;
    for (const Spelling& spelling : spellings)
        if (spelling.unit == unit && spelling.written == text) return spelling.exponent;
    return std::nullopt;
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

/// Text fit for a message: short, whole characters only, control characters as "?".
std::string shown(std::string_view text, std::size_t most) {
    std::size_t end = std::min(text.size(), most);
    while (end > 0 && end < text.size() && (static_cast<unsigned char>(text[end]) & 0xc0) == 0x80) --end;
    std::string result(text.substr(0, end));
    for (char& c : result)
        if (static_cast<unsigned char>(c) < 0x20 || c == 0x7f) c = '?';
    return end < text.size() ? result + "…" : result;
}

Fault bad(std::string_view text, std::string_view unit, std::string_view why) {
    const std::string example = unit == "Ω"     ? "4k7, 470R or 4.7 kΩ"
                                : unit == "F"   ? "10n, 4p7 or 10 nF"
                                : unit == "H"   ? "1m5 or 1.5 mH"
                                : unit == "1/K" ? "50ppm or 5e-5"
                                : unit.empty()  ? "0.5 or 1%"
                                                : "1.5 or 1.5 " + std::string(unit);
    return {FaultKind::bad_quantity, "", "`" + shown(text, 40) + "`: " + std::string(why) + ".",
            "Write it like " + example + "."};
}

/// Digits with at most one decimal point and an optional exponent, as far as they reach.
struct Number {
    std::string digits;     ///< without the point
    long long decimals = 0; ///< how many of the digits stand behind the point
    long long exponent = 0; ///< written with e
    bool negative = false, point = false, has_exponent = false;
};

void take_exponent(std::string_view& text, Number& number) {
    constexpr long long beyond_any_double = 1'000'000'000; // more than digits could make up for
    const bool has_sign = text.size() > 1 && (text[1] == '+' || text[1] == '-');
    std::size_t end = has_sign ? 2 : 1;
    const std::size_t from = end;
    for (; end < text.size() && is_digit(text[end]); ++end)
        number.exponent = std::min(number.exponent * 10 + (text[end] - '0'), beyond_any_double);
    if (end == from) return; // a letter e, no exponent
    if (text[1] == '-') number.exponent = -number.exponent;
    number.has_exponent = true;
    text.remove_prefix(end);
}

/// Takes sign, digits, point and exponent off the front of `text`; there may be none.
Number take_number(std::string_view& text) {
    constexpr std::string_view true_minus = "−";
    Number number;
    if (text.starts_with(true_minus))
        number.negative = true, text.remove_prefix(true_minus.size());
    else if (text.starts_with("-") || text.starts_with("+"))
        number.negative = text[0] == '-', text.remove_prefix(1);
    for (; !text.empty() && (is_digit(text[0]) || (text[0] == '.' && !number.point)); text.remove_prefix(1)) {
        if (text[0] == '.')
            number.point = true;
        else
            number.digits += text[0], number.decimals += number.point;
    }
    if (!number.digits.empty() && (text.starts_with('e') || text.starts_with('E'))) take_exponent(text, number);
    return number;
}

/// The double nearest to the decimal number digits·10^(exponent − decimals + power); nothing when it is too large.
/// The point is moved in the text, not by multiplying, so nothing is rounded twice.
std::optional<double> nearest_double(const Number& number, int power) {
    const std::string text = number.digits + "e" + std::to_string(number.exponent - number.decimals + power);
    double value = 0;
    if (std::from_chars(text.data(), text.data() + text.size(), value).ec == std::errc::result_out_of_range)
        value = std::strtod(text.c_str(), nullptr); // tells too small, which is zero, from too large
    if (!std::isfinite(value)) return std::nullopt;
    return number.negative ? -value : value;
}

/// The power of ten a code letter stands for: a prefix, the unit's letter, or L for milliohms.
std::optional<int> letter_exponent(std::string_view letter, std::string_view unit) {
    if (unit == "Ω" && letter == "L") return -3;
    if (!letter.empty() && (letter == unit_letter(unit) || (unit == "Ω" && letter == "r"))) return 0;
    for (const Prefix& prefix : prefixes)
        if (prefix.text == letter) return prefix.exponent;
    return std::nullopt;
}

/// "k7", "R", "n15" behind the leading digits: the letter stands for the decimal point. A unit may follow.
std::optional<int> take_letter_code(std::string_view text, std::string_view unit, Number& number) {
    if (number.point || number.has_exponent) return std::nullopt;
    const auto first = std::find_if(text.begin(), text.end(), is_digit);
    const auto last = std::find_if_not(first, text.end(), is_digit);
    const std::string_view letter(text.begin(), first), fraction(first, last);
    const std::string_view behind = trimmed(std::string_view(last, text.end()));
    const auto power = letter_exponent(letter, unit);
    if (!power || !(behind.empty() || (!unit.empty() && unit_exponent(behind, unit) == 0))) return std::nullopt;
    if (number.digits.empty() && fraction.empty()) return std::nullopt;
    number.digits += fraction;
    number.decimals += static_cast<long long>(fraction.size());
    return power;
}

/// The power of ten of what stands behind the number; nothing when it is neither code, prefix nor unit.
std::optional<int> take_scale(std::string_view text, std::string_view unit, Number& number) {
    if (text.empty()) return 0;
    if (const auto power = take_letter_code(text, unit, number)) return power;
    text = trimmed(text);
    if (const auto power = unit_exponent(text, unit)) return power;
    for (const Prefix& prefix : prefixes) {
        if (!text.starts_with(prefix.text)) continue;
        const std::string_view rest = trimmed(text.substr(prefix.text.size()));
        if (rest.empty() || unit_exponent(rest, unit) == 0) return prefix.exponent;
    }
    return std::nullopt;
}

bool is_infinite_or_nan(std::string_view text) {
    std::string lower(text.substr(0, 10));
    for (char& c : lower) c = static_cast<char>(std::tolower(static_cast<unsigned char>(c)));
    return lower == "inf" || lower == "infinity" || lower == "nan" || text == "∞";
}

struct ToleranceLetter {
    char letter;
    double ratio, below_10_pf; ///< ±; the second in pF, 0 where the letter has no such meaning
};
/// Source: IEC 60062:2016, symmetric tolerances.
constexpr std::array<ToleranceLetter, 14> tolerance_letters{{{'E', 0.005e-2, 0},
                                                             {'L', 0.01e-2, 0},
                                                             {'P', 0.02e-2, 0},
                                                             {'W', 0.05e-2, 0},
                                                             {'B', 0.1e-2, 0.1},
                                                             {'C', 0.25e-2, 0.25},
                                                             {'D', 0.5e-2, 0.5},
                                                             {'F', 1e-2, 1},
                                                             {'G', 2e-2, 2},
                                                             {'H', 3e-2, 0},
                                                             {'J', 5e-2, 0},
                                                             {'K', 10e-2, 0},
                                                             {'M', 20e-2, 0},
                                                             {'N', 30e-2, 0}}};

} // namespace

Result<double> parse_quantity(std::string_view text, std::string_view unit) {
    std::string_view rest = trimmed(text);
    if (rest.empty()) return bad(text, unit, "nothing is written here");
    Number number = take_number(rest);
    if (is_infinite_or_nan(rest)) return bad(text, unit, "only finite numbers are allowed");
    const auto power = take_scale(rest, unit, number);
    if (number.digits.empty()) return bad(text, unit, "this is no number");
    if (!power && rest.starts_with(',')) return bad(text, unit, "the decimal mark is a point, not a comma");
    if (!power)
        return bad(text, unit,
                   "`" + shown(trimmed(rest), 12) + "` behind the number is neither a prefix nor " +
                       (unit.empty() ? "%" : "the unit " + std::string(unit)));
    const auto value = nearest_double(number, *power);
    if (!value) return bad(text, unit, "this number is too large");
    return *value;
}

Result<ComponentCode> parse_component_code(std::string_view text, std::string_view unit) {
    const auto plain = parse_quantity(text, unit);
    if (plain) return ComponentCode{*plain, std::nullopt};
    const std::string_view code = trimmed(text);
    if (code.size() < 3 || unit_letter(unit).empty()) return plain.faults();
    const std::string_view value_code = code.substr(0, code.size() - 1);
    const bool has_letter = std::any_of(value_code.begin(), value_code.end(),
                                        [](char c) { return !is_digit(c) && c != '.' && c != '-' && c != '+'; });
    const auto value = parse_quantity(value_code, unit);
    if (!has_letter || !value) return plain.faults();
    if (std::string_view("QTSZ").find(code.back()) != std::string_view::npos)
        return bad(text, unit, "an unsymmetric tolerance can't be kept");
    for (const ToleranceLetter& known : tolerance_letters) {
        if (known.letter != code.back()) continue;
        const bool in_picofarads = unit == "F" && *value > 0 && *value < 10e-12 && known.below_10_pf > 0;
        return ComponentCode{*value, in_picofarads ? known.below_10_pf * 1e-12 / *value : known.ratio};
    }
    return plain.faults();
}

} // namespace sinewright
