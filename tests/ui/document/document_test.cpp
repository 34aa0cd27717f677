#include "ui/document/document.hpp"
#include "ui/shell/starter.hpp"
#include <QFile>
#include <QTemporaryDir>
#include <catch2/catch.hpp>

using namespace sinewright;
using namespace sinewright::ui;

namespace {

void move(Document& document, double x, const QString& merge = {}) {
    document.edit(
        "Move R1", [&](Design& design) { design.find("R1")->place->x = x; }, merge);
}

QByteArray bytes_of(const QString& path) {
    QFile file(path);
    REQUIRE(file.open(QIODevice::ReadOnly));
    return file.readAll();
}

} // namespace

TEST_CASE("undo and redo exchange the design and bring the selection back", "[document][ordinary]") {
    Document document;
    document.set_new(starter_design());
    document.select({"R1"});
    document.edit("Delete R1", [](Design& design) { design.parts.erase(design.parts.begin() + 1); });
    REQUIRE(document.design().find("R1") == nullptr);
    CHECK(document.selection().isEmpty());
    CHECK(document.undo_text() == "Undo delete R1");

    document.select({"C1"});
    document.undo();
    CHECK(document.design() == starter_design());
    CHECK(document.selection() == QStringList{"R1"});
    CHECK(document.redo_text() == "Redo delete R1");
    document.redo();
    CHECK(document.design().find("R1") == nullptr);
    CHECK(document.selection() == QStringList{"C1"});
}

TEST_CASE("a drag is one undo step, and none when it ends where it began", "[document][ordinary]") {
    Document document;
    document.set_new(starter_design());
    const double start = document.design().find("R1")->place->x;
    for (int i = 1; i <= 50; ++i) move(document, start + i, "drag");
    document.end_merge();
    CHECK(document.history().count() == 1);
    CHECK(document.design().find("R1")->place->x == start + 50);
    for (int i = 49; i >= 20; --i) move(document, start + i, "drag");
    CHECK(document.history().count() == 2);
    move(document, start + 50, "drag");
    CHECK(document.history().count() == 1);
    document.end_merge();
    document.undo();
    CHECK(document.design() == starter_design());
}

TEST_CASE("a change that leaves the design as it was adds no step", "[document][ordinary]") {
    Document document;
    document.set_new(starter_design());
    const auto revision = document.revision();
    document.edit("Nothing", [](Design&) {});
    CHECK(document.history().count() == 0);
    CHECK(document.revision() == revision);
    CHECK(!document.modified());
}

TEST_CASE("every change, undone or redone, raises the revision once", "[document][ordinary]") {
    Document document;
    document.set_new(starter_design());
    int changes = 0;
    QObject::connect(&document, &Document::changed, &document, [&] { ++changes; });
    const auto revision = document.revision();
    move(document, 1000);
    document.undo();
    document.redo();
    CHECK(changes == 3);
    CHECK(document.revision() == revision + 3);
}

TEST_CASE("a saved design reopens the same and saves the same bytes", "[document][ordinary]") {
    QTemporaryDir folder;
    const QString path = folder.filePath("loop.sinewright"), again = folder.filePath("again.sinewright");
    Document document;
    document.set_new(starter_design());
    move(document, 500);
    CHECK(document.modified());
    QString message;
    REQUIRE(document.save(path, &message));
    CHECK(message.isEmpty());
    CHECK(!document.modified());
    CHECK(document.path() == path);

    Document reopened;
    REQUIRE(reopened.open(path, &message));
    CHECK(reopened.design() == document.design());
    REQUIRE(reopened.save(again, &message));
    CHECK(bytes_of(path) == bytes_of(again));

    document.undo();
    CHECK(document.modified()); // the file holds something else now
}

TEST_CASE("a save that fails says why, keeps the edits and keeps them marked as edits", "[document][errors]") {
    QTemporaryDir folder;
    Document document;
    document.set_new(starter_design());
    move(document, 500);
    const Design before = document.design();
    QString message;
    CHECK(!document.save(folder.filePath("no such folder/loop.sinewright"), &message));
    CHECK(!message.isEmpty());
    CHECK(document.modified());
    CHECK(document.path().isEmpty());
    CHECK(document.design() == before);
}

TEST_CASE("a file that cannot be read leaves the design, its history and its path alone", "[document][errors]") {
    QTemporaryDir folder;
    const QString path = folder.filePath("bad.sinewright");
    QFile bad(path);
    REQUIRE(bad.open(QIODevice::WriteOnly));
    bad.write("{\"format\": \"sinewright-design\", ");
    bad.close();
    Document document;
    document.set_new(starter_design());
    move(document, 500);
    const Design before = document.design();
    for (const QString& wrong : {path, folder.filePath("missing.sinewright"), folder.path()}) {
        QString message;
        CHECK(!document.open(wrong, &message));
        CHECK(!message.isEmpty());
        CHECK(document.design() == before);
        CHECK(document.history().count() == 1);
        CHECK(document.path().isEmpty());
    }
}
