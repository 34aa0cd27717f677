#include "ui/theme/tabular_text.hpp"
#include <QFontMetricsF>
#include <algorithm>

namespace sinewright::ui {
namespace {

double digit_pitch(const QFontMetricsF& metrics) {
    double pitch = 0;
    for (char digit = '0'; digit <= '9'; ++digit) pitch = std::max(pitch, metrics.horizontalAdvance(QChar(digit)));
    return pitch;
}

/// Calls `place(piece, x)` for each digit and each run between digits; returns the whole width.
template <class F> double lay_out(const QFontMetricsF& metrics, const QString& text, F&& place) {
    const double pitch = digit_pitch(metrics);
    double x = 0;
    for (qsizetype i = 0; i < text.size();) {
        if (text[i].isDigit()) {
            place(text.mid(i, 1), x + (pitch - metrics.horizontalAdvance(text[i])) / 2);
            x += pitch, ++i;
            continue;
        }
        qsizetype end = i;
        while (end < text.size() && !text[end].isDigit()) ++end;
        const QString run = text.mid(i, end - i);
        place(run, x);
        x += metrics.horizontalAdvance(run), i = end;
    }
    return x;
}

} // namespace

double tabular_width(const QFont& font, const QString& text) {
    return lay_out(QFontMetricsF(font), text, [](const QString&, double) {});
}

double draw_tabular(QPainter& painter, QPointF at, const QString& text) {
    return lay_out(QFontMetricsF(painter.font()), text,
                   [&](const QString& piece, double x) { painter.drawText(at + QPointF(x, 0), piece); });
}

} // namespace sinewright::ui
