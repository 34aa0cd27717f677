#pragma once
/// Preferred numbers, series E3 to E192.
#include <span>
#include <vector>

namespace sinewright {

/// The series of IEC 60063:2015. E3–E24 are a table in the standard, never a formula.
enum class Series { e3 = 3, e6 = 6, e12 = 12, e24 = 24, e48 = 48, e96 = 96, e192 = 192 };

/// One decade of a series, 1.0 ≤ value < 10, rising. Source: IEC 60063:2015.
std::span<const double> decade_of(Series series);

/// The member nearest to `value` in ratio (log distance); exact decimal (4.7e3 is 4700). A value that is not above
/// zero, not finite or beyond 1e±290 has no member near it and comes back as it is, here and from step_preferred.
double nearest_preferred(double value, Series series);

/// The next member above (steps > 0) or below (steps < 0) `value`; a value between members counts as a step to its
/// neighbour.
double step_preferred(double value, Series series, int steps);

/// The series that goes with a tolerance (0.2 → E6 … 0.005 and closer → E192); 0 or unknown → E24.
Series series_for_tolerance(double tolerance);

} // namespace sinewright
