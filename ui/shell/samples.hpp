#pragma once
/// The sample designs that come with the program, and the files opened lately.
#include <QString>
#include <QStringList>
#include <vector>

namespace sinewright::ui {

struct Sample {
    QString title, path;
};

/// Samples beside the program, in its installed data, or in the source tree; by title. Empty when there are none.
std::vector<Sample> find_samples();

/// Newest first, at most ten, only files that exist.
QStringList recent_files();
void remember_recent(const QString& path);

} // namespace sinewright::ui
