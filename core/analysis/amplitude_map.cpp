#include "core/analysis/amplitude_map.hpp"
#include <cmath>
#include <numbers>

namespace sinewright {

namespace {

constexpr double two_pi = 2 * std::numbers::pi;
/// The map begins where nonlinearity shifts the balance by about this part of what separates it from a steady state:
/// small enough for the linear mode to be a start and for no solution to lie below.
constexpr double first_shift = 0.02, least_first_shift = 1e-7;
/// Harmonics at the upper end of those kept, relative to the fundamental: more asks for twice as many, less for half.
constexpr double needs_more = 3e-3, needs_less = 1e-7;
/// Neighbouring tangents may turn by at most this (cosine), else the step is shortened.
constexpr double least_cosine = 0.6;
constexpr double shortest_step = 1e-7;

int samples_for(int highest) { return power_of_two_from(4 * highest + 4); }

/// One path being followed.
class Tracer {
  public:
    Tracer(HarmonicBalance& balance, const MapLimits& limits, std::stop_token stop)
        : balance_(balance), limits_(limits), stop_(std::move(stop)) {}

    bool begin(const SmallSignalStart& start, const Eigen::VectorXcd& mode);
    void follow();
    TracedMap result;

  private:
    bool step();
    void note(const CyclePoint& point);
    void find_solution(const CyclePoint& before, const CyclePoint& after);
    void fit_resolution();
    bool ended();
    double shift_at(const Eigen::VectorXcd& mode, CyclePoint point);

