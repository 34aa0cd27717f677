#include "tests/ui/shell/window.hpp"

using namespace sinewright;
using namespace sinewright::ui;

namespace {

void disconnect(Window& window, const char* ref) {
    window.document().edit("Free", [&](Design& design) { design.find(ref)->terminals[0].net.reset(); });
    window.settle();
}

} // namespace

TEST_CASE("a loose end is listed as a problem, and a click on it selects the part", "[window][problems][ordinary]") {
    Window window;
    window.with_starter();
    REQUIRE(window.verdict().problems().problems().empty());
    disconnect(window, "C2");
    const auto& problems = window.verdict().problems().problems();
    REQUIRE(!problems.empty());
    CHECK(problems[0].part == "C2");
    CHECK(problems[0].sentence.contains("C2"));
    CHECK(window.verdict().problems().isVisible());
    CHECK(window.verdict().card().tone() == VerdictCard::Tone::quiet);

    auto& list = window.get<QListView>("problems");
    const QRect row = list.visualRect(list.model()->index(0, 0));
    QTest::mouseClick(list.viewport(), Qt::LeftButton, {}, row.center());
    CHECK(window.document().selection() == QStringList{"C2"});

    window.document().undo();
    window.settle();
    CHECK(window.verdict().problems().problems().empty());
    CHECK(!window.verdict().problems().isVisible());
}

TEST_CASE("repeated problems are counted, and the part is taken from where the fault lies", "[problems][ordinary]") {
    Design design;
    Part part;
    part.ref = "R3";
    design.parts = {part};
    Findings findings;
    const Fault fault{FaultKind::value_out_of_range, "R3.resistance", "R3: too small.", "Give it more."};
    findings.faults = {fault, fault};
    findings.loop.faults = {{FaultKind::no_loop_gain, "net fb", "No loop gain here.", ""}};
    const auto problems = problems_in(findings, design);
    REQUIRE(problems.size() == 2);
    CHECK(problems[0].count == 2);
    CHECK(problems[0].part == "R3");
    CHECK(problems[0].severity == Problem::Severity::stops);
    CHECK(problems[1].part.isEmpty());
    CHECK(problems[1].severity == Problem::Severity::hinders);
}
