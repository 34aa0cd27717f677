/// Pictures to look at, and times to read: run by hand with "[.picture]" or "[.bench]"; files go to "sheet-pictures" in
/// the temporary folder.
#include "sheet_designs.hpp"
#include "ui/sheet/sheet.hpp"
#include <QApplication>
#include <QDir>
#include <QElapsedTimer>
#include <QImage>
#include <QKeyEvent>
#include <QMouseEvent>
#include <QPainter>
#include <catch2/catch.hpp>
#include <iostream>

using namespace sinewright;
using namespace sinewright::ui;

namespace {

QString file(const QString& name) {
    const QDir folder(QDir::tempPath() + "/sheet-pictures");
    folder.mkpath(".");
    return folder.filePath(name);
}

void paint_all_symbols(QPainter& painter, const Theme& look) {
    int row = 0;
    painter.setFont(look.font(12));
    for (const Symbol& symbol : all_symbols()) {
        painter.setPen(look.soft);
        painter.drawText(QPointF(8, row * 150 + 20),
                         QString::fromUtf8(symbol.kind.data(), static_cast<int>(symbol.kind.size())));
        for (int i = 0; i < 5; ++i) {
            Part part;
            part.kind = symbol.kind;
            paint_part(painter, shape_of(part, {120.0 + 180 * i, 80.0 + row * 150, i * 90 % 360, i == 4}), look,
                       look.ink);
        }
        paint_symbol(painter, symbol.kind, QRectF(960, row * 150 + 60, 26, 22), look);
        ++row;
    }
}

/// A ladder of Wien loops: ten parts each.
Design many_loops(int loops) {
    Design all;
    for (int i = 0; i < loops; ++i) {
        Design one = test::wien_loop();
        const auto refs = add_copies(all, one, (i % 3) * 900.0, (i / 3) * 760.0);
        if (i == 0) all.output = *all.find(refs[4])->net_at("out"), all.cut = TerminalRef{refs[4], "plus"};
    }
    return all;
}

} // namespace

TEST_CASE("all symbols in every turn", "[.picture]") {
    for (const Theme* look : {&light_theme(), &dark_theme()}) {
        QImage image(1020, 150 * static_cast<int>(all_symbols().size()), QImage::Format_RGB32);
        image.fill(look->sheet);
        QPainter painter(&image);
        painter.setRenderHint(QPainter::Antialiasing);
        paint_all_symbols(painter, *look);
        painter.end();
        image.save(file(look->dark ? "symbols-dark.png" : "symbols-light.png"));
    }
}

TEST_CASE("the Wien loop placed by hand", "[.picture]") {
    for (const ThemeChoice choice : {ThemeChoice::light, ThemeChoice::dark}) {
        ThemeKeeper::instance().choose(choice);
        Document document;
        Analyst analyst(document);
        SheetView sheet(document, analyst);
        sheet.resize(920, 736);
        document.set_new(test::wien_loop());
        analyst.wait_until_current(5000);
        sheet.zoom_to_fit();
        sheet.grab().save(file(choice == ThemeChoice::dark ? "wien-dark.png" : "wien-light.png"));
    }
}

TEST_CASE("every sample as opened", "[.picture]") {
    ThemeKeeper::instance().choose(ThemeChoice::light);
    const QDir samples(QString(SINEWRIGHT_SOURCE_DIR) + "/samples");
    for (const QString& name : samples.entryList({"*.sinewright"})) {
        Document document;
        Analyst analyst(document);
        SheetView sheet(document, analyst);
        sheet.resize(920, 736);
        QString message;
        REQUIRE(document.open(samples.filePath(name), &message));
        analyst.wait_until_current(20000);
        sheet.zoom_to_fit();
        sheet.grab().save(file(name.section('.', 0, 0) + ".png"));
    }
}

