/// The sheet as a user meets it: pointer and keys in, document out.
#include "sheet_designs.hpp"
#include "ui/sheet/sheet.hpp"
#include <QAccessible>
#include <QApplication>
#include <QDropEvent>
#include <QMimeData>
#include <QSignalSpy>
#include <QWheelEvent>
#include <QtTest>
#include <catch2/catch.hpp>

using namespace sinewright;
using namespace sinewright::ui;

namespace {

struct Bench {
    Document document;
    Analyst analyst{document};
    SheetView sheet{document, analyst};

    Bench() {
        sheet.resize(1200, 900);
        sheet.show();
        sheet.setFocus();
        QVERIFY2_or_fail(QTest::qWaitForWindowExposed(&sheet));
    }
    static void QVERIFY2_or_fail(bool shown) { REQUIRE(shown); }
    const Design& design() const { return document.design(); }
    QPoint view(double x, double y) const { return sheet.to_view({x, y}).toPoint(); }
    QPoint end(const char* ref, const char* terminal) const {
        const PartShape& part = sheet.drawing().parts()[static_cast<std::size_t>(sheet.drawing().part_index(ref))];
        return sheet.to_view(sheet_point(part.port(terminal)->at)).toPoint();
    }
    QPoint body(const char* ref) const {
        const PartShape& part = sheet.drawing().parts()[static_cast<std::size_t>(sheet.drawing().part_index(ref))];
        return sheet.to_view(part.body.center()).toPoint();
    }
    void drop(const char* kind, double x, double y) {
        sheet.arm_kind(kind);
        click(view(x, y));
    }
    void click(QPoint at, Qt::KeyboardModifiers modifiers = {}) {
        QTest::mouseClick(&sheet, Qt::LeftButton, modifiers, at);
    }
    void drag(QPoint from, QPoint to) {
        QTest::mousePress(&sheet, Qt::LeftButton, {}, from);
        for (int i = 1; i <= 4; ++i) {
            const QPointF at = QPointF(from) + QPointF(to - from) * i / 4;
            QMouseEvent move(QEvent::MouseMove, at, sheet.mapToGlobal(at), Qt::NoButton, Qt::LeftButton, {});
            QApplication::sendEvent(&sheet, &move);
        }
        QTest::mouseRelease(&sheet, Qt::LeftButton, {}, to);
    }
    void wheel(QPoint at, int notches, Qt::KeyboardModifiers modifiers = {}) {
        QWheelEvent event(at, sheet.mapToGlobal(at), {}, {0, 120 * notches}, Qt::NoButton, modifiers, Qt::NoScrollPhase,
                          false);
        QApplication::sendEvent(&sheet, &event);
    }
    void key(int key, Qt::KeyboardModifiers modifiers = {}) {
        QTest::keyClick(&sheet, static_cast<Qt::Key>(key), modifiers);
    }
    QLineEdit& field() { return *sheet.findChild<QLineEdit*>("inline_edit"); }
    void type(const QString& text) {
        QTest::keyClicks(&sheet, text.left(1));
        QTest::keyClicks(&field(), text.mid(1));
        QTest::keyClick(&field(), Qt::Key_Return);
    }
};

} // namespace

