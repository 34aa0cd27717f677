/// Times of a full refresh of the start-up results, printed: assemble, operating point, natural frequencies, loop gain
/// with its crossings and governing point, and a sweep of 600 points; each the median of many, in milliseconds of
/// processor time, so that other work on the machine counts little.
/// Use: bench_refresh DESIGN…
#include "core/analysis/loop_gain.hpp"
#include "core/analysis/operating_point.hpp"
#include "core/design/file.hpp"
#include <algorithm>
#include <cstdio>
#include <cstdlib>
#include <ctime>
#include <filesystem>

namespace {

using namespace sinewright;

constexpr int sweep_points = 600;
constexpr int parts_of_refresh = 5;
constexpr const char* part_names[parts_of_refresh] = {"assemble", "rest", "roots", "crossings", "sweep"};

template <class T> const T& or_stop(const Result<T>& result) {
    if (result) return *result;
    std::fprintf(stderr, "bench_refresh: %s\n", result.fault().sentence.c_str());
    std::exit(2);
}

double processor_ms() {
    timespec now{};
    clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &now);
    return 1e3 * static_cast<double>(now.tv_sec) + 1e-6 * static_cast<double>(now.tv_nsec);
}

struct Refresh {
    double part_ms[parts_of_refresh] = {};
    double total_ms = 0;
    int unknowns = 0;
};

Refresh refresh(const Design& design) {
    Refresh times;
    const double begin_ms = processor_ms();
    double last_ms = begin_ms;
    const auto lap = [&](int part) {
        const double now_ms = processor_ms();
        times.part_ms[part] = now_ms - last_ms;
        last_ms = now_ms;
    };
    const auto closed = assemble(design);
    const auto opened = assemble_opened(design, *design.cut);
    or_stop(closed), or_stop(opened);
    lap(0);
    const auto rest = find_operating_point(*closed);
    or_stop(rest);
    lap(1);
    const SmallSignal small = judge_start(or_stop(natural_frequencies(linearise(*closed, rest->x))));
    lap(2);
    const auto loop =
        LoopGain::prepare(linearise(*opened, extend_to_opened(*opened, rest->x)), opened->opened, opened->rest);
    or_stop(loop);
    std::string reason;
    governing_point(find_crossings(*loop), small, reason);
    lap(3);
    const double centre_hz = small.frequency_hz.value_or(1000);
    loop->sweep(centre_hz / 100, centre_hz * 100, sweep_points);
    lap(4);
    times.total_ms = last_ms - begin_ms;
    times.unknowns = closed->size();
    return times;
}

double median(std::vector<double> values) {
    std::nth_element(values.begin(), values.begin() + values.size() / 2, values.end());
    return values[values.size() / 2];
}

void print_medians(const std::filesystem::path& path) {
    const auto read = read_design(path);
    const Design& design = or_stop(read).design;
    if (!design.cut) {
        std::fprintf(stderr, "bench_refresh: %s names no cut.\n", path.c_str());
        std::exit(2);
    }
    constexpr int warm_up = 5;
    constexpr double budget_ms = 1500;
    std::vector<Refresh> runs;
    for (int k = 0; k < warm_up; ++k) runs.assign(1, refresh(design));
    const int wanted = std::clamp(static_cast<int>(budget_ms / runs[0].total_ms), 11, 2001);
    for (int k = 1; k < wanted; ++k) runs.push_back(refresh(design));
    const auto median_of = [&](auto member) {
        std::vector<double> values;
        for (const Refresh& run : runs) values.push_back(member(run));
        return median(values);
    };
    std::printf("%-32s %8d %9.3f", path.stem().c_str(), runs[0].unknowns,
                median_of([](const Refresh& run) { return run.total_ms; }));
    for (int part = 0; part < parts_of_refresh; ++part)
        std::printf(" %9.3f", median_of([part](const Refresh& run) { return run.part_ms[part]; }));
    std::printf("\n");
}

} // namespace

int main(int argc, char** argv) {
    std::printf("%-32s %8s %9s", "median, ms", "unknowns", "refresh");
    for (const char* name : part_names) std::printf(" %9s", name);
    std::printf("\n");
    for (int k = 1; k < argc; ++k) print_medians(argv[k]);
    return 0;
}
