/// A sensible cut for a design that names none.
#include "core/analysis/loop_gain.hpp"
#include <algorithm>

namespace sinewright {

namespace {

struct Candidate {
    Cut cut;
    std::string why;
};

/// Terminals that only sense come first: nothing loads the loop there, so the loop gain is the plain product round it.
std::vector<Candidate> candidates(const Design& design) {
    std::vector<Candidate> inputs, minus_inputs, others;
    const auto offer = [&](std::vector<Candidate>& list, const Part& part, const char* terminal, const char* why) {
        const auto net = part.net_at(terminal);
        if (net && *net != ground_net) list.push_back({{part.ref, terminal}, why});
    };
    for (const Part& part : design.parts) {
        if (part.kind == "opamp") {
            offer(inputs, part, "plus", "the non-inverting input draws next to no current");
            offer(minus_inputs, part, "minus", "the inverting input draws next to no current");
        } else if (part.kind == "limiter") {
            offer(inputs, part, "in", "the stage's input draws no current");
        } else if (part.kind == "jfet") {
            offer(minus_inputs, part, "g", "the gate draws no current");
        } else if (part.kind == "resistor" || part.kind == "capacitor" || part.kind == "inductor") {
            offer(others, part, "a", "no amplifier input has a usable loop gain, and the network is driven here");
            offer(others, part, "b", "no amplifier input has a usable loop gain, and the network is driven here");
        }
    }
    // An amplifier drives its output net: a network terminal there loads nothing that matters.
    const auto driven = [&](const Candidate& c) {
        const auto net = design.find(c.cut.part)->net_at(c.cut.terminal);
        return std::any_of(design.parts.begin(), design.parts.end(), [&](const Part& part) {
            return (part.kind == "opamp" || part.kind == "limiter") && part.net_at("out") == net;
        });
    };
    std::stable_partition(others.begin(), others.end(), driven);
    inputs.insert(inputs.end(), minus_inputs.begin(), minus_inputs.end());
    inputs.insert(inputs.end(), others.begin(), others.end());
    return inputs;
}

/// Trying more than this costs more time than it saves the user: the growth rate is shown in any case.
constexpr std::size_t most_tried = 24;

} // namespace

Result<CutChoice> choose_cut(const Design& design, const Vector& operating_point, const SmallSignal& small_signal) {
    std::optional<CutChoice> rising, finite;
    const auto list = candidates(design);
    for (std::size_t k = 0; k < std::min(list.size(), most_tried); ++k) {
        const auto opened = assemble_opened(design, list[k].cut);
        if (!opened) continue;
        const auto loop = LoopGain::prepare(linearise(*opened, extend_to_opened(*opened, operating_point)),
                                            opened->opened, opened->rest);
        if (!loop) continue;
        const std::string name = list[k].cut.part + " " + list[k].cut.terminal;
        std::string reason;
        const auto point = governing_point(find_crossings(*loop), small_signal, reason);
        const std::string opening = "The file names no cut; opened at " + name + ": " + list[k].why;
        if (point && point->falls) return CutChoice{list[k].cut, opening + "."};
        if (point && !rising)
            rising = CutChoice{list[k].cut, opening + ", and the phase of the loop gain rises through zero there."};
        if (!finite) finite = CutChoice{list[k].cut, opening + "; no cut tried has a Barkhausen point."};
    }
    if (rising) return *rising;
    if (finite) return *finite;
    return Fault{FaultKind::no_loop_gain, "cut", "No terminal of this circuit has a finite loop gain.",
                 "Join the output of an amplifier back to its input through a network."};
}

} // namespace sinewright
