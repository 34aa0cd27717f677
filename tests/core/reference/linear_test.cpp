/// Every reference design of tests/outside/linear, through the JSON that outsiders read.
/// The expected numbers were computed independently of this project (nodal equations with complex-step derivatives,
/// loop gain by double injection); each case names its closed form where one exists.
#include "core/design/file.hpp"
#include "core/review/findings.hpp"
#include <catch2/catch.hpp>
#include <fstream>
#include <nlohmann/json.hpp>

namespace {

using nlohmann::json;
using namespace sinewright;

const std::string folder = std::string(SINEWRIGHT_SOURCE_DIR) + "/tests/outside/linear/";

json reference_cases() { return json::parse(std::ifstream(folder + "expected.json")); }

/// Within a relative distance of the reference.
auto near(double expected, double relative) { return Catch::WithinRel(expected, relative); }

void compare_small_signal(const json& found, const json& expected) {
    const double tolerance = expected["tolerance"]["natural_frequency"];
    CHECK(found["outcome"] == expected["outcome"]);
    if (expected.contains("frequency_hz")) {
        CHECK_THAT(found["frequency_hz"].get<double>(),
                   near(expected["frequency_hz"], expected["tolerance"]["frequency"]));
        CHECK_THAT(found["growth_per_s"].get<double>(), near(expected["growth_per_s"], tolerance));
        CHECK_THAT(found["growth_per_cycle"].get<double>(), near(expected["growth_per_cycle"], tolerance));
    } else {
        CHECK(found["frequency_hz"].is_null());
        CHECK_FALSE(found["frequency_hz_reason"].get<std::string>().empty());
    }
    const json& roots = found["natural_frequencies"];
    CHECK(roots.size() == expected["natural_frequency_count"]);
    std::size_t place = 0; // the reference lists the upper half plane, right-most first, six at most
    for (const json& root : roots) {
        if (root["im"].get<double>() < 0 || place == expected["natural_frequencies"].size()) continue;
        const std::complex<double> wanted(expected["natural_frequencies"][place][0],
                                          expected["natural_frequencies"][place][1]);
        const std::complex<double> got(root["re"], root["im"]);
        INFO("natural frequency " << place << ": " << got << ", expected " << wanted);
        CHECK(std::abs(got - wanted) <= tolerance * std::abs(wanted));
        ++place;
    }
    CHECK(place == expected["natural_frequencies"].size());
}

void compare_loop(const json& found, const json& expected) {
    const double tolerance = expected["tolerance"]["frequency"], margin_db = expected["tolerance"]["margin_db"];
    if (expected.contains("barkhausen")) {
        const json &point = found["barkhausen"], &wanted = expected["barkhausen"];
        REQUIRE(point.is_object());
        CHECK_THAT(point["frequency_hz"].get<double>(), near(wanted["frequency_hz"], tolerance));
        CHECK_THAT(point["gain"].get<double>(), near(wanted["gain"], tolerance));
        CHECK_THAT(point["startup_margin_db"].get<double>(), Catch::WithinAbs(wanted["startup_margin_db"], margin_db));
        CHECK(point["phase"] == wanted["phase"]);
    } else {
        CHECK(found["barkhausen"].is_null());
        CHECK_FALSE(found["barkhausen_reason"].get<std::string>().empty());
    }
    if (!expected.contains("crossings")) return;
    REQUIRE(found["crossings"].size() == expected["crossings"].size());
    for (std::size_t k = 0; k < found["crossings"].size(); ++k) {
        CHECK_THAT(found["crossings"][k]["frequency_hz"].get<double>(), near(expected["crossings"][k][0], tolerance));
        CHECK_THAT(found["crossings"][k]["gain"].get<double>(), near(expected["crossings"][k][1], tolerance));
    }
}

/// Nyquist 1932: encirclements = right-half-plane natural frequencies − right-half-plane poles of L.
void compare_counts(const json& found) {
    const json& loop = found["loop"];
    CHECK_FALSE(loop.contains("encirclement_note"));
    CHECK(loop["encirclements"].get<int>() ==
          found["small_signal"]["right_half_plane"].get<int>() - loop["opened_right_half_plane"].get<int>());
}

} // namespace

TEST_CASE("every linear reference design gives the independently computed start-up results", "[reference][linear]") {
    const json cases = reference_cases();
    REQUIRE(cases.size() >= 18);
    for (const auto& [name, expected] : cases.items()) {
        DYNAMIC_SECTION(name << ": " << expected["source"].get<std::string>()) {
            const auto read = read_design(folder + name + ".sinewright");
            REQUIRE(read);
            const Findings findings = check(read->design);
            const json found = json::parse(findings_json(findings, read->design));
            CHECK(exit_status(findings) == expected["exit_status"]);
            compare_small_signal(found["small_signal"], expected);
            compare_loop(found["loop"], expected);
            compare_counts(found);
        }
    }
}
