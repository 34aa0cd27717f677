#pragma once
/// Soft walls that hold a state between a low and a high limit: exp((v − high)/0.05) − exp((low − v)/0.05).
#include "core/parts/law.hpp"

namespace sinewright {

struct Walls {
    static constexpr int controls = 1, outputs = 1;
    static constexpr bool stores_charge = false;
    static constexpr double softness_v = 0.05;
    double factor, high_v, low_v; ///< a wall at ±infinity is none
    template <class T> void operator()(const std::array<T, 1>& v, std::array<T, 1>& out, std::array<T, 1>&) const {
        out[0] = factor * (push(T((v[0] - high_v) / softness_v)) - push(T((low_v - v[0]) / softness_v)));
    }
    /// exp(x), left out below −80: there it is under 1e-34 of the wall's strength, far less than the rounding of any
    /// equation it enters, and most of a clean cycle is spent there.
    template <class T> static T push(const T& x) { return value_of(x) < -80 ? T(0.0) : limited_exp(x); }
    double limiting_scale_v(int) const { return softness_v; }
};

} // namespace sinewright
