#include "tests/ui/shell/window.hpp"
#include "ui/values/quantity_field.hpp"
#include <QFile>
#include <QMimeData>
#include <QSlider>
#include <QTemporaryDir>

using namespace sinewright;
using namespace sinewright::ui;

TEST_CASE("an empty window says how to begin and gives no verdict", "[window][ordinary]") {
    Window window;
    CHECK(window.get("empty_sheet").isVisible());
    CHECK(window.verdict().card().headline() == "Nothing drawn yet");
    CHECK(!window.get("dials").isVisible());
    CHECK(!window.isWindowModified());
}

TEST_CASE("one click on an empty sheet gives a loop that starts, and undo an empty sheet again", "[window][ordinary]") {
    Window window;
    window.with_starter();
    CHECK(!window.get("empty_sheet").isVisible());
    REQUIRE(window.analyst().latest()->findings.small_signal);
    CHECK(window.analyst().latest()->findings.small_signal->outcome == Outcome::starts);
    CHECK(window.verdict().card().tone() == VerdictCard::Tone::good);
    CHECK(window.get("dials").isVisible());
    CHECK(window.windowTitle().contains("edited"));

    QTest::keyClick(&window, Qt::Key_Z, Qt::ControlModifier);
    window.settle();
    CHECK(window.document().design() == Design{});
    CHECK(window.get("empty_sheet").isVisible());
    QTest::keyClick(&window, Qt::Key_Z, Qt::ControlModifier | Qt::ShiftModifier);
    window.settle();
    CHECK(window.document().design().parts.size() == 10);
}

TEST_CASE("a value typed on the shelf drops a part that has it", "[window][ordinary]") {
    Window window;
    window.click("begin_typing");
    CHECK(QApplication::focusWidget() == &window.shelf().field());
    QTest::keyClick(&window.shelf().field(), Qt::Key_Return); // takes the 10k that stands there
    window.settle();
    REQUIRE(window.document().design().parts.size() == 1);
    CHECK(window.document().design().parts[0].kind == "resistor");
    CHECK(window.resistance("R1") == "10k");
    window.type(window.shelf().field(), "10n");
    REQUIRE(window.document().design().parts.size() == 2);
    CHECK(window.document().design().parts[1].kind == "capacitor");
}

TEST_CASE("a tile arms its kind and a second click puts it back", "[window][ordinary]") {
    Window window;
    window.click("tile_diode");
    CHECK(window.sheet_area().sheet().armed_kind() == "diode");
    CHECK(window.get<QAbstractButton>("tile_diode").isChecked());
    window.click("tile_lamp");
    CHECK(window.sheet_area().sheet().armed_kind() == "lamp");
    CHECK(!window.get<QAbstractButton>("tile_diode").isChecked());
    window.click("tile_lamp");
    CHECK(window.sheet_area().sheet().armed_kind().isEmpty());
}

TEST_CASE("dragging a dial is live and one undo step; too little gain is said to decay", "[window][ordinary]") {
    Window window;
    window.with_starter();
    const Design before = window.document().design();
    const int steps = window.document().history().count();
    DialRow* excess = window.sheet_area().dials().rows().at(1);
    QSlider& slider = excess->slider();
    const auto at = [&](double fraction) {
        return QPoint(int(9 + fraction * (slider.width() - 18)), slider.height() / 2);
    };
    const double start = double(slider.value()) / slider.maximum();
    QTest::mousePress(&slider, Qt::LeftButton, {}, at(start));
    for (double fraction = start; fraction > 0.02; fraction -= 0.05) QTest::mouseMove(&slider, at(fraction));
    window.settle();
    CHECK(window.resistance("R3") != "18k");
    QTest::mouseRelease(&slider, Qt::LeftButton, {}, at(0.02));
    window.settle();
    CHECK(window.document().history().count() == steps + 1);
    REQUIRE(window.analyst().latest()->findings.small_signal);
    CHECK(window.analyst().latest()->findings.small_signal->outcome == Outcome::decays);
    CHECK(window.verdict().card().tone() == VerdictCard::Tone::bad);
    CHECK(window.verdict().gauges().at(0)->reading().value.startsWith(QChar(0x2212))); // a negative margin

    window.click("undo");
    CHECK(window.document().design() == before);
    CHECK(window.verdict().card().tone() == VerdictCard::Tone::good);
}

TEST_CASE("the dial that sets two parts sets both", "[window][ordinary]") {
    Window window;
    window.with_starter();
    window.type(window.sheet_area().dials().rows().at(0)->value(), "4k7");
    CHECK(window.resistance("R1") == "4k7");
    CHECK(window.resistance("R2") == "4k7");
}