TEST_CASE("a loop is drawn by hand, undone to nothing and redone to the same", "[sheet][ordinary]") {
    Bench bench;
    bench.sheet.zoom_by(1, {0, 0});
    bench.drop("opamp", 500, 300);
    bench.drop("resistor", 500, 160);
    bench.drop("capacitor", 300, 400);
    REQUIRE(bench.design().parts.size() == 3);
    CHECK(bench.sheet.armed_kind().isEmpty());

    bench.drag(bench.end("U1", "out"), bench.end("R1", "b"));
    bench.drag(bench.end("R1", "a"), bench.end("U1", "plus"));
    CHECK(bench.design().find("R1")->net_at("b") == bench.design().find("U1")->net_at("out"));
    CHECK(bench.design().find("R1")->net_at("a") == bench.design().find("U1")->net_at("plus"));
    bench.drag(bench.end("C1", "a"), bench.end("U1", "plus"));
    CHECK(bench.design().find("C1")->net_at("a") == bench.design().find("U1")->net_at("plus"));
    CHECK(bench.document.history().undoText() == "Join C1 and U1");

    bench.click(bench.end("C1", "b")); // a free end offers to be grounded
    QTest::keyClick(&bench.field(), Qt::Key_Return);
    CHECK(bench.design().find("C1")->net_at("b") == "gnd");
    CHECK(bench.document.history().undoText() == "Ground C1");

    bench.document.select({"R1"});
    bench.sheet.setFocus();
    bench.key(Qt::Key_Return);
    QTest::keyClicks(&bench.field(), "4k7");
    QTest::keyClick(&bench.field(), Qt::Key_Return);
    CHECK(std::get<Value>(*bench.design().find("R1")->find("resistance")).si == 4700);
    CHECK(bench.document.history().undoText() == "Value of R1");

    const int before_wheel = bench.document.history().count();
    for (int i = 0; i < 3; ++i) bench.wheel(bench.body("R1"), 1);
    CHECK(std::get<Value>(*bench.design().find("R1")->find("resistance")).si == 6200); // E24: 4k7 5k1 5k6 6k2
    CHECK(bench.document.history().count() == before_wheel + 1);                       // one turn, one step

    const int before_drag = bench.document.history().count();
    bench.drag(bench.body("R1"), bench.body("R1") + (bench.view(40, -60) - bench.view(0, 0)));
    CHECK(bench.design().find("R1")->place->x == 540);
    CHECK(bench.design().find("R1")->place->y == 100);
    CHECK(bench.document.history().count() == before_drag + 1);
    CHECK(bench.document.history().undoText() == "Move R1");

    bench.key(Qt::Key_Right, Qt::AltModifier);
    CHECK(bench.design().find("R1")->place->turn == 90);
    bench.document.select({"C1"});
    bench.key(Qt::Key_Delete);
    CHECK(bench.design().parts.size() == 2);

    const Design drawn = bench.design();
    const int steps = bench.document.history().count();
    for (int i = 0; i < steps; ++i) bench.document.undo();
    CHECK(bench.design() == Design{});
    for (int i = 0; i < steps; ++i) bench.document.redo();
    CHECK(bench.design() == drawn);
    for (int i = 0; i < steps; ++i) bench.document.undo();
    CHECK(bench.design() == Design{});
}

TEST_CASE("typing over the sheet drops what the letters mean", "[sheet][ordinary]") {
    Bench bench;
    bench.type("4k7");
    bench.sheet.setFocus();
    bench.type("10n");
    bench.sheet.setFocus();
    bench.type("op");
    REQUIRE(bench.design().parts.size() == 3);
    CHECK(bench.design().parts[0].kind == "resistor");
    CHECK(bench.design().parts[1].kind == "capacitor");
    CHECK(bench.design().parts[2].kind == "opamp");
    bench.sheet.setFocus();
    QTest::keyClicks(&bench.sheet, "7");
    QTest::keyClick(&bench.field(), Qt::Key_Escape);
    CHECK(bench.design().parts.size() == 3);
    CHECK_FALSE(bench.field().isVisible());
}

TEST_CASE("a value typed on the shelf drops its part at a free place", "[sheet][ordinary]") {
    Bench bench;
    QSignalSpy said(&bench.sheet, &SheetView::message);
    bench.sheet.drop_typed("4k7");
    bench.sheet.drop_typed("10k");
    REQUIRE(bench.design().parts.size() == 2);
    CHECK(bench.sheet.drawing().parts()[0].reach().intersects(bench.sheet.drawing().parts()[1].reach()) == false);
    bench.sheet.drop_typed("nonsense!");
    CHECK(bench.design().parts.size() == 2);
    CHECK(said.count() == 1);
}

TEST_CASE("Esc drops a drag as if it had not begun", "[sheet][ordinary]") {
    Bench bench;
    bench.document.set_new(test::wien_loop());
    const Design before = bench.design();
    QTest::mousePress(&bench.sheet, Qt::LeftButton, {}, bench.body("R1"));
    QMouseEvent move(QEvent::MouseMove, QPointF(bench.body("R1") + QPoint(90, 50)), QPointF(), Qt::NoButton,
                     Qt::LeftButton, {});
    QApplication::sendEvent(&bench.sheet, &move);
    CHECK(bench.sheet.drawing().parts()[0].place.x != before.parts[0].place->x);
    bench.key(Qt::Key_Escape);
    QTest::mouseRelease(&bench.sheet, Qt::LeftButton, {}, bench.body("R1") + QPoint(90, 50));
    CHECK(bench.design() == before);
    CHECK(bench.document.history().count() == 0);
    CHECK(bench.sheet.drawing().parts()[0].place.x == before.parts[0].place->x);
}

