#include "core/parts/kinds.hpp"

namespace sinewright {

namespace {

enum { law, gain, limit, cubic };
enum { law_tanh, law_cubic, law_clip };

/// v_out = L·tanh(g·v_in/L)
struct Tanh {
    static constexpr int controls = 1, outputs = 1;
    static constexpr bool stores_charge = false;
    double g, l_v;
    template <class T> void operator()(const std::array<T, 1>& v, std::array<T, 1>& out, std::array<T, 1>&) const {
        using std::tanh;
        out[0] = l_v * tanh(g / l_v * v[0]);
    }
};

/// v_out = g·v_in − c·v_in³
struct Cubic {
    static constexpr int controls = 1, outputs = 1;
    static constexpr bool stores_charge = false;
    double g, c_per_v2;
    template <class T> void operator()(const std::array<T, 1>& v, std::array<T, 1>& out, std::array<T, 1>&) const {
        out[0] = v[0] * (g - c_per_v2 * v[0] * v[0]);
    }
};

/// v_out = g·v_in held to ±L
struct Clip {
    static constexpr int controls = 1, outputs = 1;
    static constexpr bool stores_charge = false;
    double g, l_v;
    template <class T> void operator()(const std::array<T, 1>& v, std::array<T, 1>& out, std::array<T, 1>&) const {
        const double straight = g * value_of(v[0]);
        out[0] = straight > l_v ? T(l_v) : straight < -l_v ? T(-l_v) : T(g * v[0]);
    }
};

LawPtr law_for(const PartValues& p) {
    switch (p.word(law)) {
    case law_tanh:
        return law_of(Tanh{p[gain], p[limit]});
    case law_cubic:
        return law_of(Cubic{p[gain], p[cubic]});
    default:
        return law_of(Clip{p[gain], p[limit]});
    }
}

void stamp(const PartValues& p, PartStamp& s) {
    const int in = s.net(0), j = s.ideal_output(s.net(1));
    s.nonlinear(law_for(p), {{{in, 1}}}, {{{j, -1}}});
}

} // namespace

const PartKind limiter_kind{
    .name = "limiter",
    .title = "limiter",
    .ref_prefix = "A",
    .terminals = {{"in", "input"}, {"out", "output"}},
    .parameters =
        {{.name = "law", .unit = "", .help = "How the stage saturates.", .choices = {"tanh", "cubic", "clip"}},
         {.name = "gain", .unit = "", .fallback = 1, .help = "Gain for small signals; negative inverts."},
         {.name = "limit",
          .unit = "V",
          .fallback = 1,
          .range = Range::positive,
          .help = "Largest output of the tanh and clip laws."},
         {.name = "cubic", .unit = "1/V²", .fallback = 0, .help = "Coefficient of the cubic law."}},
    .main = gain,
    .stamp = stamp,
};

} // namespace sinewright
