#include "core/parts/kinds.hpp"
#include "core/parts/walls.hpp"
#include <algorithm>
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

/// a2·v² + a3·v³: what common mode adds to v_d, and what the output stage adds to v_2.
struct Curvature {
    static constexpr int controls = 1, outputs = 1;
    static constexpr bool stores_charge = false;
    double a2_per_v, a3_per_v2;
    bool none() const { return a2_per_v == 0 && a3_per_v2 == 0; }
    template <class T> T of(const T& v) const { return v * v * (a2_per_v + a3_per_v2 * v); }
    template <class T> void operator()(const std::array<T, 1>& v, std::array<T, 1>& out, std::array<T, 1>&) const {
        out[0] = of(v[0]);
    }
};

/// (S/w)·tanh(w·v_d/S). Controls: the linear part of v_d less the offset and, when curved, v_cm.
template <bool Curved> struct SlewStage {
    static constexpr int controls = Curved ? 2 : 1, outputs = 1;
    static constexpr bool stores_charge = false;
    double slew_v, offset_v; ///< slew_v: S/w
    Curvature common_mode;
    template <class T>
    void operator()(const std::array<T, controls>& u, std::array<T, 1>& out, std::array<T, 1>&) const {
        using std::tanh;
        T v_d = u[0] + offset_v;
        if constexpr (Curved) v_d += common_mode.of(u[1]);
        out[0] = slew_v * tanh(v_d / slew_v);
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

/// Takes the input stage from the row of v_g, in volts of
/// v_d = v_plus − v_minus + offset + c1·v_cm + c2·v_cm² + c3·v_cm³; what is linear goes to constant stamps.
void stamp_input_stage(const PartValues& p, PartStamp& s, int row, double w_rad_per_s) {
    const int plus = s.net(0), minus = s.net(1);
    const double half_c1 = p[common_mode_1] / 2;
    const Combination difference{{plus, 1 + half_c1}, {minus, -1 + half_c1}}, common{{plus, 0.5}, {minus, 0.5}};
    const Curvature curvature{p[common_mode_2], p[common_mode_3]};
    if (p.has(slew_rate)) {
        const double slew_v = p[slew_rate] / w_rad_per_s;
        if (curvature.none())
            s.nonlinear(law_of(SlewStage<false>{slew_v, p[offset], curvature}), {difference}, {{{row, -1}}});
        else
            s.nonlinear(law_of(SlewStage<true>{slew_v, p[offset], curvature}), {difference, common}, {{{row, -1}}});
        return;
    }
    for (const auto& [net, weight] : difference) s.g(row, net, -weight);
    s.source(row, p[offset]);
    if (!curvature.none()) s.nonlinear(law_of(curvature), {common}, {{{row, -1}}});
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

/// v_2 + o2·v_2² + o3·v_2³ behind the output resistance
void stamp_output(const PartValues& p, PartStamp& s, int v_2) {
    const int out = s.net(2);
    int row = out;
    double per_volt = 1; // of v_2, in the row
    if (p[output_resistance] > 0) {
        per_volt = 1 / p[output_resistance];
        s.g(out, out, per_volt);
        s.tie(Tie::conducts, out, -1);
    } else {
        row = s.ideal_output(out);
    }
    s.g(row, v_2, -per_volt);
    if (const Curvature curvature{p[output_2], p[output_3]}; !curvature.none())
        s.nonlinear(law_of(curvature), {{{v_2, 1}}}, {{{row, -per_volt}}});
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
    if (p.word(model) == model_ideal) {
        // Set to ideal on purpose it may keep its macro values; one that never says which may not mean ideal.
        const auto macro_only = p.given.begin() + gbw;
        if (!p.given[model] &&
            std::find(macro_only, p.given.begin() + noise_voltage, true) != p.given.begin() + noise_voltage)
            return "values of the macro model are given but no model; set model to macro (or to ideal, to leave them "
                   "out)";
        return "";
    }
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
