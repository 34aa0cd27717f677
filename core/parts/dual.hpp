#pragma once
/// Forward dual numbers: a value with N first derivatives (Griewank & Walther, Evaluating Derivatives, 2008).
/// Only the operations part equations use.
#include <array>
#include <cmath>

namespace sinewright {

template <int N> struct Dual;
template <int N> Dual<N> chain(const Dual<N>& a, double f, double slope);

template <int N> struct Dual {
    double v = 0;
    std::array<double, N> d{};
    Dual() = default;
    Dual(double value) : v(value) {}

    Dual& operator+=(const Dual& b) {
        v += b.v;
        for (int k = 0; k < N; ++k) d[k] += b.d[k];
        return *this;
    }
    Dual& operator-=(const Dual& b) {
        v -= b.v;
        for (int k = 0; k < N; ++k) d[k] -= b.d[k];
        return *this;
    }
    Dual& operator*=(const Dual& b) {
        for (int k = 0; k < N; ++k) d[k] = d[k] * b.v + v * b.d[k];
        v *= b.v;
        return *this;
    }
    Dual& operator/=(const Dual& b) {
        const double r = 1 / b.v;
        v *= r;
        for (int k = 0; k < N; ++k) d[k] = (d[k] - v * b.d[k]) * r;
        return *this;
    }
    friend Dual operator+(Dual a, const Dual& b) { return a += b; }
    friend Dual operator-(Dual a, const Dual& b) { return a -= b; }
    friend Dual operator*(Dual a, const Dual& b) { return a *= b; }
    friend Dual operator/(Dual a, const Dual& b) { return a /= b; }
    // A plain number has no derivatives: nothing is multiplied by their zeros.
    friend Dual operator+(Dual a, double b) {
        a.v += b;
        return a;
    }
    friend Dual operator+(double a, const Dual& b) { return b + a; }
    friend Dual operator-(const Dual& a, double b) { return a + -b; }
    friend Dual operator-(double a, const Dual& b) { return chain(b, a - b.v, -1); }
    friend Dual operator*(const Dual& a, double b) { return chain(a, a.v * b, b); }
    friend Dual operator*(double a, const Dual& b) { return b * a; }
    friend Dual operator/(const Dual& a, double b) { return chain(a, a.v / b, 1 / b); }
    friend Dual operator/(double a, const Dual& b) {
        const double y = a / b.v;
        return chain(b, y, -y / b.v);
    }
    friend Dual operator-(Dual a) {
        a.v = -a.v;
        for (double& x : a.d) x = -x;
        return a;
    }
    friend bool operator<(const Dual& a, const Dual& b) { return a.v < b.v; }
    friend bool operator>(const Dual& a, const Dual& b) { return a.v > b.v; }
    friend bool operator<=(const Dual& a, const Dual& b) { return a.v <= b.v; }
    friend bool operator>=(const Dual& a, const Dual& b) { return a.v >= b.v; }
};

/// y = f(a) with slope f'(a).
template <int N> Dual<N> chain(const Dual<N>& a, double f, double slope) {
    Dual<N> y(f);
    for (int k = 0; k < N; ++k) y.d[k] = slope * a.d[k];
    return y;
}
template <int N> Dual<N> exp(const Dual<N>& a) {
    const double e = std::exp(a.v);
    return chain(a, e, e);
}
template <int N> Dual<N> log(const Dual<N>& a) { return chain(a, std::log(a.v), 1 / a.v); }
template <int N> Dual<N> tanh(const Dual<N>& a) {
    const double t = std::tanh(a.v);
    return chain(a, t, 1 - t * t);
}
template <int N> Dual<N> sqrt(const Dual<N>& a) {
    const double r = std::sqrt(a.v);
    return chain(a, r, 0.5 / r);
}
template <int N> Dual<N> pow(const Dual<N>& a, double p) {
    const double y = std::pow(a.v, p);
    return chain(a, y, a.v != 0 ? p * y / a.v : p * std::pow(a.v, p - 1));
}
inline double value_of(double x) { return x; }
template <int N> double value_of(const Dual<N>& x) { return x.v; }

/// exp(x), continued linearly with matching slope above an argument of 80 (contract), so that it never overflows.
template <class T> T limited_exp(const T& x) {
    using std::exp;
    if (value_of(x) <= 80) return exp(x);
    static const double at_knee = std::exp(80.0);
    return at_knee * (x - 79.0);
}

} // namespace sinewright
