#include "core/parts/kinds.hpp"

namespace sinewright {

namespace {

enum { scale };

/// v_out = scale·v_x·v_y
struct Product {
    static constexpr int controls = 2, outputs = 1;
    static constexpr bool stores_charge = false;
    double scale_per_v;
    template <class T> void operator()(const std::array<T, 2>& v, std::array<T, 1>& out, std::array<T, 1>&) const {
        out[0] = scale_per_v * v[0] * v[1];
    }
};

void stamp(const PartValues& p, PartStamp& s) {
    const int x = s.net(0), y = s.net(1), j = s.ideal_output(s.net(2));
    s.nonlinear(law_of(Product{p[scale]}), {{{x, 1}}, {{y, 1}}}, {{{j, -1}}});
}

} // namespace

const PartKind multiplier_kind{
    .name = "multiplier",
    .title = "multiplier",
    .ref_prefix = "M",
    .terminals = {{"x", "first input"}, {"y", "second input"}, {"out", "output"}},
    .parameters =
        {{.name = "scale", .unit = "1/V", .required = true, .help = "Output volts per volt squared at the inputs."}},
    .stamp = stamp,
};

} // namespace sinewright
