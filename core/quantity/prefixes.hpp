#pragma once
/// SI prefixes and the letters of IEC 60062, shared by reading and writing of quantities.
#include <array>
#include <string_view>

namespace sinewright {

struct Prefix {
    std::string_view text;
    int exponent;
};

/// In front of a unit, or alone; the first of an exponent is the one written. Both k and K are kilo; u and both code
/// points of the Greek letter are micro.
inline constexpr std::array<Prefix, 12> prefixes{{{"f", -15},
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
                                                  {"T", 12}}};

/// The prefix written for a power of ten; empty for 0 and for powers without one.
constexpr std::string_view prefix_text(int exponent) {
    for (const Prefix& prefix : prefixes)
        if (prefix.exponent == exponent) return prefix.text;
    return "";
}

/// The letter that stands for the decimal point at a factor of one; empty for units without a letter code.
constexpr std::string_view unit_letter(std::string_view unit) {
    if (unit == "Ω") return "R";
    if (unit == "F") return "F";
    if (unit == "H") return "H";
    return "";
}

} // namespace sinewright