TEST_CASE("a drag that ends where it began leaves no step", "[sheet][ordinary]") {
    Bench bench;
    bench.document.set_new(test::wien_loop());
    bench.drag(bench.body("R1"), bench.body("R1") + QPoint(6, 0));
    CHECK(bench.document.history().count() == 0);
}

TEST_CASE("opening a file without places draws it without changing it; the first move writes them down",
          "[sheet][ordinary]") {
    Bench bench;
    Design d = test::wien_loop();
    for (Part& part : d.parts) part.place.reset();
    bench.document.set_new(d);
    CHECK(bench.design() == d);
    CHECK_FALSE(bench.document.modified());
    bench.drag(bench.body("R1"), bench.body("R1") + (bench.view(0, -40) - bench.view(0, 0)));
    for (const Part& part : bench.design().parts) CHECK(part.place);
    bench.document.undo();
    CHECK(bench.design() == d);
}

TEST_CASE("the cut is dragged to another terminal of the loop", "[sheet][ordinary]") {
    Bench bench;
    bench.document.set_new(test::wien_loop());
    REQUIRE(bench.sheet.overlay().cut);
    CHECK_FALSE(bench.sheet.overlay().ribbon.isEmpty());
    bench.drag(bench.sheet.to_view(bench.sheet.overlay().cut->at).toPoint(), bench.end("C1", "b"));
    REQUIRE(bench.design().cut);
    CHECK(bench.design().cut->part == "C1");
    CHECK(bench.document.history().undoText().startsWith("Open the loop at C1"));
}

TEST_CASE("a run is chosen and taken out: the net falls in two", "[sheet][ordinary]") {
    Bench bench;
    bench.document.set_new(test::wien_loop());
    const Join* s = nullptr;
    for (const Join& join : bench.sheet.drawing().joins())
        if (join.net == "s") s = &join;
    REQUIRE(s);
    const auto& corners = s->route.runs[0].corners;
    bench.click(bench.sheet.to_view((sheet_point(corners[0]) + sheet_point(corners[1])) / 2).toPoint());
    bench.key(Qt::Key_Delete);
    CHECK(bench.design().find("R1")->net_at("b") != bench.design().find("C1")->net_at("a"));
}

TEST_CASE("ends are joined by keys alone", "[sheet][access]") {
    Bench bench;
    bench.document.set_new(test::three_resistors());
    bench.document.select({"R1"});
    bench.key(Qt::Key_J, Qt::ControlModifier);
    bench.key(Qt::Key_Right);  // R1 a → R1 b
    bench.key(Qt::Key_Return); // begin here
    bench.key(Qt::Key_Right);  // R2 a
    bench.key(Qt::Key_Return);
    CHECK(bench.design().find("R1")->net_at("b") == "n1");
    CHECK(bench.design().find("R2")->net_at("a") == "n1");
}

TEST_CASE("arrow keys walk along the joins, Enter opens the value", "[sheet][access]") {
    Bench bench;
    bench.document.set_new(test::wien_loop());
    bench.document.select({"R1"});
    bench.key(Qt::Key_Left);
    CHECK(bench.document.selection() == QStringList{"C1"});
    bench.key(Qt::Key_Return);
    CHECK(bench.field().isVisible());
    CHECK(bench.field().accessibleName() == "Value of C1");
}

TEST_CASE("every part is a child of the sheet with a name for screen readers", "[sheet][access]") {
    Bench bench;
    bench.document.set_new(test::wien_loop());
    QAccessibleInterface* sheet = QAccessible::queryAccessibleInterface(&bench.sheet);
    REQUIRE(sheet);
    CHECK(sheet->text(QAccessible::Name) == "Sheet");
    REQUIRE(sheet->childCount() >= 10);
    CHECK(sheet->child(0)->text(QAccessible::Name) == "R1, resistor, 10 kilo-ohm, between out and s");
    CHECK(sheet->child(0)->parent() == sheet);
    bench.document.select({"R1"});
    CHECK(bench.sheet.accessibleDescription().startsWith("R1, resistor"));
    CHECK(sheet->child(0)->state().selected);
}

