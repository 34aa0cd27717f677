#pragma once
/// Findings → Verdict.
#include "core/review/findings.hpp"

namespace sinewright {

/// Fills Findings::targets from the design's targets and what is known so far.
void compare_with_targets(const Design& design, Findings& findings);
/// Fills verdict, headline and main_reason.
void reach_verdict(Findings& findings);

/// "Start-up margin" for "startup_margin_db".
std::string result_title(const std::string& name);
/// "+0.28 dB", "1 001.3 Hz": a result's value as a person reads it.
std::string result_text(const std::string& name, double value);

} // namespace sinewright
