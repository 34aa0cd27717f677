#pragma once
/// All results of one check of a design, as one plain value: what screen, report and batch program show.
#include "core/analysis/loop_gain.hpp"
#include "core/analysis/operating_point.hpp"
#include <functional>
#include <memory>

namespace sinewright {

struct TargetFinding {
    std::string name;
    std::optional<double> value;    ///< in the target's unit; nothing: not known
    std::optional<double> min, max; ///< nominal ± within, resolved to limits
    std::optional<bool> met;        ///< nothing: not known
    std::string reason;             ///< why the value is not known
};

enum class Verdict { meets, misses, unknown };

/// A stage of the check. A stage that failed has faults and no value; a stage not reached has neither.
template <class T> struct Stage {
    std::optional<T> value;
    Faults faults;
    explicit operator bool() const { return value.has_value(); }
    const T* operator->() const { return &*value; }
    const T& operator*() const { return *value; }
};

struct Findings {
    Faults faults;                 ///< drawing faults: nothing below could be computed
    std::vector<std::string> nets; ///< names of the net voltages in operating_point->x
    Stage<OperatingPoint> operating_point;
    Stage<SmallSignal> small_signal;
    Stage<LoopFinding> loop;
    std::shared_ptr<const LoopGain> loop_gain; ///< for curves; null when the loop stage failed
    std::vector<TargetFinding> targets;
    Verdict verdict = Verdict::unknown;
    std::string headline;    ///< "Meets all 6", "Does not start", "Latches: does not oscillate", "Can't tell: …"
    std::string main_reason; ///< one sentence
    bool cancelled = false;
};

/// Everything up to the verdict. Pure; cancellable between and inside stages.
/// `stage_done` (may be empty) is called after each stage with the findings so far.
Findings check(const Design& design, std::stop_token stop = {},
               const std::function<void(const Findings&)>& stage_done = {});

/// The contract's `check --json` object ("sinewright-findings", version 1), UTF-8, finite numbers only, unknown: null +
/// reason.
std::string findings_json(const Findings& findings, const Design& design);
/// The same for people.
std::string findings_text(const Findings& findings, const Design& design);

/// 0 done and every target met, 1 a target missed or no oscillation, 2 input can't be used, 3 limit or internal
/// failure.
int exit_status(const Findings& findings);

} // namespace sinewright
