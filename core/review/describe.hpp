#pragma once
/// Text forms of things other than findings: loop-gain curves and the list of part kinds.
#include "core/analysis/loop_gain.hpp"
#include <string>

namespace sinewright {

/// JSON object "sinewright-curves": arrays frequency_hz, re, im, gain_db, phase_deg of equal length.
std::string curves_json(const LoopCurve& curve, const Cut& cut);
/// CSV with the header frequency_hz,re,im,gain_db,phase_deg.
std::string curves_csv(const LoopCurve& curve);

/// JSON object "sinewright-kinds": every part kind with terminals and parameters (names, units, defaults, help).
std::string kinds_json();
/// The same for people.
std::string kinds_text();

} // namespace sinewright
