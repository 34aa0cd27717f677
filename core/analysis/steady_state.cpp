#include "core/analysis/steady_state.hpp"
#include <algorithm>
#include <cmath>
#include <fmt/core.h>
#include <numbers>

namespace sinewright {

namespace {

constexpr double two_pi = 2 * std::numbers::pi;
/// Twice the samples may change no net's harmonic by more than this part of the fundamental.
constexpr double aliasing_limit = 1e-10;
constexpr int most_samples = 1 << 15;

/// A periodic solution with the resolution it needed.
struct Cycle {
    CyclePoint point;
    int highest = 0, samples = 0, iterations = 0;
    double residual = 0, left_out = 0, aliasing = 0;
    bool resolved = false;
};

/// Largest net voltage harmonic in rows from … to of a spectrum.
double largest_in_nets(const Eigen::MatrixXcd& spectrum, int net_count, Eigen::Index from, Eigen::Index to) {
    if (to < from) return 0;
    return spectrum.block(from, 0, to - from + 1, net_count).cwiseAbs().maxCoeff();
}

/// Newton at the steady state with as many harmonics and samples as the waveform needs.
std::optional<Cycle> refine(HarmonicBalance& balance, const CyclePoint& start, int highest, int net_count,
                            const SteadyStateOptions& options, std::stop_token stop) {
    Cycle cycle;
    balance.set_resolution(highest, power_of_two_from(4 * highest + 4));
    cycle.point = start;
    while (!stop.stop_requested()) {
        const NewtonResult met = solve(balance, cycle.point, Hold::excess(balance),
                                       {.max_iterations = 30, .tolerance = 1e-9, .halvings = 6}, stop);
        cycle.iterations += met.iterations;
        if (!met.converged) return std::nullopt;
        cycle.residual = met.residual;
        const int k = balance.highest(), n = balance.samples(), beyond = std::min(2 * k, n - 1);
        const Eigen::MatrixXcd now = balance.all_unknowns(cycle.point, k, n),
                               finer = balance.all_unknowns(cycle.point, beyond, 2 * n);
        const double fundamental = std::exp(cycle.point.log_a);
        cycle.left_out = largest_in_nets(finer, net_count, k + 1, beyond) / fundamental;
        cycle.aliasing = largest_in_nets(finer.topRows(k + 1) - now, net_count, 0, k) / fundamental;
        cycle.highest = k, cycle.samples = n;
        const bool tail = cycle.left_out <= options.tail, sampled = cycle.aliasing <= aliasing_limit;
        if (tail && sampled) {
            cycle.resolved = true;
            return cycle;
        }
        if (!tail && 2 * k <= options.most_harmonics) {
            balance.set_resolution(2 * k, power_of_two_from(8 * k + 4));
            cycle.point.u = balance.pack(finer * balance.ports().A);
        } else if (!sampled && 2 * n <= most_samples) {
            balance.set_resolution(k, 2 * n);
        } else {
            return cycle;
        }
    }
    return std::nullopt;
}

std::vector<Harmonic> harmonics_of_column(const Eigen::MatrixXcd& spectrum, int unknown) {
    std::vector<Harmonic> harmonics;
    const double phase = std::arg(spectrum(1, unknown));
    for (Eigen::Index k = 1; k < spectrum.rows(); ++k) {
        const Complex x = spectrum(k, unknown);
        const double relative = std::arg(x) - static_cast<double>(k) * phase;
        const double turned = std::remainder(relative, two_pi) * 180 / std::numbers::pi;
        harmonics.push_back({static_cast<int>(k), std::abs(x), k == 1 ? 0 : turned});
    }
    return harmonics;
}

void report_output(SteadyState& state, int output) {
    state.harmonics = harmonics_of_column(state.spectrum, output);
    const double v1 = state.harmonics.front().peak_v;
    double squares = 0;
    for (auto h = state.harmonics.rbegin(); h != state.harmonics.rend() && h->order > 1; ++h)
        squares += h->peak_v * h->peak_v;
    state.amplitude_v = v1;
    state.dc_v = state.spectrum(0, output).real();
    state.rms_v = std::sqrt(state.dc_v * state.dc_v + (v1 * v1 + squares) / 2);
    state.thd_ratio = std::sqrt(squares) / v1;
    state.thd_db = 20 * std::log10(state.thd_ratio);
}

/// One circuit prepared for harmonic balance.
struct Prepared {
    Ports ports;
    HarmonicLinear linear;
    HalfWave symmetry;
    Prepared(const Circuit& circuit, const Vector& rest, double w0, int observed)
        : ports(circuit, rest),
          linear(circuit, ports, w0),
          symmetry(find_half_wave_symmetry(ports, observed, circuit.opened, circuit.rest)) {}
};

class Search {
  public:
    Search(const OscillatorLoop& loop, const SteadyStateOptions& options, std::stop_token stop)
        : loop_(loop), options_(options), stop_(std::move(stop)) {}
    Result<SteadyState> run();

  private:
    struct Start {
        ExcessKind kind;
        SmallSignalStart at;
        std::string words;
    };
    std::vector<Start> starts() const;
    bool from_map(ExcessKind kind, const SmallSignalStart& start, const std::string& words);
    void add(const Cycle& cycle, HarmonicBalance& balance, const std::string& words, const AmplitudeMap& map);

