#pragma once
/// Figures on a fixed pitch, so that a number that changes does not dance. Qt 6.4 has no way to ask a font for its
/// tabular figures, so digits are set one by one at the width of the widest.
#include <QPainter>
#include <QString>

namespace sinewright::ui {

double tabular_width(const QFont& font, const QString& text);
/// Draws with the painter's font and pen, baseline at `at`; returns the width.
double draw_tabular(QPainter& painter, QPointF at, const QString& text);

} // namespace sinewright::ui
