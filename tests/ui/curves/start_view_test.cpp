#include "ui/curves/frequency_plots.hpp"
#include "ui/curves/natural_frequency_map.hpp"
#include "ui/curves/plane_plot.hpp"
#include "ui/curves/start_view.hpp"
#include "ui/document/document.hpp"
#include <QLabel>
#include <QTest>
#include <catch2/catch.hpp>
#include <cmath>

using namespace sinewright;
using namespace sinewright::ui;

namespace {

/// L = A·jx/(1 − x² + 3jx), equal-arm bridge at 1 kHz. Source: common practice, no source.
LoopCurve bridge_curve(double gain, double from_hz, double to_hz, int points) {
    LoopCurve curve;
    for (int k = 0; k < points; ++k) {
        const double f = from_hz * std::pow(to_hz / from_hz, k / (points - 1.0)), x = f / 1000;
        curve.frequency_hz.push_back(f);
        curve.gain.push_back(gain * Complex(0, x) / Complex(1 - x * x, 3 * x));
    }
    return curve;
}

ShownPtr bridge(double gain) {
    auto shown = std::make_shared<Shown>();
    shown->design = std::make_shared<Design>();
    const double w0 = 2 * 3.141592653589793 * 1000, half = (gain - 3) / 2;
    const Complex root = w0 * Complex(half, std::sqrt(1 - half * half));
    shown->findings.small_signal.value = judge_start({root, std::conj(root)});
    LoopFinding loop;
    const Crossing crossing{1000, gain / 3, true};
    loop.crossings = {crossing};
    loop.barkhausen = BarkhausenPoint{1000, gain / 3, crossing.startup_margin_db(), true};
    loop.encirclements = gain > 3 ? 2 : 0;
    shown->findings.loop.value = loop;
    shown->curve = bridge_curve(gain, 50, 20000, 600);
    shown->lens = bridge_curve(gain, 740, 1350, 81);
    return shown;
}

} // namespace

TEST_CASE("the Barkhausen point and the start-up margin are written in the plots", "[curves]") {
    FrequencyPlots plots;
    plots.resize(560, 420);
    plots.show();
    plots.show_results(bridge(3.1));
    CHECK(plots.point_text().contains(QString("1%1000").arg(QChar(0x2009)))); // thin space between thousands
    CHECK(plots.margin_text().contains("+0.28 dB")); // 20·lg(3.1/3) = 0.2848
    CHECK(plots.accessibleDescription().contains("+0.28 dB"));
    plots.show_results(bridge(2.9));
    CHECK(plots.margin_text().contains("−0.29 dB")); // 20·lg(2.9/3) = −0.2945
}

TEST_CASE("the read-out follows the arrow keys and the pointer", "[curves]") {
    FrequencyPlots plots;
    plots.resize(560, 420);
    plots.show();
    plots.show_results(bridge(3.1));
    CHECK(plots.readout().isEmpty());
    QTest::keyClick(&plots, Qt::Key_Right);
    const double first = plots.cursor_hz();
    CHECK(first > 1000); // the middle of 50 Hz to 20 kHz, one step up
    CHECK(plots.readout().contains("dB"));
    QTest::keyClick(&plots, Qt::Key_Left);
    CHECK(plots.cursor_hz() < first);
    QTest::keyClick(&plots, Qt::Key_Escape);
    CHECK(plots.readout().isEmpty());
    QTest::mouseMove(&plots, QPoint(300, 120));
    CHECK(plots.cursor_hz() > 0);
}

TEST_CASE("the plane says whether +1 is encircled and keeps equal scales when it is resized", "[curves]") {
    PlanePlot plane;
    plane.resize(320, 320);
    plane.show();
    plane.show_results(bridge(3.1));
    CHECK(plane.encirclement_text().contains("encircled once"));
    CHECK(plane.encirclement_text().contains("starts"));
    plane.show_results(bridge(2.9));
    CHECK(plane.encirclement_text().contains("not encircled"));
    CHECK(plane.encirclement_text().contains("dies away"));
    for (const QSize size : {QSize(320, 320), QSize(500, 260)}) {
        plane.resize(size);
        QApplication::processEvents();
        const double across = plane.xAxis->range().size() / plane.axisRect()->width(),
                     up = plane.yAxis->range().size() / plane.axisRect()->height();
        CHECK(across == Approx(up).epsilon(0.02));
    }
}

TEST_CASE("the map writes the growth and trails the pair while one circuit's values change", "[curves]") {
    NaturalFrequencyMap map;
    map.resize(260, 320);
    map.show();
    map.show_results(bridge(3.1));
    CHECK(map.growth_text().contains("+314")); // (3.1 − 3)/2 · 2π·1000
    for (const double gain : {3.05, 3.0, 2.95}) map.show_results(bridge(gain));
    CHECK(map.growth_text().contains("−157"));
    CHECK(map.trail_length() == 4);
}

TEST_CASE("the view says in words what no plot can show", "[curves]") {
    Document document;
    Analyst analyst(document);
    StartView view(document, analyst);
    view.show();
    REQUIRE(analyst.wait_until_current(10000));
    QApplication::processEvents();
    auto* note = view.findChild<QLabel*>("start_note");
    REQUIRE(note);
    CHECK(note->text().contains("Nothing to show yet"));
    auto shown = std::make_shared<Shown>(*bridge(3.1));
    Design design;
    design.parts.push_back({});
    shown->design = std::make_shared<Design>(design);
    shown->findings.loop.value->barkhausen.reset();
    shown->findings.loop.value->barkhausen_reason = "The phase never crosses zero.";
    view.show_results(shown);
    CHECK(note->text().contains("never crosses zero"));
}
