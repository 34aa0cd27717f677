#include "core/parts/kinds.hpp"
#include "core/parts/walls.hpp"
#include <numbers>

namespace sinewright {

namespace {

enum {
    model,
    gbw,
    dc_gain,
    slew_rate,
    swing_high,
    swing_low,
    second_pole,
    output_resistance,
    input_resistance,
    input_capacitance,
    input_bias,
    offset,
    common_mode_1,
    common_mode_2,
    common_mode_3,
    input_ground_capacitance,
    input_ground_coefficient,
    output_2,
    output_3,
    noise_voltage,
    noise_voltage_corner,
    noise_current,
    noise_current_corner
};
enum { model_ideal, model_macro };

/// −(S/w)·tanh(w·v_d/S), or −v_d when there is no slew limit, with
/// v_d = v_plus − v_minus + offset + c1·v_cm + c2·v_cm² + c3·v_cm³ (controls: v_plus − v_minus, v_cm).
struct InputStage {
    static constexpr int controls = 2, outputs = 1;
    static constexpr bool stores_charge = false;
    double slew_v, offset_v, c1, c2_per_v, c3_per_v2; ///< slew_v: S/w, 0: none
    template <class T> void operator()(const std::array<T, 2>& u, std::array<T, 1>& out, std::array<T, 1>&) const {
        using std::tanh;
        const T v_d = u[0] + offset_v + u[1] * (c1 + u[1] * (c2_per_v + u[1] * c3_per_v2));
        out[0] = slew_v > 0 ? T(-slew_v * tanh(v_d / slew_v)) : T(-v_d);
    }
};

/// The same without common mode: one control.
struct SlewStage {
    static constexpr int controls = 1, outputs = 1;
    static constexpr bool stores_charge = false;
    double slew_v, offset_v;
    template <class T> void operator()(const std::array<T, 1>& u, std::array<T, 1>& out, std::array<T, 1>&) const {
        using std::tanh;
        out[0] = -slew_v * tanh((u[0] + offset_v) / slew_v);
    }
};

/// o2·v² + o3·v³, what the output stage adds.
struct OutputStage {
    static constexpr int controls = 1, outputs = 1;
    static constexpr bool stores_charge = false;
    double o2_per_v, o3_per_v2;
    template <class T> void operator()(const std::array<T, 1>& v, std::array<T, 1>& out, std::array<T, 1>&) const {
        out[0] = v[0] * v[0] * (o2_per_v + o3_per_v2 * v[0]);
    }
};

/// Cg·(v + k·v²/2) to gnd.
struct InputCharge {
    static constexpr int controls = 1, outputs = 1;
    static constexpr bool stores_charge = true;
    double cg_f, k_per_v;
    template <class T> void operator()(const std::array<T, 1>& v, std::array<T, 1>&, std::array<T, 1>& q) const {
        q[0] = cg_f * v[0] * (1.0 + k_per_v / 2 * v[0]);
    }
};

void stamp_inputs(const PartValues& p, PartStamp& s) {
    const int plus = s.net(0), minus = s.net(1);
    if (p.has(input_resistance)) s.conductance(plus, minus, 1 / p[input_resistance]);
    if (p.has(input_capacitance) && p[input_capacitance] > 0) s.capacitance(plus, minus, p[input_capacitance]);
    for (const int input : {plus, minus}) {
        if (p[input_bias] != 0) s.source(input, -p[input_bias]); // flows from the net into the part
        if (p[input_ground_capacitance] == 0) continue;
        if (p[input_ground_coefficient] == 0) {
            s.capacitance(input, -1, p[input_ground_capacitance]);
        } else {
            s.nonlinear(law_of(InputCharge{p[input_ground_capacitance], p[input_ground_coefficient]}), {{{input, 1}}},
                        {{{input, 1}}});
            s.tie(Tie::stores, input, -1);
        }
    }
}

/// Adds −(input stage) to the row of v_g, in volts of v_d.
void stamp_input_stage(const PartValues& p, PartStamp& s, int row, double w_rad_per_s) {
    const int plus = s.net(0), minus = s.net(1);
    const bool common_mode = p[common_mode_2] != 0 || p[common_mode_3] != 0;
    const bool slews = p.has(slew_rate);
    const double slew_v = slews ? p[slew_rate] / w_rad_per_s : 0, half_c1 = p[common_mode_1] / 2;
    const Combination difference{{plus, 1 + half_c1}, {minus, -1 + half_c1}}; // c1·v_cm is linear and goes with it
    if (common_mode) {
        s.nonlinear(law_of(InputStage{slew_v, p[offset], p[common_mode_1], p[common_mode_2], p[common_mode_3]}),
                    {{{plus, 1}, {minus, -1}}, {{plus, 0.5}, {minus, 0.5}}}, {{{row, 1}}});
    } else if (slews) {
        s.nonlinear(law_of(SlewStage{slew_v, p[offset]}), {difference}, {{{row, 1}}});
    } else {
        for (const auto& [net, weight] : difference) s.g(row, net, -weight);
        s.source(row, p[offset]);
    }
}

/// dv_g/dt = S·tanh(w·v_d/S) − (w/A0)·v_g − S·[exp((v_g − swing_high)/0.05) − exp((swing_low − v_g)/0.05)],
/// the row divided by w; without gbw v_g = A0·v_d, the row divided by A0.
int stamp_gain(const PartValues& p, PartStamp& s) {
    const int v_g = s.state("gain stage", "V", 1, 0);
    const double w = p.has(gbw) ? 2 * std::numbers::pi * p[gbw] : 0;
    s.g(v_g, v_g, 1 / p[dc_gain]);
    if (w > 0) s.c(v_g, v_g, 1 / w);
    stamp_input_stage(p, s, v_g, w);
    if (p.has(swing_high) || p.has(swing_low)) {
        constexpr double none = std::numeric_limits<double>::infinity();
        const double strength = p.has(slew_rate) ? p[slew_rate] / w : 1; // S/w; without slew rate S = w·1 V
        s.nonlinear(
            law_of(Walls{strength, p.has(swing_high) ? p[swing_high] : none, p.has(swing_low) ? p[swing_low] : -none}),
            {{{v_g, 1}}}, {{{v_g, 1}}});
    }
    if (!p.has(second_pole)) return v_g;
    const int v_2 = s.state("second stage", "V", 1, 0); // dv_2/dt = 2πf2·(v_g − v_2)
    s.c(v_2, v_2, 1 / (2 * std::numbers::pi * p[second_pole]));
    s.g(v_2, v_2, 1);
    s.g(v_2, v_g, -1);
    return v_2;
}

void stamp_output(const PartValues& p, PartStamp& s, int v_2) {
    const int out = s.net(2);
    const bool bends = p[output_2] != 0 || p[output_3] != 0;
    const LawPtr law = bends ? law_of(OutputStage{p[output_2], p[output_3]}) : nullptr;
    if (p[output_resistance] > 0) {
        const double g = 1 / p[output_resistance];
        s.g(out, out, g);
        s.g(out, v_2, -g);
        if (bends) s.nonlinear(law, {{{v_2, 1}}}, {{{out, -g}}});
        s.tie(Tie::conducts, out, -1);
        return;
    }
    const int j = s.branch_current("output current");
    s.branch(j, out, -1);
    s.g(j, out, 1);
    s.g(j, v_2, -1);
    if (bends) s.nonlinear(law, {{{v_2, 1}}}, {{{j, -1}}});
    s.tie(Tie::forces_voltage, out, -1);
}

void stamp(const PartValues& p, PartStamp& s) {
    if (p.word(model) == model_ideal) { // v_plus = v_minus, the output supplies any current
        const int j = s.branch_current("output current");
        s.branch(j, s.net(2), -1);
        s.g(j, s.net(0), 1);
        s.g(j, s.net(1), -1);
        s.tie(Tie::forces_voltage, s.net(2), -1);
        return;
    }
    stamp_inputs(p, s);
    stamp_output(p, s, stamp_gain(p, s));
}

std::string check(const PartValues& p) {
    if (p.word(model) == model_ideal) return "";
    if (!p.has(gbw)) {
        if (p.has(slew_rate)) return "slew_rate needs gbw";
        if (p.has(swing_high) || p.has(swing_low)) return "swing_high and swing_low need gbw";
    }
    if (p.has(swing_high) && p.has(swing_low) && !(p[swing_high] > p[swing_low]))
        return "swing_high must lie above swing_low";
    return "";
}

} // namespace

const PartKind opamp_kind{
    .name = "opamp",
    .title = "op-amp",
    .ref_prefix = "U",
    .terminals = {{"plus", "non-inverting input"}, {"minus", "inverting input"}, {"out", "output"}},
    .parameters =
        {{.name = "model", .unit = "", .help = "Ideal, or with the limits below.", .choices = {"ideal", "macro"}},
         {.name = "gbw", .unit = "Hz", .range = Range::positive, .help = "Gain–bandwidth product."},
         {.name = "dc_gain", .unit = "", .fallback = 1e5, .range = Range::positive, .help = "Open-loop gain at DC."},
         {.name = "slew_rate", .unit = "V/s", .range = Range::positive, .help = "Fastest change of the output."},
         {.name = "swing_high", .unit = "V", .help = "Highest output voltage."},
         {.name = "swing_low", .unit = "V", .help = "Lowest output voltage."},
         {.name = "second_pole", .unit = "Hz", .range = Range::positive, .help = "Frequency of the second pole."},
         {.name = "output_resistance",
          .unit = "Ω",
          .fallback = 0,
          .range = Range::not_negative,
          .help = "Open-loop output resistance."},
         {.name = "input_resistance", .unit = "Ω", .range = Range::positive, .help = "Resistance between the inputs."},
         {.name = "input_capacitance",
          .unit = "F",
          .range = Range::not_negative,
          .help = "Capacitance between the inputs."},
         {.name = "input_bias", .unit = "A", .fallback = 0, .help = "Current that flows into each input."},
         {.name = "offset", .unit = "V", .fallback = 0, .help = "Input offset voltage."},
         {.name = "common_mode_1", .unit = "V/V", .fallback = 0, .help = "Differential error per volt of common mode."},
         {.name = "common_mode_2",
          .unit = "1/V",
          .fallback = 0,
          .help = "Its second-order part; makes even harmonics."},
         {.name = "common_mode_3", .unit = "1/V²", .fallback = 0, .help = "Its third-order part; makes odd harmonics."},
         {.name = "input_ground_capacitance",
          .unit = "F",
          .fallback = 0,
          .range = Range::not_negative,
          .help = "Capacitance from each input to gnd."},
         {.name = "input_ground_coefficient",
          .unit = "1/V",
          .fallback = 0,
          .help = "Relative rise of that capacitance per volt."},
         {.name = "output_2", .unit = "1/V", .fallback = 0, .help = "Second-order curvature of the output stage."},
         {.name = "output_3", .unit = "1/V²", .fallback = 0, .help = "Third-order curvature of the output stage."},
         {.name = "noise_voltage",
          .unit = "V/√Hz",
          .fallback = 0,
          .range = Range::not_negative,
          .help = "Input voltage noise density."},
         {.name = "noise_voltage_corner",
          .unit = "Hz",
          .fallback = 0,
          .range = Range::not_negative,
          .help = "Corner below which voltage noise rises as 1/f."},
         {.name = "noise_current",
          .unit = "A/√Hz",
          .fallback = 0,
          .range = Range::not_negative,
          .help = "Input current noise density."},
         {.name = "noise_current_corner",
          .unit = "Hz",
          .fallback = 0,
          .range = Range::not_negative,
          .help = "Corner below which current noise rises as 1/f."}},
    .main = gbw,
    .check = check,
    .stamp = stamp,
};

} // namespace sinewright
