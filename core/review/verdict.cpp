/// Findings → Verdict: targets against values, the headline and its one reason.
#include "core/review/verdict.hpp"
#include "core/quantity/quantity.hpp"
#include <algorithm>
#include <cctype>
#include <cmath>

namespace sinewright {

namespace {

struct Known {
    std::optional<double> value;
    std::string reason; ///< why there is none
};

Known value_of_result(const Findings& findings, const std::string& name) {
    const auto small = [&](auto member) -> Known {
        if (!findings.small_signal) return {std::nullopt, "The small-signal analysis gave no result."};
        return {member(*findings.small_signal), findings.small_signal->frequency_reason};
    };
    if (name == "startup_margin_db") {
        if (!findings.loop)
            return {std::nullopt, findings.loop.faults.empty() ? "The loop gain gave no result."
                                                               : findings.loop.faults.front().sentence};
        if (!findings.loop->barkhausen) return {std::nullopt, findings.loop->barkhausen_reason};
        return {findings.loop->barkhausen->startup_margin_db, ""};
    }
    if (name == "frequency_hz") return small([](const SmallSignal& s) { return s.frequency_hz; });
    if (name == "growth_per_s") return small([](const SmallSignal& s) { return s.growth_per_s; });
    if (name == "growth_per_cycle") return small([](const SmallSignal& s) { return s.growth_per_cycle; });
    return {std::nullopt, "This program does not compute it yet."};
}

std::string margin_words(const Findings& findings) {
    if (!findings.loop || !findings.loop->barkhausen) return "";
    const double margin_db = findings.loop->barkhausen->startup_margin_db;
    return margin_db >= 0 ? "the loop makes up " + plain_text(margin_db, 2) + " dB more than it loses"
                          : "the loop makes up " + plain_text(-margin_db, 2) + " dB less than it loses";
}

/// What an outcome says in one sentence.
std::string outcome_sentence(const Findings& findings) {
    const SmallSignal& small = *findings.small_signal;
    const std::string margin = margin_words(findings);
    switch (small.outcome) {
    case Outcome::latches:
        return "Positive feedback wins at DC: the output runs to one side and stays there.";
    case Outcome::decays:
        return margin.empty() || findings.loop->barkhausen->startup_margin_db > 0
                   ? "Decays: every natural frequency dies away."
                   : "Decays: " + margin + ".";
    case Outcome::starts:
        break;
    }
    if (!small.frequency_hz) return "Starts, but overdriven: growth is faster than a cycle.";
    return "Starts: it grows " + plain_text(100 * *small.growth_per_cycle, *small.growth_per_cycle < 0.1 ? 2 : 1) +
           " % a cycle" + (margin.empty() ? "." : ", " + margin + ".");
}

std::string first_missed(const Findings& findings) {
    for (const TargetFinding& target : findings.targets) {
        if (target.met != false || !target.value) continue;
        const std::string name = result_title(target.name);
        const bool low = target.min && *target.value < *target.min;
        const double limit = low ? *target.min : *target.max;
        return name + " is " + result_text(target.name, *target.value) + ", " + (low ? "below " : "above ") +
               result_text(target.name, limit) + ".";
    }
    return "";
}

/// A design without targets meets when it starts: the outcome itself is the headline, "Starts" before the colon.
void judge_without_targets(Findings& findings) {
    findings.verdict = Verdict::meets;
    const std::string sentence = findings.main_reason;
    const auto colon = sentence.find(": ");
    findings.headline = sentence.substr(0, colon);
    findings.main_reason = sentence.substr(colon + 2);
    findings.main_reason[0] = static_cast<char>(std::toupper(static_cast<unsigned char>(findings.main_reason[0])));
}

} // namespace

std::string result_title(const std::string& name) {
    if (name == "startup_margin_db") return "Start-up margin";
    if (name == "frequency_hz") return "Frequency";
    if (name == "growth_per_s") return "Growth";
    if (name == "growth_per_cycle") return "Growth per cycle";
    if (name == "amplitude_v") return "Amplitude";
    if (name == "rms_v") return "Level";
    if (name == "thd_db" || name == "thd_ratio") return "THD";
    if (name == "settling_time_s") return "Settling to 1 %";
    if (name == "dc_v") return "DC at the output";
    if (name == "yield") return "Yield";
    return name;
}

std::string result_text(const std::string& name, double value) {
    if (name.ends_with("_db"))
        return (value > 0 && name == "startup_margin_db" ? "+" : "") + plain_text(value, std::abs(value) < 10 ? 2 : 1) +
               " dB";
    if (name == "growth_per_cycle" || name == "yield") return plain_text(100 * value, 1) + " %";
    if (name.ends_with("_hz")) return si_text(value, "Hz", 5);
    if (name.ends_with("_v")) return si_text(value, "V", 4);
    if (name.ends_with("_per_s")) return plain_text(value, std::abs(value) < 10 ? 2 : 0) + " 1/s";
    if (name.ends_with("_s")) return si_text(value, "s", 3);
    return si_text(value, "", 4);
}

void compare_with_targets(const Design& design, Findings& findings) {
    findings.targets.clear();
    for (const Target& target : design.targets) {
        TargetFinding found{target.name, {}, {}, {}, {}, {}};
        if (target.nominal && target.within) {
            const double reach = std::abs(target.nominal->si) * target.within->si;
            found.min = target.nominal->si - reach, found.max = target.nominal->si + reach;
        }
        if (target.min) found.min = target.min->si;
        if (target.max) found.max = target.max->si;
        const Known known = value_of_result(findings, target.name);
        found.value = known.value;
        if (known.value)
            found.met = (!found.min || *known.value >= *found.min) && (!found.max || *known.value <= *found.max);
        else
            found.reason = known.reason;
        findings.targets.push_back(std::move(found));
    }
}

void reach_verdict(Findings& findings) {
    const auto cannot_tell = [&](const std::string& why) {
        findings.verdict = Verdict::unknown;
        findings.headline = "Can't tell";
        findings.main_reason = why;
    };
    if (findings.cancelled) return cannot_tell("The check was stopped.");
    if (!findings.faults.empty()) return cannot_tell(findings.faults.front().sentence);
    if (!findings.small_signal) {
        const Faults& faults =
            findings.operating_point ? findings.small_signal.faults : findings.operating_point.faults;
        return cannot_tell(faults.empty() ? "Nothing was computed." : faults.front().sentence);
    }
    const bool starts = findings.small_signal->outcome == Outcome::starts;
    int missed = 0, unknown = 0;
    for (const TargetFinding& target : findings.targets) missed += target.met == false, unknown += !target.met;
    const int all = static_cast<int>(findings.targets.size());
    findings.main_reason = outcome_sentence(findings);
    if (!starts) {
        findings.verdict = Verdict::misses;
        findings.headline =
            findings.small_signal->outcome == Outcome::latches ? "Latches: does not oscillate" : "Does not start";
        return;
    }
    if (all == 0) return judge_without_targets(findings);
    if (missed > 0) {
        findings.verdict = Verdict::misses;
        findings.headline = "Misses " + std::to_string(missed) + " of " + std::to_string(all);
        if (const std::string why = first_missed(findings); !why.empty()) findings.main_reason = why;
    } else if (unknown > 0) {
        findings.verdict = Verdict::unknown;
        findings.headline = "Can't tell: " + std::to_string(unknown) + " of " + std::to_string(all) + " not known";
        const auto first = std::find_if(findings.targets.begin(), findings.targets.end(),
                                        [](const TargetFinding& target) { return !target.met; });
        findings.main_reason = result_title(first->name) + ": " + first->reason;
    } else {
        findings.verdict = Verdict::meets;
        findings.headline = all == 1 ? "Meets its target" : "Meets all " + std::to_string(all);
    }
}

int exit_status(const Findings& findings) {
    if (findings.cancelled) return 3;
    if (!findings.faults.empty()) return 2;
    if (!findings.operating_point || !findings.small_signal) return 2; // an unsolvable circuit
    const bool starts = findings.small_signal->outcome == Outcome::starts;
    return starts && findings.verdict == Verdict::meets ? 0 : 1;
}

} // namespace sinewright