TEST_CASE("the sheet in the middle of things", "[.picture]") {
    ThemeKeeper::instance().choose(ThemeChoice::light);
    Document document;
    Analyst analyst(document);
    SheetView sheet(document, analyst);
    sheet.resize(920, 736);
    sheet.show();
    Design d = test::wien_loop();
    d.parts.push_back(starting_part(d, "jfet", {700, 560, 0, false}));
    document.set_new(d);
    analyst.wait_until_current(5000);
    const auto end = [&](const char* ref, const char* terminal) {
        const PartShape& part = sheet.drawing().parts()[static_cast<std::size_t>(sheet.drawing().part_index(ref))];
        return sheet.to_view(sheet_point(part.port(terminal)->at));
    };
    const auto send = [&](QEvent::Type type, QPointF at, Qt::MouseButton button, Qt::MouseButtons held) {
        QMouseEvent event(type, at, at, button, held, {});
        QApplication::sendEvent(&sheet, &event);
    };
    document.select({"R1", "C1"});
    sheet.grab().save(file("chosen.png"));
    send(QEvent::MouseButtonPress, end("J1", "g"), Qt::LeftButton, Qt::LeftButton);
    send(QEvent::MouseMove, end("J1", "g") - QPointF(60, -40), Qt::NoButton, Qt::LeftButton);
    sheet.grab().save(file("joining-free.png"));
    send(QEvent::MouseMove, end("R5", "a") + QPointF(3, 3), Qt::NoButton, Qt::LeftButton);
    sheet.grab().save(file("joining-end.png"));
    send(QEvent::MouseButtonRelease, end("J1", "g") - QPointF(100, -60), Qt::LeftButton, Qt::NoButton);
    sheet.grab().save(file("stub.png"));
    sheet.arm_kind("lamp");
    send(QEvent::MouseMove, QPointF(160, 500), Qt::NoButton, Qt::NoButton);
    sheet.grab().save(file("placing.png"));
    sheet.arm_kind({});
    QKeyEvent four(QEvent::KeyPress, Qt::Key_4, {}, "4");
    QApplication::sendEvent(&sheet, &four);
    sheet.findChild<QLineEdit*>("inline_edit")->setText("4k7");
    sheet.grab().save(file("typing.png"));
}

TEST_CASE("time of a frame while a part is dragged in a design of 60 parts", "[.bench]") {
    Document document;
    Analyst analyst(document);
    SheetView sheet(document, analyst);
    sheet.resize(920, 736);
    document.set_new(many_loops(6));
    REQUIRE(document.design().parts.size() == 60);
    analyst.wait_until_current(5000);
    QImage screen(sheet.size(), QImage::Format_RGB32);
    const QRectF body = sheet.drawing().parts()[1].body;
    const QPointF from = sheet.to_view(body.center());
    const auto send = [&](QEvent::Type type, QPointF at, Qt::MouseButton button) {
        QMouseEvent event(type, at, at, button, Qt::LeftButton, {});
        QApplication::sendEvent(&sheet, &event);
    };
    send(QEvent::MouseButtonPress, from, Qt::LeftButton);
    double moving = 0, painting = 0, most_moving = 0, most_painting = 0;
    constexpr int frames = 120;
    for (int i = 1; i <= frames; ++i) {
        QElapsedTimer timer;
        timer.start();
        send(QEvent::MouseMove, from + QPointF(i * 3, (i % 20) * 6) * sheet.zoom(), Qt::NoButton);
        const double moved = double(timer.nsecsElapsed()) / 1e6;
        sheet.render(&screen);
        const double painted = double(timer.nsecsElapsed()) / 1e6 - moved;
        moving += moved, painting += painted;
        most_moving = std::max(most_moving, moved), most_painting = std::max(most_painting, painted);
    }
    send(QEvent::MouseButtonRelease, from, Qt::LeftButton);
    std::cout << "a frame of dragging: " << moving / frames << " ms to lay (at most " << most_moving << "), "
              << painting / frames << " ms to paint (at most " << most_painting << ")\n";
}

TEST_CASE("time to open a design of 2000 parts, with and without places", "[.bench]") {
    Design d = many_loops(200);
    REQUIRE(d.parts.size() == max_parts);
    for (const bool placed : {true, false}) {
        if (!placed)
            for (Part& part : d.parts) part.place.reset();
        Document document;
        Analyst analyst(document);
        SheetView sheet(document, analyst);
        sheet.resize(920, 736);
        QElapsedTimer timer;
        timer.start();
        document.set_new(d);
        const double laid = double(timer.nsecsElapsed()) / 1e6;
        document.edit("Value", [](Design& design) { (void)step_value(design, design.parts[0].ref, 1, false); });
        std::cout << (placed ? "placed" : "not placed") << ": " << laid << " ms to open, "
                  << double(timer.nsecsElapsed()) / 1e6 - laid << " ms for an edit\n";
    }
}
