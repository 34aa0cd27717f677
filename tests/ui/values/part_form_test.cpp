#include "tests/ui/shell/window.hpp"
#include "ui/values/part_form.hpp"
#include "ui/values/quantity_field.hpp"
#include <QLabel>

using namespace sinewright;
using namespace sinewright::ui;

namespace {

struct Selected : Window {
    explicit Selected(const QString& ref) {
        with_starter();
        document().select({ref});
        settle();
    }
    QuantityField& field(const QString& name) {
        auto* form = sheet_area().properties().part_form();
        REQUIRE(form);
        auto* found = form->findChild<QuantityField*>(name);
        REQUIRE(found);
        return *found;
    }
    bool says_fault(const QString& name) {
        for (QLabel* label : field(name).parentWidget()->findChildren<QLabel*>())
            if (label->property("role") == "fault" && label->isVisible() && !label->text().isEmpty()) return true;
        return false;
    }
};

} // namespace

TEST_CASE("a typed value keeps its spelling and is one undo step", "[values][ordinary]") {
    Selected window("R4");
    const int steps = window.document().history().count();
    window.type(window.field("resistance"), "9k1");
    CHECK(window.resistance("R4") == "9k1");
    CHECK(window.document().history().count() == steps + 1);
    CHECK(window.document().undo_text() == "Undo resistance of R4");
}

TEST_CASE("text that is no value, or one out of range, is refused in words beside the field", "[values][errors]") {
    Selected window("R4");
    const Design before = window.document().design();
    for (const char* wrong : {"4k7x", "-10k", "0"}) {
        INFO(wrong);
        window.type(window.field("resistance"), wrong);
        CHECK(window.says_fault("resistance"));
        CHECK(window.document().design() == before);
    }
    QTest::keyClick(&window.field("resistance"), Qt::Key_Escape);
    CHECK(window.field("resistance").text() == "10k");
    CHECK(!window.says_fault("resistance"));
}

TEST_CASE("arrow keys step through the series that goes with the tolerance", "[values][ordinary]") {
    Selected window("R4");
    const int steps = window.document().history().count();
    window.field("resistance").setFocus();
    QTest::keyClick(&window.field("resistance"), Qt::Key_Up);
    CHECK(window.resistance("R4") == "11k"); // E24: 10, 11, 12 (IEC 60063:2015)
    QTest::keyClick(&window.field("resistance"), Qt::Key_Up);
    CHECK(window.resistance("R4") == "12k");
    QTest::keyClick(&window.field("resistance"), Qt::Key_Down, Qt::ShiftModifier);
    CHECK(window.resistance("R4") == "11k88"); // 1 % less
    CHECK(window.document().history().count() == steps + 1);
    window.type(window.field("tolerance"), "1%");
    window.type(window.field("resistance"), "10k");
    window.field("resistance").setFocus();
    QTest::keyClick(&window.field("resistance"), Qt::Key_Up);
    CHECK(window.resistance("R4") == "10k2"); // E96
}

TEST_CASE("the wheel steps a value only while its field has the keyboard", "[values][ordinary]") {
    Selected window("R4");
    QuantityField& field = window.field("resistance");
    const auto turn = [&](int angle) {
        QWheelEvent wheel({5, 5}, field.mapToGlobal(QPointF(5, 5)), {}, {0, angle}, {}, {}, Qt::NoScrollPhase, false);
        QApplication::sendEvent(&field, &wheel);
    };
    window.sheet_area().sheet().setFocus();
    turn(120);
    CHECK(window.resistance("R4") == "10k");
    field.setFocus();
    turn(120);
    CHECK(window.resistance("R4") == "11k");
}

TEST_CASE("a value taken away goes back to its default; one that is needed is asked for", "[values][errors]") {
    Selected window("U1");
    window.type(window.field("slew_rate"), "");
    CHECK(window.document().design().find("U1")->find("slew_rate") == nullptr);
    Selected other("R4");
    other.type(other.field("resistance"), "");
    CHECK(other.says_fault("resistance"));
    CHECK(other.resistance("R4") == "10k");
}

TEST_CASE("renaming a part renames it in dials too, and the selection follows", "[values][ordinary]") {
    Selected window("R3");
    window.type(window.get<QLineEdit>("reference"), "R30");
    CHECK(window.document().design().find("R3") == nullptr);
    REQUIRE(window.document().design().find("R30"));
    CHECK(window.document().design().dials.at(1).sets == std::vector<std::string>{"R30.resistance"});
    CHECK(window.document().selection() == QStringList{"R30"});
    window.type(window.get<QLineEdit>("reference"), "R4");
    CHECK(window.document().design().find("R30"));
}

TEST_CASE("a dial is made and taken away beside the value it sets", "[values][ordinary]") {
    Selected window("R4");
    window.click("dial_for_resistance");
    REQUIRE(window.document().design().dials.size() == 3);
    CHECK(window.document().design().dials[2].sets == std::vector<std::string>{"R4.resistance"});
    CHECK(window.sheet_area().dials().rows().size() == 3);
    window.click("dial_for_resistance");
    CHECK(window.document().design().dials.size() == 2);
    CHECK(window.sheet_area().dials().rows().size() == 2);
}

TEST_CASE("deleting the selected part leaves no form and can be undone", "[values][ordinary]") {
    Selected window("R5");
    window.click("delete_part");
    CHECK(window.document().design().find("R5") == nullptr);
    CHECK(window.sheet_area().properties().part_form() == nullptr);
    window.document().undo();
    window.settle();
    CHECK(window.document().selection() == QStringList{"R5"});
    REQUIRE(window.sheet_area().properties().part_form());
    CHECK(window.sheet_area().properties().part_form()->ref() == "R5");
}