TEST_CASE("parts are copied, cut and pasted", "[sheet][ordinary]") {
    Bench bench;
    bench.document.set_new(test::wien_loop());
    bench.document.select({"R1", "C1"});
    bench.key(Qt::Key_C, Qt::ControlModifier);
    bench.key(Qt::Key_V, Qt::ControlModifier);
    REQUIRE(bench.design().parts.size() == 12);
    const Part &r = bench.design().parts[10], &c = bench.design().parts[11];
    CHECK(r.net_at("b") == c.net_at("a"));
    CHECK(r.net_at("b") != "s");
    CHECK(bench.document.selection().size() == 2);
    bench.key(Qt::Key_X, Qt::ControlModifier);
    CHECK(bench.design() == test::wien_loop());
    bench.key(Qt::Key_D, Qt::ControlModifier);
}

TEST_CASE("an undo in the middle of joining by keys ends the joining and breaks nothing", "[sheet][tricky]") {
    Bench bench;
    bench.document.set_new(test::three_resistors());
    bench.drop("lamp", 240, 200);
    bench.document.select({bench.sheet.drawing().parts()[3].ref.c_str()});
    bench.key(Qt::Key_J, Qt::ControlModifier);
    bench.document.undo(); // the lamp is gone
    bench.sheet.grab();
    bench.key(Qt::Key_Return);
    CHECK(bench.design() == test::three_resistors());
}

TEST_CASE("a click on a value opens it, typing nonsense is refused and changes nothing", "[sheet][errors]") {
    Bench bench;
    bench.document.set_new(test::wien_loop());
    const PartText& text = bench.sheet.drawing().texts()[0];
    bench.click(bench.sheet.to_view(text.value_box.center()).toPoint());
    REQUIRE(bench.field().isVisible());
    CHECK(bench.field().text() == "10k");
    bench.field().setText("ten");
    QTest::keyClick(&bench.field(), Qt::Key_Return);
    CHECK(bench.field().isVisible()); // still open, to be mended
    CHECK(bench.document.history().count() == 0);
    QTest::keyClick(&bench.field(), Qt::Key_Escape);
    CHECK_FALSE(bench.field().isVisible());
}

TEST_CASE("dragging to empty sheet leaves a named stub, dropping on a join joins to its net", "[sheet][ordinary]") {
    Bench bench;
    bench.document.set_new(test::wien_loop());
    bench.drop("resistor", 800, 560);
    const char* ref = "R6";
    REQUIRE(bench.design().find(ref));
    bench.drag(bench.end(ref, "b"), bench.end(ref, "b") + QPoint(60, 60));
    REQUIRE(bench.design().labels.size() == 1);
    CHECK(bench.design().labels[0].stub_of == TerminalRef{ref, "b"});
    const Join* x = nullptr;
    for (const Join& join : bench.sheet.drawing().joins())
        if (join.net == "x") x = &join;
    REQUIRE(x);
    const auto& corners = x->route.runs.back().corners;
    bench.drag(bench.end(ref, "a"),
               bench.sheet.to_view((sheet_point(corners[0]) + sheet_point(corners[1])) / 2).toPoint());
    CHECK(bench.design().find(ref)->net_at("a") == "x");
}

TEST_CASE("a box chooses the parts inside it, Ctrl+A all of them", "[sheet][ordinary]") {
    Bench bench;
    bench.document.set_new(test::wien_loop());
    bench.drag(bench.view(60, 60), bench.view(300, 220));
    CHECK(bench.document.selection() == QStringList{"R2", "C2"});
    bench.key(Qt::Key_A, Qt::ControlModifier);
    CHECK(bench.document.selection().size() == 10);
}

TEST_CASE("a part dragged from the shelf is dropped where it is let go", "[sheet][ordinary]") {
    Bench bench;
    QMimeData mime;
    mime.setData(kind_mime, "capacitor");
    const QPoint at = bench.view(200, 100);
    QDragEnterEvent enter(at, Qt::CopyAction, &mime, Qt::LeftButton, {});
    QApplication::sendEvent(&bench.sheet, &enter);
    QDropEvent drop(at, Qt::CopyAction, &mime, Qt::LeftButton, {});
    QApplication::sendEvent(&bench.sheet, &drop);
    REQUIRE(bench.design().parts.size() == 1);
    CHECK(bench.design().parts[0].kind == "capacitor");
    CHECK(bench.design().parts[0].place->x == 200);
}
