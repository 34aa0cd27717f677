#include "core/parts/junction.hpp"
#include "core/parts/kinds.hpp"
#include <algorithm>

namespace sinewright {

namespace {

enum { saturation_current, ideality, dark_conductance, sensitivity, gamma, lag };

/// LED current, and the conductance the cell tends to: −g·max(i, 0)^γ in the row lag·dG/dt + G − dark − g·i^γ = 0.
struct Light {
    static constexpr int controls = 1, outputs = 2;
    static constexpr bool stores_charge = false;
    Junction led;
    double g_s_per_a, gamma_n;
    template <class T> void operator()(const std::array<T, 1>& v, std::array<T, 2>& out, std::array<T, 2>&) const {
        using std::pow;
        const T i = led.current(v[0]);
        out[0] = i;
        out[1] = value_of(i) > 0 ? T(-g_s_per_a * pow(i, gamma_n)) : T(0.0);
    }
    double limiting_scale_v(int) const { return led.scale_v; }
};

/// i_ab = G·v_ab
struct Cell {
    static constexpr int controls = 2, outputs = 1;
    static constexpr bool stores_charge = false;
    template <class T> void operator()(const std::array<T, 2>& u, std::array<T, 1>& i, std::array<T, 1>&) const {
        i[0] = u[0] * u[1];
    }
};

void stamp(const PartValues& p, PartStamp& s) {
    const int anode = s.net(0), cathode = s.net(1), a = s.net(2), b = s.net(3);
    constexpr double usual_led_current_a = 1e-3;
    const double usual_s = std::max(p[dark_conductance], p[sensitivity] * std::pow(usual_led_current_a, p[gamma]));
    const int g = s.state("conductance", "S", usual_s, p[dark_conductance]);
    s.c(g, g, p[lag]);
    s.g(g, g, 1);
    s.source(g, p[dark_conductance]);
    s.nonlinear(
        law_of(
            Light{{p[saturation_current], p[ideality] * thermal_voltage_v(p.temperature_k)}, p[sensitivity], p[gamma]}),
        {{{anode, 1}, {cathode, -1}}}, {{{anode, 1}, {cathode, -1}}, {{g, 1}}});
    s.nonlinear(law_of(Cell{}), {{{a, 1}, {b, -1}}, {{g, 1}}}, {{{a, 1}, {b, -1}}});
    s.tie(Tie::conducts, anode, cathode);
    s.tie(Tie::conducts, a, b);
}

} // namespace

const PartKind photocell_kind{
    .name = "photocell",
    .title = "photocell",
    .ref_prefix = "PC",
    .terminals = {{"anode", "anode of the LED"},
                  {"cathode", "cathode of the LED"},
                  {"a", "one end of the cell"},
                  {"b", "other end of the cell"}},
    .parameters = {{.name = "saturation_current",
                    .unit = "A",
                    .fallback = 1e-18,
                    .range = Range::positive,
                    .help = "Saturation current of the LED."},
                   {.name = "ideality",
                    .unit = "",
                    .fallback = 2,
                    .range = Range::positive,
                    .help = "Slope of the LED's exponential."},
                   {.name = "dark_conductance",
                    .unit = "S",
                    .fallback = 1e-8,
                    .range = Range::positive,
                    .help = "Conductance of the cell without light."},
                   {.name = "sensitivity",
                    .unit = "S/A^γ",
                    .required = true,
                    .range = Range::positive,
                    .help = "Conductance per LED current to the power gamma."},
                   {.name = "gamma",
                    .unit = "",
                    .fallback = 1,
                    .range = Range::positive,
                    .help = "Power of the LED current that the conductance follows."},
                   {.name = "lag",
                    .unit = "s",
                    .required = true,
                    .range = Range::not_negative,
                    .help = "How long the cell takes to follow the light."}},
    .main = sensitivity,
    .stamp = stamp,
};

} // namespace sinewright
