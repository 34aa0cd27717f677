#include "ui/shell/samples.hpp"
#include <QCoreApplication>
#include <QDir>
#include <QFileInfo>
#include <QJsonDocument>
#include <QJsonObject>
#include <QSettings>
#include <algorithm>

namespace sinewright::ui {
namespace {

constexpr int most_recent = 10;
constexpr const char* recent_key = "files/recent";

QString samples_folder() {
    const QDir program(QCoreApplication::applicationDirPath());
    for (const char* place : {"samples", "../share/sinewright/samples"})
        if (program.exists(place)) return program.absoluteFilePath(place);
    // A build tree lies a few folders below the source tree.
    QDir above = program;
    for (int levels = 0; levels < 5 && above.cdUp(); ++levels)
        if (above.exists("samples") && above.exists("CMakeLists.txt")) return above.absoluteFilePath("samples");
    return {};
}

/// Only the title is wanted: a sample is read in full when it is opened.
QString title_of(const QFileInfo& file) {
    QFile content(file.absoluteFilePath());
    if (!content.open(QIODevice::ReadOnly)) return file.completeBaseName();
    const QString title = QJsonDocument::fromJson(content.readAll()).object().value("title").toString();
    return title.isEmpty() ? file.completeBaseName() : title;
}

} // namespace

std::vector<Sample> find_samples() {
    std::vector<Sample> samples;
    const QString folder = samples_folder();
    if (folder.isEmpty()) return samples;
    for (const QFileInfo& file : QDir(folder).entryInfoList({"*.sinewright"}, QDir::Files, QDir::Name))
        samples.push_back({title_of(file), file.absoluteFilePath()});
    std::sort(samples.begin(), samples.end(), [](const Sample& a, const Sample& b) { return a.title < b.title; });
    return samples;
}

QStringList recent_files() {
    QStringList files = QSettings().value(recent_key).toStringList();
    files.removeIf([](const QString& path) { return !QFileInfo::exists(path); });
    return files;
}

void remember_recent(const QString& path) {
    QStringList files = recent_files();
    const QString whole = QFileInfo(path).absoluteFilePath();
    files.removeAll(whole);
    files.prepend(whole);
    QSettings().setValue(recent_key, files.mid(0, most_recent));
}

} // namespace sinewright::ui
