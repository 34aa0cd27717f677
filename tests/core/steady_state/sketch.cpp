#include "sketch.hpp"
#include <catch2/catch.hpp>

namespace sinewright::test {

Analysed analyse(const Design& design) {
    Analysed a;
    auto closed = assemble(design);
    REQUIRE(closed);
    a.closed = *closed;
    const auto point = find_operating_point(a.closed);
    REQUIRE(point);
    a.rest = point->x;
    const auto roots = natural_frequencies(linearise(a.closed, a.rest));
    REQUIRE(roots);
    a.small_signal = judge_start(*roots);
    a.output = a.closed.net(design.output);
    REQUIRE(a.output >= 0);
    std::optional<Cut> cut = design.cut;
    if (!cut)
        if (const auto choice = choose_cut(design, a.rest, a.small_signal)) cut = choice->cut;
    if (!cut) return a;
    const auto opened = assemble_opened(design, *cut);
    REQUIRE(opened);
    a.opened = *opened;
    const auto loop_gain =
        LoopGain::prepare(linearise(*a.opened, extend_to_opened(*a.opened, a.rest)), a.opened->opened, a.opened->rest);
    if (!loop_gain) return a;
    a.crossings = find_crossings(*loop_gain);
    std::string reason;
    a.barkhausen = governing_point(a.crossings, a.small_signal, reason);
    return a;
}

Analysed analyse(const Sketch& sketch) {
    const auto read = parse_design(sketch.text(), "sketch");
    if (!read) FAIL(read.fault().sentence);
    return analyse(read->design);
}

SteadyState steady_state_of(const Analysed& analysed, const SteadyStateOptions& options) {
    auto state = find_steady_state(analysed.loop(), options);
    if (!state) FAIL(state.fault().sentence);
    return std::move(*state);
}

SteadyState steady_state_of(const Sketch& sketch, const SteadyStateOptions& options) {
    return steady_state_of(analyse(sketch), options);
}

double relative_harmonic(const SteadyState& state, int order) {
    const Harmonic& h = state.harmonics.at(order - 1);
    return h.peak_v / state.amplitude_v * std::cos(h.phase_deg * M_PI / 180);
}

} // namespace sinewright::test