TEST_CASE("a design saved and reopened is the same, byte for byte", "[window][ordinary]") {
    QTemporaryDir folder;
    const QString path = folder.filePath("loop.sinewright"), again = folder.filePath("again.sinewright");
    Window window;
    window.with_starter();
    QStringList asked;
    window.ask_path = [&](bool saving, const QString& start, MainWindow::Chosen then) {
        asked << (saving ? "save " : "open ") + start;
        then(saving ? path : QString());
    };
    QTest::keyClick(&window, Qt::Key_S, Qt::ControlModifier);
    REQUIRE(asked.size() == 1);
    CHECK(asked[0] == "save First loop, 1 kHz.sinewright");
    CHECK(!window.document().modified());
    CHECK(window.windowTitle().contains("loop.sinewright"));
    CHECK(!window.windowTitle().contains("edited"));

    Window other;
    other.open_path(path);
    other.settle();
    CHECK(other.document().design() == window.document().design());
    REQUIRE(other.save_to(again));
    QFile first(path), second(again);
    REQUIRE(first.open(QIODevice::ReadOnly));
    REQUIRE(second.open(QIODevice::ReadOnly));
    CHECK(first.readAll() == second.readAll());
}

TEST_CASE("closing a window with edits asks, and does what is answered", "[window][ordinary]") {
    QTemporaryDir folder;
    Window window;
    window.with_starter();
    CHECK(!window.close());
    CHECK(window.isVisible());
    CHECK(window.messages().isVisible());
    SECTION("go on editing") {
        window.click("guard_stay");
        CHECK(window.isVisible());
        CHECK(!window.messages().isVisible());
        CHECK(window.document().modified());
    }
    SECTION("discard the edits") {
        QTest::mouseClick(&window.get("guard_discard"), Qt::LeftButton);
        CHECK(!window.isVisible());
    }
    SECTION("save") {
        const QString path = folder.filePath("kept.sinewright");
        window.ask_path = [&](bool, const QString&, MainWindow::Chosen then) { then(path); };
        QTest::mouseClick(&window.get("guard_save"), Qt::LeftButton);
        CHECK(!window.isVisible());
        CHECK(QFile::exists(path));
    }
    SECTION("save, but it fails: the window and the edits stay") {
        window.ask_path = [&](bool, const QString&, MainWindow::Chosen then) {
            then(folder.filePath("no/such.sinewright"));
        };
        QTest::mouseClick(&window.get("guard_save"), Qt::LeftButton);
        CHECK(window.isVisible());
        CHECK(window.messages().isVisible());
        CHECK(window.document().modified());
    }
}

TEST_CASE("new and open ask about edits first", "[window][ordinary]") {
    Window window;
    window.with_starter();
    QTest::keyClick(&window, Qt::Key_N, Qt::ControlModifier);
    CHECK(window.document().design().parts.size() == 10);
    window.click("guard_stay");
    CHECK(window.document().design().parts.size() == 10);
    QTest::keyClick(&window, Qt::Key_N, Qt::ControlModifier);
    window.click("guard_discard");
    CHECK(window.document().design() == Design{});
    CHECK(!window.document().modified());
}

TEST_CASE("an unreadable file is said in the window and the design stays", "[window][errors]") {
    QTemporaryDir folder;
    Window window;
    window.with_starter();
    const Design before = window.document().design();
    const QString path = folder.filePath("broken.sinewright");
    QFile broken(path);
    REQUIRE(broken.open(QIODevice::WriteOnly));
    broken.write("this is no design");
    broken.close();
    CHECK(!window.open_now(path));
    window.settle();
    CHECK(window.messages().isVisible());
    CHECK(window.messages().text().contains("broken.sinewright"));
    CHECK(window.document().design() == before);
    window.click("close_message");
    CHECK(!window.messages().isVisible());
}

TEST_CASE("a file dropped on the window opens", "[window][ordinary]") {
    QTemporaryDir folder;
    const QString path = folder.filePath("dropped.sinewright");
    {
        Window window;
        window.with_starter();
        REQUIRE(window.save_to(path));
    }
    Window window;
    QMimeData carried;
    carried.setUrls({QUrl::fromLocalFile(path)});
    QDragEnterEvent enter({50, 50}, Qt::CopyAction, &carried, Qt::LeftButton, Qt::NoModifier);
    QApplication::sendEvent(&window, &enter);
    CHECK(enter.isAccepted());
    QDropEvent drop(QPointF(50, 50), Qt::CopyAction, &carried, Qt::LeftButton, Qt::NoModifier);
    QApplication::sendEvent(&window, &drop);
    window.settle();
    CHECK(window.document().path() == path);
    CHECK(window.document().design().parts.size() == 10);
}

TEST_CASE("the title is edited in the header as one step and shown in the window's title", "[window][ordinary]") {
    Window window;
    window.with_starter();
    const int steps = window.document().history().count();
    window.type(window.get<QLineEdit>("title"), "Shelf tone");
    CHECK(window.document().design().title == "Shelf tone");
    CHECK(window.windowTitle().startsWith("Shelf tone"));
    CHECK(window.document().history().count() == steps + 1);
}
