#include "core/parts/kinds.hpp"

namespace sinewright {

namespace {

enum { voltage };

/// v_plus − v_minus = voltage
void stamp(const PartValues& p, PartStamp& s) {
    const int plus = s.net(0), minus = s.net(1), j = s.branch_current("current");
    s.branch(j, plus, minus);
    s.g(j, plus, 1);
    s.g(j, minus, -1);
    s.source(j, p[voltage]);
    s.tie(Tie::forces_voltage, plus, minus);
}

} // namespace

const PartKind supply_kind{
    .name = "supply",
    .title = "supply",
    .ref_prefix = "V",
    .terminals = {{"plus", "positive pole"}, {"minus", "negative pole"}},
    .parameters = {{.name = "voltage", .unit = "V", .required = true, .help = "Voltage of the ideal DC source."}},
    .stamp = stamp,
};

} // namespace sinewright
