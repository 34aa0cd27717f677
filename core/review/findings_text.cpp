/// Findings, curves and part kinds as text for people.
#include "core/design/words.hpp"
#include "core/quantity/quantity.hpp"
#include "core/review/describe.hpp"
#include "core/review/verdict.hpp"
#include <cmath>
#include <fmt/format.h>
#include <numbers>

namespace sinewright {

namespace {

std::string fault_text(const Fault& fault) {
    return "  " + fault.sentence + (fault.remedy.empty() ? "" : " " + fault.remedy) + "\n";
}

std::string root_text(Complex s) {
    const std::string re = fmt::format("{:.6g}", s.real());
    return s.imag() == 0 ? re : re + fmt::format(" ± {:.6g}j", s.imag());
}

std::string operating_point_text(const OperatingPoint& rest, const std::vector<std::string>& nets) {
    std::string text = "Operating point (" + rest.method + ")\n";
    for (std::size_t k = 0; k < nets.size(); ++k)
        text += fmt::format("  {:<14}{}\n", nets[k], si_text(rest.x[static_cast<int>(k)], "V", 5));
    for (const Vector& other : rest.others) {
        text += "  another DC state:";
        for (std::size_t k = 0; k < nets.size(); ++k)
            text +=
                " " + nets[k] + " " + si_text(other[static_cast<int>(k)], "V", 4) + (k + 1 < nets.size() ? "," : "");
        text += "\n";
    }
    return text;
}

std::string small_signal_text(const SmallSignal& small) {
    std::string text = "Start\n  outcome       ";
    text += small.outcome == Outcome::starts    ? "starts\n"
            : small.outcome == Outcome::latches ? "latches\n"
                                                : "decays\n";
    text += "  frequency     " +
            (small.frequency_hz ? si_text(*small.frequency_hz, "Hz", 7) : "– (" + small.frequency_reason + ")") + "\n";
    if (small.growth_per_s) text += fmt::format("  growth        {:.6g} 1/s", *small.growth_per_s);
    if (small.growth_per_cycle) text += fmt::format(", {:.4g} % a cycle", 100 * *small.growth_per_cycle);
    text += "\n  natural frequencies, rad/s\n";
    for (const Complex s : small.natural_frequencies)
        if (s.imag() >= 0) text += "    " + root_text(s) + "\n";
    return text;
}

std::string loop_text(const LoopFinding& loop) {
    std::string text = "Loop gain at " + loop.cut.part + " " + loop.cut.terminal +
                       (loop.cut_chosen ? " (" + loop.cut_reason + ")" : "") + "\n";
    if (loop.barkhausen)
        text += fmt::format("  Barkhausen point {}, gain {:.6g}, start-up margin {:+.4f} dB (phase {})\n",
                            si_text(loop.barkhausen->frequency_hz, "Hz", 7), loop.barkhausen->gain,
                            loop.barkhausen->startup_margin_db, loop.barkhausen->falls ? "falls" : "rises");
    else
        text += "  no Barkhausen point: " + loop.barkhausen_reason + "\n";
    for (const Crossing& c : loop.crossings)
        text += fmt::format("  arg L = 0 at {}, gain {:.6g}, phase {}\n", si_text(c.frequency_hz, "Hz", 7), c.gain,
                            c.falls ? "falls" : "rises");
    if (loop.encirclements) text += fmt::format("  encirclements of +1: {}\n", *loop.encirclements);
    if (!loop.encirclement_note.empty()) text += "  " + loop.encirclement_note + "\n";
    if (!loop.sweep_note.empty()) text += "  " + loop.sweep_note + "\n";
    return text;
}

std::string target_text(const TargetFinding& target) {
    const std::string limits = (target.min ? "from " + result_text(target.name, *target.min) + " " : "") +
                               (target.max ? "to " + result_text(target.name, *target.max) : "");
    const std::string value = target.value ? result_text(target.name, *target.value) : "–";
    return fmt::format("  {} {:<18}{:>14}   {}{}\n",
                       !target.met   ? "?"
                       : *target.met ? "✓"
                                     : "▲",
                       result_title(target.name), value, limits, target.met ? "" : "  " + target.reason);
}

} // namespace

std::string findings_text(const Findings& findings, const Design& design) {
    std::string text = design.title.empty() ? "" : printable(design.title) + "\n\n";
    for (const Fault& fault : findings.faults) text += fault_text(fault);
    if (findings.operating_point) text += operating_point_text(*findings.operating_point, findings.nets);
    for (const Fault& fault : findings.operating_point.faults) text += fault_text(fault);
    if (findings.small_signal) text += small_signal_text(*findings.small_signal);
    for (const Fault& fault : findings.small_signal.faults) text += fault_text(fault);
    if (findings.loop) text += loop_text(*findings.loop);
    for (const Fault& fault : findings.loop.faults) text += fault_text(fault);
    if (!findings.targets.empty()) text += "Targets\n";
    for (const TargetFinding& target : findings.targets) text += target_text(target);
    return text + "\n" + findings.headline + ". " + findings.main_reason + "\n";
}

std::string curves_csv(const LoopCurve& curve) {
    std::string text = "frequency_hz,re,im,gain_db,phase_deg\n";
    for (std::size_t k = 0; k < curve.gain.size(); ++k) {
        const Complex l = curve.gain[k];
        const double gain_db = 20 * std::log10(std::abs(l));
        text +=
            fmt::format("{},{},{},{},{}\n", curve.frequency_hz[k], l.real(), l.imag(),
                        std::isfinite(gain_db) ? fmt::format("{}", gain_db) : "", std::arg(l) * 180 / std::numbers::pi);
    }
    return text;
}

std::string kinds_text() {
    std::string text;
    for (const PartKind* kind : part_kinds()) {
        text += fmt::format("{} ({})\n  terminals:", kind->name, kind->title);
        for (const TerminalInfo& t : kind->terminals) text += fmt::format(" {} ({})", t.name, t.meaning);
        text += "\n";
        for (const ParameterInfo& p : kind->parameters) {
            std::string fallback = p.required               ? "required"
                                   : std::isnan(p.fallback) ? "none"
                                                            : fmt::format("{}", p.fallback);
            if (!p.choices.empty()) fallback = fmt::format("{}", fmt::join(p.choices, " | "));
            text += fmt::format("  {:<26}{:<8}{:<16}{}\n", p.name, p.unit, fallback, p.help);
        }
    }
    return text;
}

} // namespace sinewright
