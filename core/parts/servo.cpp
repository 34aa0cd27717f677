#include "core/parts/kinds.hpp"
#include "core/parts/walls.hpp"

namespace sinewright {

namespace {

enum { detector_lag, setpoint, rate, control_high, control_low, bias, proportional };

/// −v_sense², for τ·dm/dt + m − v_sense² = 0
struct Square {
    static constexpr int controls = 1, outputs = 1;
    static constexpr bool stores_charge = false;
    template <class T> void operator()(const std::array<T, 1>& v, std::array<T, 1>& out, std::array<T, 1>&) const {
        out[0] = -(v[0] * v[0]);
    }
};

/// dv_c/dt = κ·[P²/2 − m − (P²/2)·(exp((v_c − control_high)/0.05) − exp((control_low − v_c)/0.05))];
/// control = v_c + bias + proportional·(P²/2 − m). With no signal the integrator rests at control_high.
void stamp(const PartValues& p, PartStamp& s) {
    const int sense = s.net(0);
    const double wanted_v2 = p[setpoint] * p[setpoint] / 2;
    const int m = s.state("mean square", "V²", wanted_v2, 0);
    const int v_c = s.state("integrator", "V", (p[control_high] - p[control_low]) / 2, p[control_high]);
    s.c(m, m, p[detector_lag]);
    s.g(m, m, 1);
    s.nonlinear(law_of(Square{}), {{{sense, 1}}}, {{{m, 1}}});

    s.c(v_c, v_c, 1 / p[rate]);
    s.g(v_c, m, 1);
    s.source(v_c, wanted_v2);
    s.nonlinear(law_of(Walls{wanted_v2, p[control_high], p[control_low]}), {{{v_c, 1}}}, {{{v_c, 1}}});

    const int j = s.ideal_output(s.net(1));
    s.g(j, v_c, -1);
    s.g(j, m, p[proportional]);
    s.source(j, p[bias] + p[proportional] * wanted_v2);
}

std::string check(const PartValues& p) {
    if (p[rate] == 0) return "rate is zero: the integrator would never move";
    return p[control_high] > p[control_low] ? "" : "control_high must lie above control_low";
}

} // namespace

const PartKind servo_kind{
    .name = "servo",
    .title = "amplitude servo",
    .ref_prefix = "S",
    .terminals = {{"sense", "input of the level detector"}, {"control", "control voltage output"}},
    .parameters =
        {{.name = "detector_lag",
          .unit = "s",
          .required = true,
          .range = Range::not_negative,
          .help = "Averaging time of the mean-square detector."},
         {.name = "setpoint",
          .unit = "V",
          .required = true,
          .range = Range::positive,
          .help = "Peak level of the sine it holds."},
         {.name = "rate",
          .unit = "1/(s·V²)",
          .required = true,
          .help = "How fast the integrator moves per volt squared of error."},
         {.name = "control_high", .unit = "V", .fallback = 10, .help = "Upper end of the integrator's range."},
         {.name = "control_low", .unit = "V", .fallback = -10, .help = "Lower end of the integrator's range."},
         {.name = "bias", .unit = "V", .fallback = 0, .help = "Constant added to the control voltage."},
         {.name = "proportional",
          .unit = "1/V",
          .fallback = 0,
          .help = "Direct path from the error to the control voltage; damps the envelope."}},
    .main = setpoint,
    .check = check,
    .stamp = stamp,
};

} // namespace sinewright
