/// sinewright-batch: the analyses without a display, for scripts, build servers and clusters.
#include "core/design/file.hpp"
#include "core/design/words.hpp"
#include "core/review/describe.hpp"
#include "core/review/findings.hpp"
#include <CLI/CLI.hpp>
#include <cmath>
#include <cstdio>
#include <exception>

namespace {

using namespace sinewright;

enum ExitStatus { done = 0, missed = 1, unusable = 2, internal = 3 };

struct Options {
    std::string file;
    bool json = false, csv = false;
    double from_hz = 0, to_hz = 0;
    int points = 0;
};

int refuse(const Faults& faults) {
    for (const Fault& fault : faults)
        std::fprintf(stderr, "sinewright-batch: %s\n",
                     printable(fault.sentence + (fault.remedy.empty() ? "" : " " + fault.remedy)).c_str());
    return unusable;
}

int print(const std::string& text, int status) {
    const bool written = std::fwrite(text.data(), 1, text.size(), stdout) == text.size() && std::fflush(stdout) == 0;
    if (!written) std::fprintf(stderr, "sinewright-batch: standard output could not be written.\n");
    return written ? status : internal;
}

/// The faults that keep a design from being judged at all; empty when it was judged.
Faults unusable_because(const Findings& findings) {
    if (!findings.faults.empty()) return findings.faults;
    if (!findings.operating_point) return findings.operating_point.faults;
    return findings.small_signal.faults;
}

int run_check(const Options& options) {
    const auto read = read_design(options.file);
    if (!read) return refuse(read.faults());
    const Findings findings = check(read->design);
    if (const Faults faults = unusable_because(findings); !faults.empty()) return refuse(faults);
    return print(options.json ? findings_json(findings, read->design) : findings_text(findings, read->design),
                 exit_status(findings));
}

int run_curves(const Options& options) {
    const auto bad_option = [](const char* option, const std::string& sentence) {
        return refuse({{FaultKind::bad_quantity, option, sentence, "See sinewright-batch curves --help."}});
    };
    if (!(options.from_hz > 0) || !std::isfinite(options.from_hz))
        return bad_option("--from", "--from must be a frequency above zero.");
    if (!(options.to_hz > options.from_hz) || !std::isfinite(options.to_hz))
        return bad_option("--to", "--to must be a frequency above --from.");
    if (options.points < 2 || options.points > 1'000'000)
        return bad_option("--points", "--points must lie from 2 to 1000000.");
    const auto read = read_design(options.file);
    if (!read) return refuse(read.faults());
    const Findings findings = check(read->design);
    if (const Faults faults = unusable_because(findings); !faults.empty()) return refuse(faults);
    if (!findings.loop_gain) return refuse(findings.loop.faults);
    const LoopCurve curve = findings.loop_gain->sweep(options.from_hz, options.to_hz, options.points);
    return print(options.csv ? curves_csv(curve) : curves_json(curve, findings.loop->cut), done);
}

int run(int argc, char** argv) {
    CLI::App app{"Analyses of sine-source loops without a display.\n"
                 "Exit status: 0 done and every target met; 1 a target missed or not known, or no oscillation; 2 the "
                 "input can't be used; "
                 "3 a limit or an internal failure."};
    app.name("sinewright-batch");
    app.require_subcommand(1);
    Options options;
    CLI::App* check_verb = app.add_subcommand("check", "Everything up to the verdict against the design's targets.");
    check_verb->add_option("FILE", options.file, "The design (.sinewright)")->required();
    check_verb->add_flag("--json", options.json, "One JSON object instead of text");
    check_verb->footer("Example: sinewright-batch check tone.sinewright --json");
    CLI::App* curves_verb = app.add_subcommand("curves", "Loop gain at log-spaced frequencies.");
    curves_verb->add_option("FILE", options.file, "The design (.sinewright)")->required();
    curves_verb->add_option("--from", options.from_hz, "Lowest frequency, Hz")->required();
    curves_verb->add_option("--to", options.to_hz, "Highest frequency, Hz")->required();
    curves_verb->add_option("--points", options.points, "How many, both ends included")->required();
    auto* csv = curves_verb->add_flag("--csv", options.csv, "Comma-separated values instead of JSON");
    curves_verb->add_flag("--json", options.json, "One JSON object (the default)")->excludes(csv);
    curves_verb->footer("Example: sinewright-batch curves tone.sinewright --from 100 --to 10000 --points 201 --csv");
    CLI::App* describe_verb = app.add_subcommand("describe", "Part kinds with their terminals and parameters.");
    describe_verb->add_flag("--json", options.json, "One JSON object instead of text");
    describe_verb->footer("Example: sinewright-batch describe --json");
    try {
        app.parse(argc, argv);
    } catch (const CLI::ParseError& error) {
        return app.exit(error) == 0 ? done : unusable;
    }
    if (check_verb->parsed()) return run_check(options);
    if (curves_verb->parsed()) return run_curves(options);
    return print(options.json ? kinds_json() : kinds_text(), done);
}

} // namespace

int main(int argc, char** argv) {
    try {
        return run(argc, argv);
    } catch (const std::exception& error) {
        std::fprintf(stderr, "sinewright-batch: internal failure: %s\n", error.what());
    } catch (...) {
        std::fprintf(stderr, "sinewright-batch: internal failure.\n");
    }
    return internal;
}
