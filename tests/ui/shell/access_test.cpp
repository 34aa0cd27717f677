#include "tests/ui/shell/window.hpp"
#include "ui/values/quantity_field.hpp"

using namespace sinewright;
using namespace sinewright::ui;

namespace {

bool takes_focus(const QWidget& widget) {
    return widget.isVisible() && widget.isEnabled() && (widget.focusPolicy() & Qt::TabFocus);
}

void check_names(Window& window) {
    for (const QWidget* widget : window.findChildren<QWidget*>()) {
        if (!takes_focus(*widget)) continue;
        INFO(widget->metaObject()->className() << " \"" << widget->objectName().toStdString() << "\" in "
                                               << widget->parentWidget()->objectName().toStdString());
        CHECK(!widget->accessibleName().isEmpty());
    }
}

} // namespace

TEST_CASE("everything that takes the keyboard has a name for screen readers", "[window][access][ordinary]") {
    Window window;
    check_names(window);
    window.with_starter();
    window.document().select({"U1"});
    window.settle();
    check_names(window);
    window.document().select({});
    window.settle();
    window.sheet_area().properties().set_folded(false);
    window.settle();
    check_names(window);
}

TEST_CASE("Tab walks header, sheet, shelf, views and strip in this order", "[window][access][ordinary]") {
    Window window;
    window.with_starter();
    window.get("title").setFocus();
    QStringList walked{"title"};
    for (int i = 0; i < 120 && (walked.size() < 2 || walked.last() != "title"); ++i) {
        QTest::keyClick(QApplication::focusWidget(), Qt::Key_Tab);
        for (QWidget* w = QApplication::focusWidget(); w; w = w->parentWidget())
            if (QStringList{"title", "header", "sheet_area", "shelf", "views", "verdict_strip"}.contains(
                    w->objectName())) {
                if (walked.last() != w->objectName()) walked << w->objectName();
                break;
            }
    }
    INFO(walked.join(" ").toStdString());
    CHECK(walked == QStringList{"title", "header", "sheet_area", "shelf", "views", "verdict_strip", "title"});
}

TEST_CASE("a gauge tells screen readers its value and whether it meets its target", "[window][access][ordinary]") {
    Window window;
    window.with_starter();
    window.document().edit("Target", [](Design& design) {
        Target target;
        target.name = "startup_margin_db", target.min = Value{6, ""};
        design.targets = {target};
    });
    window.settle();
    REQUIRE(window.verdict().gauges().size() == 3);
    const Gauge& gauge = *window.verdict().gauges()[0];
    CHECK(gauge.accessibleName() == "Start-up margin");
    CHECK(gauge.accessibleDescription().contains("misses its target: short of 6"));
    CHECK(gauge.reading().met == false);
}