    HarmonicBalance& balance_;
    const MapLimits& limits_;
    std::stop_token stop_;
    CyclePoint point_;
    Vector tangent_;
    double length_ = 0.3;
    double first_log_a_ = 0, first_log_w_ = 0;
    double last_solution_log_a_ = -1e300;
};

/// How much the elements' bending shifts the balance for the linear mode at this amplitude, in units of the excess:
/// the probe's drive after one pass through DC and the harmonics.
double Tracer::shift_at(const Eigen::VectorXcd& mode, CyclePoint point) {
    const double a = std::exp(point.log_a);
    Eigen::MatrixXcd u = Eigen::MatrixXcd::Zero(2, balance_.ports().controls());
    u.row(1) = a * (mode.transpose() * balance_.ports().A);
    point.u = balance_.pack(u);
    Eigen::MatrixXcd answered = balance_.answered(point, balance_.highest(), balance_.samples());
    answered.row(1) = u.row(1);
    point.u = balance_.pack(answered);
    Vector residual;
    Matrix jacobian;
    if (!balance_.evaluate(point, residual, &jacobian)) return std::numeric_limits<double>::infinity();
    return residual.tail(2).norm() / jacobian.col(jacobian.cols() - 1).tail(2).norm();
}

bool Tracer::begin(const SmallSignalStart& start, const Eigen::VectorXcd& mode) {
    balance_.set_resolution(limits_.first_harmonics, samples_for(limits_.first_harmonics));
    point_.log_w = std::log(start.w_rad_per_s);
    point_.excess =
        balance_.kind() == ExcessKind::gain ? std::log(start.gain) : start.growth_per_s / balance_.growth_unit_per_s();
    const double allowed = std::max(first_shift * std::abs(point_.excess), least_first_shift);
    constexpr double decade = std::numbers::ln10;
    point_.log_a = -9 * decade;
    for (CyclePoint next = point_; next.log_a < 3 * decade; next.log_a += decade / 2) {
        if (!(shift_at(mode, next) < allowed)) break;
        point_ = next;
    }
    const Hold hold = Hold::amplitude(balance_);
    Eigen::MatrixXcd u = Eigen::MatrixXcd::Zero(2, balance_.ports().controls());
    for (int attempt = 0; attempt < 6; ++attempt, point_.log_a -= decade) {
        u.row(1) = std::exp(point_.log_a) * (mode.transpose() * balance_.ports().A);
        CyclePoint trial = point_;
        trial.u = balance_.pack(u);
        const NewtonResult met = solve(balance_, trial, hold, {.max_iterations = 8, .tolerance = 1e-8}, stop_);
        result.iterations += met.iterations;
        if (!met.converged) continue;
        point_ = trial;
        first_log_a_ = point_.log_a, first_log_w_ = point_.log_w;
        return tangent_of(balance_, point_, path_scale(balance_, point_), hold.direction, tangent_);
    }
    return false;
}

void Tracer::note(const CyclePoint& point) {
    AmplitudePoint noted{std::exp(point.log_a), std::exp(point.log_w) / two_pi, {}, {}};
    const Excess excess = balance_.excess_at(point);
    if (balance_.kind() == ExcessKind::gain)
        noted.loop_gain = 1 / excess.gain;
    else
        noted.growth_per_s = excess.growth_per_s;
    result.map.points.push_back(noted);
}

void Tracer::find_solution(const CyclePoint& before, const CyclePoint& after) {
    const double share = before.excess / (before.excess - after.excess);
    CyclePoint guess{before.u + share * (after.u - before.u), before.log_a + share * (after.log_a - before.log_a),
                     before.log_w + share * (after.log_w - before.log_w), 0};
    const NewtonResult met =
        solve(balance_, guess, Hold::excess(balance_), {.max_iterations = 20, .tolerance = 1e-8, .halvings = 3}, stop_);
    result.iterations += met.iterations;
    // A start that the refinement can use even where these few harmonics do not settle.
    result.solutions.push_back(met.converged ? guess : (share < 0.5 ? before : after));
    result.solutions.back().excess = 0;
    result.harmonics.push_back(balance_.highest());
    last_solution_log_a_ = guess.log_a;
}

/// More harmonics where the waveform needs them, fewer where it does not.
void Tracer::fit_resolution() {
    const int k = balance_.highest();
    const Eigen::MatrixXcd u = balance_.unpack(point_.u);
    double top = 0;
    for (int c = 0; c < u.cols(); ++c) {
        const double size = u.col(c).cwiseAbs().maxCoeff();
        const int from = k - std::max(2, k / 5) + 1;
        if (size > 0) top = std::max(top, u.col(c).tail(k + 1 - from).cwiseAbs().maxCoeff() / size);
    }
    int wanted = k;
    if (top > needs_more && 2 * k <= limits_.most_harmonics) wanted = 2 * k;
    if (top < needs_less && k / 2 >= limits_.first_harmonics) wanted = k / 2;
    if (wanted == k) return;
    const Eigen::MatrixXcd t = balance_.unpack(tangent_.head(balance_.packed()));
    const Vector edges = tangent_.tail(3);
    balance_.set_resolution(wanted, samples_for(wanted));
    point_.u = balance_.pack(u);
    tangent_.resize(balance_.packed() + 3);
    tangent_ << balance_.pack(t), edges;
}

bool Tracer::step() {
    const Vector scale = path_scale(balance_, point_);
    while (length_ > shortest_step && !stop_.stop_requested()) {
        CyclePoint next = moved(point_, scale, tangent_, length_);
        const NewtonResult met = solve(balance_, next, Hold{tangent_}, {.max_iterations = 8, .tolerance = 1e-7}, stop_);
        result.iterations += met.iterations;
        Vector turned;
        if (met.converged && tangent_of(balance_, next, path_scale(balance_, next), tangent_, turned) &&
            (turned.dot(tangent_) > least_cosine || length_ < 1e-4)) {
            const CyclePoint before = point_;
            point_ = next, tangent_ = turned;
            if (before.excess * point_.excess <= 0 && before.excess != point_.excess) find_solution(before, point_);
            if (met.iterations <= 4) length_ *= 1.6;
            if (met.iterations >= 7) length_ *= 0.6;
            length_ = std::min(length_, limits_.longest_step);
            return true;
        }
        length_ *= 0.4;
    }
    return false;
}

bool Tracer::ended() {
    auto& why = result.map.stopped;
    if (stop_.stop_requested()) return why = "cancelled", true;
    if (std::abs(point_.excess) > limits_.farthest_excess) return why = "the loop is far from balance", true;
    if (!result.solutions.empty() && (std::abs(point_.excess) > limits_.beyond_solution ||
                                      std::abs(point_.log_a - last_solution_log_a_) > limits_.beyond_log_amplitude))
        return why = "well past the steady state", true;
    if (point_.log_a > first_log_a_ + limits_.largest_log_growth)
        return why = "amplitude beyond any part's range", true;
    if (point_.log_a < first_log_a_ - 3) return why = "back at small amplitude", true;
    if (std::abs(point_.log_w - first_log_w_) > 5) return why = "frequency far from that of the start", true;
    return false;
}

void Tracer::follow() {
    note(point_);
    for (int k = 0; k < limits_.most_points; ++k) {
        fit_resolution();
        if (!step()) {
            result.map.stopped = "no further point could be met";
            return;
        }
        note(point_);
        if (ended()) return;
    }
    result.map.stopped = "as many points as allowed";
}

} // namespace

std::optional<TracedMap> trace_amplitude_map(HarmonicBalance& balance, HarmonicLinear& linear,
                                             const SmallSignalStart& start, int preferred, const MapLimits& limits,
                                             std::stop_token stop) {
    Eigen::VectorXcd mode;
    const bool at_cut = balance.kind() == ExcessKind::gain;
    const Complex s(at_cut ? 0 : start.growth_per_s, start.w_rad_per_s);
    if (!linear.set_probe(s, at_cut ? start.gain : 1, preferred, mode)) return std::nullopt;
    Tracer tracer(balance, limits, stop);
    if (!tracer.begin(start, mode)) return std::nullopt;
    tracer.follow();
    return std::move(tracer.result);
}

} // namespace sinewright
