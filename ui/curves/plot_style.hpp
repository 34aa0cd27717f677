#pragma once
/// What all plots share: thin frame, light grid, plain numbers, titles at the ends of axes.
#include "ui/theme/theme.hpp"
#include <qcustomplot.h>

namespace sinewright::ui {

/// "100", "1k", "10k", "2M": a frequency on an axis.
QString axis_number(double value);

/// Decades with 2 and 5 between where there is room.
class DecadeTicker : public QCPAxisTicker {
  protected:
    QVector<double> createTickVector(double step, const QCPRange& range) override;
    QString getTickLabel(double tick, const QLocale& locale, QChar format, int precision) override;
};

/// Plain numbers with prefix and true minus.
class PlainTicker : public QCPAxisTicker {
  public:
    /// Ticks only at multiples of `step`; 0: chosen freely.
    explicit PlainTicker(double step = 0) : step_(step) {}

  protected:
    double getTickStep(const QCPRange& range) override;
    QString getTickLabel(double tick, const QLocale& locale, QChar format, int precision) override;

  private:
    double step_;
};

/// Frame, grid, ticks and fonts of one axis rectangle in the present theme.
void style_axes(QCPAxisRect* rect);
/// Background and antialiasing of the whole plot.
void style_plot(QCustomPlot* plot);
/// A small title in a corner outside the rectangle: above left (vertical axis) or below right (horizontal axis).
QCPItemText* add_title(QCustomPlot* plot, QCPAxisRect* rect, const QString& text, bool below);
void style_text(QCPItemText* text, const QColor& colour, double px = Theme::note_px, int weight = QFont::Normal);
QPen curve_pen(const QColor& colour, double width_px = 2);

} // namespace sinewright::ui
