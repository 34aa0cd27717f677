/// Design → Findings: every stage up to the verdict.
#include "core/design/file.hpp"
#include "core/review/verdict.hpp"
#include <algorithm>

namespace sinewright {

namespace {

std::vector<std::string> names_of(const Circuit& circuit) {
    std::vector<std::string> names;
    for (const Unknown& unknown : circuit.unknowns) names.push_back(unknown.name);
    return names;
}

void find_rest(const Circuit& circuit, std::stop_token stop, Findings& findings) {
    auto rest = find_operating_point(circuit, {}, stop);
    if (rest)
        findings.operating_point.value = std::move(*rest);
    else
        findings.operating_point.faults = rest.faults();
    findings.nets = circuit.nets;
}

void judge_small_signal(const Circuit& circuit, std::stop_token stop, Findings& findings) {
    OperatingPoint& rest = *findings.operating_point.value;
    auto roots = natural_frequencies(linearise(circuit, rest.x), names_of(circuit));
    if (!roots) {
        findings.small_signal.faults = roots.faults();
        return;
    }
    findings.small_signal.value = judge_start(std::move(*roots));
    if (findings.small_signal->outcome == Outcome::latches) rest.others = find_other_states(circuit, rest.x, {}, stop);
}

/// Nyquist's count against the natural frequencies; a disagreement is said, never hidden.
void count_both_ways(const LoopGain& loop, const SmallSignal& small, LoopFinding& found) {
    found.encirclements = count_encirclements(loop);
    found.opened_right_half_plane = loop.opened_right_half_plane();
    if (!found.encirclements) {
        found.encirclement_note =
            "The curve of the loop gain runs through +1 itself, so encirclements can't be counted.";
    } else if (!found.opened_right_half_plane) {
        found.encirclement_note =
            "The opened circuit has no characteristic polynomial of its own, so the count was not checked.";
    } else if (const int expected = small.right_half_plane - *found.opened_right_half_plane;
               expected != *found.encirclements) {
        found.encirclement_note = "The counts disagree: the curve encircles +1 " +
                                  std::to_string(*found.encirclements) + " times, the natural frequencies ask for " +
                                  std::to_string(expected) + ". Trust the growth rate.";
    }
}

/// The op-amp whose output lies on the cut's net: the usual reason why a loop gain has no end. Empty: none does.
std::string opamp_driving(const Design& design, const Cut& cut) {
    const auto net = design.find(cut.part)->net_at(cut.terminal);
    for (const Part& part : design.parts)
        if (part.kind == "opamp" && part.net_at("out") == net) return part.ref;
    return "";
}

void find_loop_gain(const Design& design, Findings& findings) {
    const Vector& x = findings.operating_point->x;
    LoopFinding found;
    if (design.cut) {
        found.cut = *design.cut;
        found.cut_reason = "Named in the file.";
    } else {
        const auto choice = choose_cut(design, x, *findings.small_signal);
        if (!choice) {
            findings.loop.faults = choice.faults();
            return;
        }
        found.cut = choice->cut, found.cut_chosen = true, found.cut_reason = choice->reason;
    }
    const auto opened = assemble_opened(design, found.cut);
    if (!opened) {
        findings.loop.faults = opened.faults();
        return;
    }
    auto loop = LoopGain::prepare(linearise(*opened, extend_to_opened(*opened, x)), opened->opened, opened->rest);
    if (!loop) {
        Fault fault = loop.fault();
        fault.where = found.cut.part + "." + found.cut.terminal;
        if (const std::string driver = opamp_driving(design, found.cut);
            fault.kind == FaultKind::no_loop_gain && !driver.empty())
            fault.sentence = "At this cut the loop gain has no end: all the gain is inside " + driver + ".";
        if (const auto better = choose_cut(design, x, *findings.small_signal))
            fault.remedy = "Cut at " + better->cut.part + " " + better->cut.terminal + " instead.";
        findings.loop.faults = {std::move(fault)};
        return;
    }
    found.crossings = find_crossings(*loop);
    found.barkhausen = governing_point(found.crossings, *findings.small_signal, found.barkhausen_reason);
    if (loop->falls_back_to_lu())
        found.sweep_note = "The loop gain was computed by solving the circuit at every frequency.";
    count_both_ways(*loop, *findings.small_signal, found);
    findings.loop_gain = std::make_shared<const LoopGain>(std::move(*loop));
    findings.loop.value = std::move(found);
}

} // namespace

Findings check(const Design& design, std::stop_token stop, const std::function<void(const Findings&)>& stage_done) {
    Findings findings;
    const auto finish = [&] {
        if (stop.stop_requested()) findings.cancelled = true;
        compare_with_targets(design, findings);
        reach_verdict(findings);
        return findings;
    };
    const auto done = [&] {
        if (stage_done) stage_done(findings);
        return stop.stop_requested();
    };
    findings.faults = validate(design);
    if (findings.faults.empty() && design.parts.empty())
        findings.faults.push_back(
            {FaultKind::missing_value, "parts", "The design has no parts.", "Drop an amplifier and a network."});
    if (!findings.faults.empty()) return finish();
    const auto circuit = assemble(design);
    if (!circuit) {
        findings.faults = circuit.faults();
        return finish();
    }
    find_rest(*circuit, stop, findings);
    if (done() || !findings.operating_point) return finish();
    judge_small_signal(*circuit, stop, findings);
    if (done() || !findings.small_signal) return finish();
    find_loop_gain(design, findings);
    done();
    return finish();
}

} // namespace sinewright