    const OscillatorLoop& loop_;
    const SteadyStateOptions& options_;
    std::stop_token stop_;
    std::vector<SteadyState> found_;
    std::string tried_;
};

void Search::add(const Cycle& cycle, HarmonicBalance& balance, const std::string& words, const AmplitudeMap& map) {
    SteadyState state;
    balance.set_resolution(cycle.highest, cycle.samples);
    const int n = loop_.closed.size();
    Eigen::MatrixXcd deviations = balance.all_unknowns(cycle.point, cycle.highest, 2 * cycle.samples).leftCols(n);
    const double phase = std::arg(deviations(1, loop_.output));
    for (Eigen::Index k = 1; k < deviations.rows(); ++k)
        deviations.row(k) *= std::polar(1.0, -phase * static_cast<double>(k));
    state.spectrum = deviations;
    state.spectrum.row(0) += loop_.rest.transpose().cast<Complex>();
    const double w = std::exp(cycle.point.log_w);
    state.frequency_hz = w / two_pi;
    report_output(state, loop_.output);
    const Ports closed(loop_.closed, loop_.rest);
    state.envelope = envelope_modes(closed, deviations, w, 1e-6, stop_);
    state.map = map;
    state.method = words;
    state.iterations = cycle.iterations;
    state.highest = cycle.highest, state.samples = cycle.samples;
    state.residual = cycle.residual, state.left_out = cycle.left_out, state.aliasing = cycle.aliasing;
    found_.push_back(std::move(state));
}

bool Search::from_map(ExcessKind kind, const SmallSignalStart& start, const std::string& words) {
    const Circuit& circuit = kind == ExcessKind::gain ? *loop_.opened : loop_.closed;
    const Vector rest = kind == ExcessKind::gain ? extend_to_opened(circuit, loop_.rest) : loop_.rest;
    Prepared prepared(circuit, rest, start.w_rad_per_s, loop_.output);
    HarmonicBalance balance(prepared.ports, prepared.linear, prepared.symmetry, kind, start.w_rad_per_s);
    auto traced = trace_amplitude_map(balance, prepared.linear, start, loop_.output, options_.map, stop_);
    if (!traced) {
        tried_ += words + ": no start; ";
        return false;
    }
    tried_ += fmt::format("{}: {} points, {}; ", words, traced->map.points.size(), traced->map.stopped);
    for (std::size_t k = 0; k < traced->solutions.size(); ++k) {
        balance.set_resolution(traced->harmonics[k], 4 * traced->harmonics[k] + 4);
        auto cycle =
            refine(balance, traced->solutions[k], traced->harmonics[k], loop_.closed.net_count, options_, stop_);
        if (!cycle) continue;
        cycle->iterations += traced->iterations;
        add(*cycle, balance, words, traced->map);
    }
    return !found_.empty();
}

/// Starts worth a map, best first: the governing Barkhausen point; the right-most pair; the other crossings, those with
/// most gain first; further pairs that grow.
std::vector<Search::Start> Search::starts() const {
    std::vector<Start> list;
    const auto at_cut = [&](double frequency_hz, double gain, std::string words) {
        list.push_back({ExcessKind::gain, {two_pi * frequency_hz, 1 / gain, 0}, std::move(words)});
    };
    if (loop_.opened && loop_.barkhausen)
        at_cut(loop_.barkhausen->frequency_hz, loop_.barkhausen->gain, "amplitude map from the Barkhausen point");
    bool first = true;
    for (const Complex& s : loop_.natural_frequencies) {
        if (s.imag() <= 0 || !(first || s.real() > 0)) continue;
        list.push_back({ExcessKind::growth,
                        {s.imag(), 1, s.real()},
                        fmt::format("map of growth from the natural frequency at {:.4g} Hz", s.imag() / two_pi)});
        first = false;
    }
    if (!loop_.opened) return list;
    std::vector<Crossing> crossings = loop_.crossings;
    std::sort(crossings.begin(), crossings.end(),
              [](const Crossing& a, const Crossing& b) { return a.startup_margin_db() > b.startup_margin_db(); });
    for (const Crossing& c : crossings)
        if (!loop_.barkhausen || c.frequency_hz != loop_.barkhausen->frequency_hz)
            at_cut(c.frequency_hz, c.gain, fmt::format("amplitude map from the crossing at {:.4g} Hz", c.frequency_hz));
    return list;
}

Result<SteadyState> Search::run() {
    for (const Start& start : starts()) {
        if (stop_.stop_requested()) return Fault{FaultKind::cancelled, "steady state", "The search was stopped.", ""};
        if (from_map(start.kind, start.at, start.words)) break;
    }
    if (found_.empty())
        return Fault{FaultKind::not_converged, "steady state", "No periodic solution was found. Tried: " + tried_, ""};
    return std::move(found_.front());
}

} // namespace

std::vector<Harmonic> SteadyState::harmonics_of(int unknown) const { return harmonics_of_column(spectrum, unknown); }

Result<SteadyState> find_steady_state(const OscillatorLoop& loop, const SteadyStateOptions& options,
                                      const SteadyState* previous, std::stop_token stop) {
    (void)previous;
    return Search(loop, options, std::move(stop)).run();
}

} // namespace sinewright
