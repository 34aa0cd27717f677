#pragma once
/// Values in and out: IEC 60062 letter codes and SI prefixes, both ways, with an exact round trip.
#include "core/result.hpp"
#include <optional>
#include <string>
#include <string_view>

namespace sinewright {

/// Reads a physical value given as letter code ("4k7", "R47", "10n", "2M2", "1µ0") or as a plain number with an SI
/// prefix and optional unit ("4.7 kΩ", "10 nF", "1%", "50ppm", "1e-8", "0.5").
///
/// @param unit  the SI unit wanted ("Ω", "F", "H", "V", "Hz", "1/K", "" for a pure number, …): decides what a bare
///              letter means (M is mega, m is milli; both k and K are kilo) and which written unit is accepted.
/// @return the value in SI base units: the double nearest to the decimal number written.
/// @error FaultKind::bad_quantity, with the text found ("`4k7x`: …") and an example of what is wanted.
/// Source: IEC 60062:2016 (letter codes); SI prefixes f p n µ u m k K M G T.
/// Use: double r_ohm = *parse_quantity("4k7", "Ω");
Result<double> parse_quantity(std::string_view text, std::string_view unit);

/// A value with the tolerance its code names.
struct ComponentCode {
    double value = 0;                ///< SI base units
    std::optional<double> tolerance; ///< ± ratio (0.05); nothing when the code names none
};

/// Reads a component's marking: a quantity, or a letter code with a tolerance letter behind it: "4K7J" is 4.7 kΩ ± 5 %,
/// "10nK" 10 nF ± 10 %, "3p3C" 3.3 pF ± 0.25 pF. What reads as a plain quantity has no tolerance letter: "10K" is 10
/// kΩ, "4n7F" names the unit.
/// @error bad_quantity as parse_quantity, and for the unsymmetric tolerances Q, T, S, Z.
/// Source: IEC 60062:2016; letters other than B to M from memory.
Result<ComponentCode> parse_component_code(std::string_view text, std::string_view unit);

/// The IEC 60062 letter code of a value: 4700 Ω → "4k7", 1e-8 F → "10n", 0.47 Ω → "R47", 2.2e6 Ω → "2M2".
/// Shortest digits that read back to the same double. Units without a letter code get number + SI prefix:
/// 3e6 Hz → "3M", 1001.3 Hz → "1.0013k"; pure numbers, dB, °C and K the number alone; 1/K ppm: "50ppm".
/// Postcondition: parse_quantity(letter_code(v, u), u) == v for every finite v.
std::string letter_code(double value, std::string_view unit);

/// For reading, not for files: "4.7 kΩ", "−46.2 dB", "1 001.3 Hz": rounded to `digits` significant digits, true minus,
/// thin space (U+2009) between thousands, SI prefix with a space before the unit; sizes no prefix reaches as
/// "1·10⁻¹⁸ A".
std::string si_text(double value, std::string_view unit, int digits = 4);

/// A number without prefix for reading: `decimals` after the point, true minus, thin space between thousands.
std::string plain_text(double value, int decimals);

} // namespace sinewright
