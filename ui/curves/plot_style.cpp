#include "ui/curves/plot_style.hpp"
#include <cmath>

namespace sinewright::ui {

QString axis_number(double value) {
    const double size = std::abs(value);
    static const std::pair<double, const char*> prefixes[] = {{1e9, "G"}, {1e6, "M"}, {1e3, "k"}};
    QString text;
    for (const auto& [factor, letter] : prefixes)
        if (size >= factor * (1 - 1e-9)) {
            text = QString::number(size / factor, 'g', 6) + letter;
            break;
        }
    if (text.isEmpty()) text = QString::number(size, 'g', 6);
    return value < 0 && size > 0 ? QStringLiteral("−") + text : text;
}

QVector<double> DecadeTicker::createTickVector(double, const QCPRange& range) {
    QVector<double> ticks;
    if (!(range.lower > 0)) return ticks;
    const double decades = std::log10(range.upper / range.lower);
    const std::vector<double> within = decades > 4     ? std::vector<double>{1}
                                       : decades > 1.2 ? std::vector<double>{1, 2, 5}
                                                       : std::vector<double>{1, 1.5, 2, 3, 4, 5, 7};
    for (double decade = std::pow(10, std::floor(std::log10(range.lower))); decade <= range.upper; decade *= 10)
        for (const double digit : within)
            if (digit * decade >= range.lower * (1 - 1e-9) && digit * decade <= range.upper * (1 + 1e-9))
                ticks << digit * decade;
    return ticks;
}

QString DecadeTicker::getTickLabel(double tick, const QLocale&, QChar, int) { return axis_number(tick); }

double PlainTicker::getTickStep(const QCPRange& range) { return step_ > 0 ? step_ : QCPAxisTicker::getTickStep(range); }

QString PlainTicker::getTickLabel(double tick, const QLocale&, QChar, int) {
    return axis_number(std::abs(tick) < 1e-12 ? 0 : tick);
}

void style_axes(QCPAxisRect* rect) {
    const Theme& t = theme();
    rect->setBackground(QBrush(t.raised));
    for (QCPAxis* axis : rect->axes()) {
        axis->setBasePen(QPen(t.line, 1));
        axis->setTickPen(QPen(t.line, 1));
        axis->setSubTicks(false);
        axis->setTickLength(0, 0);
        axis->setTickLabelColor(t.soft);
        axis->setTickLabelFont(t.font(Theme::axis_px));
        axis->setTickLabelPadding(5);
        axis->grid()->setPen(QPen(t.grid, 1));
        axis->grid()->setZeroLinePen(QPen(t.grid, 1));
        axis->grid()->setSubGridVisible(false);
    }
}

void style_plot(QCustomPlot* plot) {
    plot->setBackground(QBrush(theme().panel));
    plot->setNotAntialiasedElements(QCP::aeAxes | QCP::aeGrid);
    plot->setNoAntialiasingOnDrag(false);
}

QCPItemText* add_title(QCustomPlot* plot, QCPAxisRect* rect, const QString& text, bool below) {
    auto* title = new QCPItemText(plot);
    title->setClipToAxisRect(false);
    title->setSelectable(false);
    title->position->setType(QCPItemPosition::ptAxisRectRatio);
    title->position->setAxisRect(rect);
    title->position->setCoords(below ? 1 : 0, below ? 1 : 0);
    title->setPositionAlignment(below ? Qt::AlignRight | Qt::AlignTop : Qt::AlignLeft | Qt::AlignBottom);
    title->setPadding(below ? QMargins(0, 22, 0, 0) : QMargins(0, 0, 0, 4));
    title->setText(text);
    style_text(title, theme().soft, Theme::axis_px);
    return title;
}

void style_text(QCPItemText* text, const QColor& colour, double px, int weight) {
    text->setColor(colour);
    text->setFont(theme().font(px, weight));
}

QPen curve_pen(const QColor& colour, double width_px) {
    QPen pen(colour, width_px);
    pen.setCapStyle(Qt::RoundCap);
    pen.setJoinStyle(Qt::RoundJoin);
    return pen;
}

} // namespace sinewright::ui
