#pragma once
/// A window under test, driven like a user does: through its widgets' events.
#include "ui/sheet/sheet.hpp"
#include "ui/shell/empty_sheet.hpp"
#include "ui/shell/main_window.hpp"
#include "ui/shell/message_bar.hpp"
#include "ui/shell/sheet_area.hpp"
#include "ui/shell/shelf.hpp"
#include "ui/shell/views.hpp"
#include "ui/theme/theme.hpp"
#include "ui/values/dials.hpp"
#include "ui/values/properties.hpp"
#include "ui/verdict/verdict_strip.hpp"
#include <QAbstractButton>
#include <QApplication>
#include <QLineEdit>
#include <QTest>
#include <catch2/catch.hpp>

namespace sinewright::ui {

struct Window : MainWindow {
    Window() : MainWindow(false) {
        ThemeKeeper::instance().use(ThemeChoice::light);
        resize(1440, 900);
        show();
        REQUIRE(QTest::qWaitForWindowExposed(this));
        settle();
    }

    /// Lets everything that waits happen, and the results come.
    void settle() {
        QApplication::processEvents();
        REQUIRE(analyst().wait_until_current(10000));
        QApplication::processEvents();
        QApplication::processEvents();
    }

    template <class T = QWidget> T& get(const QString& name) {
        T* found = findChild<T*>(name);
        INFO("no widget " << name.toStdString());
        REQUIRE(found);
        return *found;
    }

    void click(const QString& name) {
        QTest::mouseClick(&get(name), Qt::LeftButton);
        settle();
    }

    void type(QLineEdit& field, const QString& text) {
        field.setFocus();
        field.selectAll();
        QTest::keyClick(&field, Qt::Key_Delete);
        QTest::keyClicks(&field, text);
        QTest::keyClick(&field, Qt::Key_Return);
        settle();
    }

    void with_starter() { click("begin_starter"); }
    QString resistance(const char* ref) {
        const auto* value = document().design().find(ref)->find("resistance");
        return QString::fromStdString(std::get<Value>(*value).spelling);
    }
};

} // namespace sinewright::ui
