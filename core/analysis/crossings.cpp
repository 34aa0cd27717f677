/// Crossings of arg L = 0, the governing Barkhausen point, and encirclements of +1.
#include "core/analysis/loop_gain.hpp"
#include <algorithm>
#include <cmath>
#include <numbers>

namespace sinewright {

namespace {

constexpr double two_pi = 2 * std::numbers::pi;
constexpr double quoted_gain = 1e-9; ///< crossings below −180 dB are rounding, not physics
constexpr double zero_phase = 1e-10; ///< |arg L| below this is zero to rounding
/// While searching, the fast form serves down to |L| ≈ 1e-8, where its phase is still good to 1e-6; quoted crossings
/// are refined by LU.
constexpr double search_difference = 1e-8;
constexpr double fast_form_noise = 1e-13; ///< absolute error of L in the fast form, with room
constexpr double largest_turn = 0.7;      ///< rad of arg between neighbouring grid points before the interval is halved

struct Point {
    double w_rad_per_s;
    Complex gain;
};

std::vector<double> roots_and_reach(const LoopGain& loop, double& low, double& high) {
    std::vector<double> grid;
    low = INFINITY, high = 0;
    for (const auto& roots : {loop.joined_roots(), loop.opposed_roots()})
        for (const Complex root : roots) high = std::max(high, std::abs(root));
    for (const auto& roots : {loop.joined_roots(), loop.opposed_roots()})
        for (const Complex root : roots) {
            const double size = std::abs(root), re = std::abs(root.real()), im = root.imag();
            if (size < 1e-12 * high) continue; // at the origin
            low = std::min(low, size);
            if (im < 0) continue;
            grid.push_back(size);
            // Lightly damped roots turn the phase within their own width.
            for (const double width : {-4.0, -1.5, -0.5, 0.0, 0.5, 1.5, 4.0})
                if (im > 0 && im + width * re > 0) grid.push_back(im + width * re);
        }
    return grid;
}

/// Angular frequencies from far below the lowest root to far above the highest, dense round each root.
std::vector<double> search_grid(const LoopGain& loop) {
    double low = 0, high = 0;
    std::vector<double> grid = roots_and_reach(loop, low, high);
    if (!(high > 0) || !std::isfinite(low)) low = 1, high = 1e6;
    low *= 1e-3, high *= 1e3;
    const int steps = static_cast<int>(std::ceil(8 * std::log10(high / low)));
    for (int k = 0; k <= steps; ++k) grid.push_back(low * std::pow(high / low, static_cast<double>(k) / steps));
    std::sort(grid.begin(), grid.end());
    grid.erase(std::unique(grid.begin(), grid.end(), [](double a, double b) { return b - a < 1e-12 * b; }), grid.end());
    return grid;
}

double turn(Complex from, Complex to) { return std::arg(to * std::conj(from)); }

/// Evaluates on the grid and halves every interval in which `seen(L)` turns by more than `largest_turn`.
template <class Seen> std::vector<Point> trace(const LoopGain& loop, const std::vector<double>& grid, Seen seen) {
    std::vector<Point> points;
    const auto point = [&](double w) { return Point{w, loop.at(Complex(0, w), search_difference)}; };
    const auto add = [&](auto&& self, const Point& next, int depth) -> void {
        const Point& last = points.back();
        if (depth > 0 && std::abs(turn(seen(last.gain), seen(next.gain))) > largest_turn) {
            const Point middle = point(std::sqrt(last.w_rad_per_s * next.w_rad_per_s));
            self(self, middle, depth - 1);
            self(self, next, depth - 1);
            return;
        }
        points.push_back(next);
    };
    for (const double w : grid) {
        const Point next = point(w);
        if (!std::isfinite(std::norm(next.gain))) continue; // exactly on a pole of L
        if (points.empty())
            points.push_back(next);
        else
            add(add, next, 12);
    }
    return points;
}

double phase_slope(const LoopGain& loop, const Point& p) {
    // L = (r − 1)/(r + 1): dL/dr = 2/(r + 1)², r = (1 + L)/(1 − L), so d ln L/ds = 2r/(r² − 1) · d ln r/ds
    // = (1 − L²)/(2L) · d ln r/ds.
    const Complex by_s = (1.0 - p.gain * p.gain) / (2.0 * p.gain) * loop.slope_of_log_ratio(Complex(0, p.w_rad_per_s));
    return (by_s * Complex(0, 1)).imag();
}

/// Root of arg L between a and b, where it has opposite signs: bisection mixed with regula falsi, until the bracket is
/// `width` of its place.
template <class Phase> double bracketed_root(Phase phase, double a, double b, double width) {
    double fa = phase(a), fb = phase(b);
    for (int step = 0; step < 80 && b - a > width * b && fa * fb < 0; ++step) {
        double w = a - fa * (b - a) / (fb - fa);
        if (step % 2 == 1 || !(w > a && w < b)) w = 0.5 * (a + b);
        const double fw = phase(w);
        if (fw * fa < 0)
            b = w, fb = fw;
        else
            a = w, fa = fw;
    }
    return std::abs(fa) < std::abs(fb) ? a : b;
}

/// The fast form brings the crossing within reach; a few Newton steps by LU, whose phase has no lost digits, end it.
Crossing refine(const LoopGain& loop, double a, double b, bool falls) {
    const auto plain = [&](double w) { return std::arg(loop.at_by_lu(Complex(0, w))); };
    double w = 0;
    if (loop.falls_back_to_lu()) {
        w = bracketed_root(plain, a, b, 1e-15);
    } else {
        w = bracketed_root([&](double v) { return std::arg(loop.at(Complex(0, v), search_difference)); }, a, b, 1e-9);
        double last_step = b - a;
        for (int step = 0; step < 6; ++step) {
            const Complex gain = loop.at_by_lu(Complex(0, w));
            const double change = std::arg(gain) / phase_slope(loop, {w, gain});
            if (!(std::abs(change) < last_step)) break;
            w -= change, last_step = std::abs(change);
            if (last_step < 1e-15 * w) break;
        }
    }
    return {w / two_pi, loop.at_by_lu(Complex(0, w)).real(), falls};
}

/// Between two points of equal phase sign the phase may still touch or pass zero twice: finds its extremum if it turns
/// back inside, and adds that point when it lies on the other side.
void add_hidden_extremum(const LoopGain& loop, const Point& a, const Point& b, std::vector<Point>& points) {
    const double pa = std::arg(a.gain), pb = std::arg(b.gain);
    if (pa * pb <= 0 || std::min(std::abs(pa), std::abs(pb)) > 0.4) return;
    const double towards = pa > 0 ? -1 : 1;
    if (!(phase_slope(loop, a) * towards > 0 && phase_slope(loop, b) * towards < 0)) return;
    double low = a.w_rad_per_s, high = b.w_rad_per_s;
    for (int step = 0; step < 40; ++step) {
        const double w = 0.5 * (low + high);
        const Point middle{w, loop.at(Complex(0, w))};
        if (std::arg(middle.gain) * pa < 0) {
            points.push_back(middle);
            return;
        }
        (phase_slope(loop, middle) * towards > 0 ? low : high) = w;
    }
}

} // namespace

std::vector<Crossing> find_crossings(const LoopGain& loop) {
    const std::vector<Point> traced = trace(loop, search_grid(loop), [](Complex gain) { return gain; });
    std::vector<Point> points;
    for (std::size_t k = 0; k < traced.size(); ++k) {
        const double size = std::abs(traced[k].gain);
        if (size < quoted_gain || std::abs(std::arg(traced[k].gain)) < zero_phase + fast_form_noise / size) continue;
        if (!points.empty() && !loop.falls_back_to_lu()) add_hidden_extremum(loop, points.back(), traced[k], points);
        points.push_back(traced[k]);
    }
    std::vector<Crossing> crossings;
    for (std::size_t k = 0; k + 1 < points.size(); ++k) {
        const double before = std::arg(points[k].gain), after = std::arg(points[k + 1].gain);
        if (before * after >= 0 || std::abs(before - after) > std::numbers::pi) continue; // through 180° instead
        const Crossing found = refine(loop, points[k].w_rad_per_s, points[k + 1].w_rad_per_s, before > 0);
        if (found.gain > quoted_gain) crossings.push_back(found);
    }
    return crossings;
}

std::optional<int> count_encirclements(const LoopGain& loop) {
    const auto difference = [](Complex gain) { return 1.0 - gain; };
    const std::vector<Point> points = trace(loop, search_grid(loop), difference);
    if (points.size() < 4) return std::nullopt;
    double turned = 0;
    for (std::size_t k = 0; k + 1 < points.size(); ++k) {
        const double step = turn(difference(points[k].gain), difference(points[k + 1].gain));
        if (std::abs(step) > 2.5) return std::nullopt; // half a turn at once: the curve runs through +1
        turned += step;
    }
    // 1 − L ~ s^m at both ends. At the origin the path passes s = 0 on its right: each factor s turns by π there.
    const auto order = [&](const Point& a, const Point& b) {
        return std::lround(std::log(std::abs(difference(b.gain)) / std::abs(difference(a.gain))) /
                           std::log(b.w_rad_per_s / a.w_rad_per_s));
    };
    const double at_origin = static_cast<double>(order(points[0], points[1]));
    const double at_infinity = static_cast<double>(order(points[points.size() - 2], points.back()));
    // arg(1 − L) over the whole axis grows by π(left zeros − right zeros − left poles + right poles), and zeros less
    // poles in all is the order at infinity.
    const double half_turns = 2 * turned / std::numbers::pi + at_origin;
    return static_cast<int>(std::lround((at_infinity - half_turns) / 2));
}

std::optional<BarkhausenPoint> governing_point(const std::vector<Crossing>& crossings, const SmallSignal& small_signal,
                                               std::string& reason) {
    const auto& roots = small_signal.natural_frequencies;
    const auto pair = std::find_if(roots.begin(), roots.end(), [](Complex s) { return s.imag() > 0; });
    if (pair == roots.end()) {
        reason = "No natural frequency is complex, so no frequency of oscillation can be quoted.";
        return std::nullopt;
    }
    const double wanted_hz = pair->imag() / two_pi;
    const auto distance = [&](const Crossing& c) { return std::abs(std::log(c.frequency_hz / wanted_hz)); };
    const auto nearest = std::min_element(crossings.begin(), crossings.end(),
                                          [&](const auto& a, const auto& b) { return distance(a) < distance(b); });
    if (nearest == crossings.end() || distance(*nearest) > std::log(2.0)) {
        reason = crossings.empty() ? "The phase of the loop gain never crosses zero: the growth rate stands alone."
                                   : "The phase of the loop gain crosses zero nowhere within a factor of 2 of the "
                                     "frequency that grows: the growth rate stands alone.";
        return std::nullopt;
    }
    return BarkhausenPoint{nearest->frequency_hz, nearest->gain, nearest->startup_margin_db(), nearest->falls};
}

} // namespace sinewright
