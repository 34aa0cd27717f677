#include "core/parts/kinds.hpp"

namespace sinewright {

namespace {

enum { pinch_off, beta, lambda };

/// For v_ds ≥ 0, u = v_gs − Vp: u ≤ 0: 0; v_ds < u: β·(2u − v_ds)·v_ds·(1 + λ·v_ds); else β·u²·(1 + λ·v_ds).
/// For v_ds < 0 drain and source change places.
struct SquareLaw {
    static constexpr int controls = 2, outputs = 1;
    static constexpr bool stores_charge = false;
    double vp_v, beta_a_per_v2, lambda_per_v;
    template <class T> T forward(const T& v_ds, const T& v_gs) const {
        const T u = v_gs - vp_v;
        if (value_of(u) <= 0) return T(0.0);
        const T slope = 1.0 + lambda_per_v * v_ds;
        if (value_of(v_ds) < value_of(u)) return beta_a_per_v2 * (2.0 * u - v_ds) * v_ds * slope;
        return beta_a_per_v2 * u * u * slope;
    }
    template <class T> void operator()(const std::array<T, 2>& v, std::array<T, 1>& i_d, std::array<T, 1>&) const {
        i_d[0] = value_of(v[0]) >= 0 ? forward(v[0], v[1]) : -forward(T(-v[0]), T(v[1] - v[0]));
    }
};

void stamp(const PartValues& p, PartStamp& s) {
    const int d = s.net(0), g = s.net(1), source = s.net(2);
    s.nonlinear(law_of(SquareLaw{p[pinch_off], p[beta], p[lambda]}), {{{d, 1}, {source, -1}}, {{g, 1}, {source, -1}}},
                {{{d, 1}, {source, -1}}});
    s.tie(Tie::conducts, d, source);
}

} // namespace

const PartKind jfet_kind{
    .name = "jfet",
    .title = "FET",
    .ref_prefix = "J",
    .terminals = {{"d", "drain"}, {"g", "gate"}, {"s", "source"}},
    .parameters = {{.name = "pinch_off",
                    .unit = "V",
                    .required = true,
                    .range = Range::negative,
                    .help = "Gate voltage at which the channel closes; negative."},
                   {.name = "beta",
                    .unit = "A/V²",
                    .required = true,
                    .range = Range::positive,
                    .help = "Current factor: drain current at zero gate voltage divided by pinch-off squared."},
                   {.name = "lambda",
                    .unit = "1/V",
                    .fallback = 0,
                    .range = Range::not_negative,
                    .help = "How far the current still rises with drain voltage once saturated."}},
    .stamp = stamp,
};

} // namespace sinewright
