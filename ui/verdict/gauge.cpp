#include "ui/verdict/gauge.hpp"
#include "ui/theme/tabular_text.hpp"
#include "ui/theme/theme.hpp"
#include <QPainter>
#include <QPainterPath>
#include <QStyleOption>

namespace sinewright::ui {
namespace {

// Baselines and track, from the top of the gauge.
constexpr double name_y = 20, value_y = 50, track_y = 66, words_y = 98, fact_y = 115;
constexpr double track_height = 6, left = 2, right_room = 24;

} // namespace

Gauge::Gauge(QWidget* parent) : QAbstractButton(parent) {
    setFocusPolicy(Qt::StrongFocus);
    setCursor(Qt::PointingHandCursor);
    setAttribute(Qt::WA_Hover);
    setMaximumWidth(320);
    connect(&ThemeKeeper::instance(), &ThemeKeeper::changed, this, qOverload<>(&QWidget::update));
}

void Gauge::show_reading(const GaugeReading& reading) {
    reading_ = reading;
    setObjectName("gauge_" + reading.key);
    describe();
    update();
}

void Gauge::set_stale(bool stale) {
    if (stale == stale_) return;
    stale_ = stale;
    describe();
    update();
}

void Gauge::describe() {
    QString state;
    if (reading_.met) state = (*reading_.met ? tr("meets its target: ") : tr("misses its target: ")) + reading_.words;
    QStringList parts{reading_.value + " " + reading_.unit};
    if (!state.isEmpty()) parts << state;
    if (!reading_.fact.isEmpty()) parts << reading_.fact;
    if (stale_) parts << tr("being computed again");
    setAccessibleName(reading_.name);
    setAccessibleDescription(parts.join(", "));
    setToolTip(reading_.fact.isEmpty() ? reading_.name : reading_.name + ": " + reading_.fact);
}

void Gauge::paintEvent(QPaintEvent*) {
    QPainter painter(this);
    painter.setRenderHint(QPainter::Antialiasing);
    const Theme& t = theme();
    if (hasFocus() || underMouse()) {
        painter.setPen(QPen(hasFocus() ? t.accent : t.line, 1));
        painter.setBrush(Qt::NoBrush);
        painter.drawRoundedRect(QRectF(rect()).adjusted(-0.5 + 1, 0.5, -right_room + 16.5, -3.5), 6, 6);
    }
    painter.translate(left + 6, 0);
    painter.setFont(t.font(Theme::note_px));
    painter.setPen(t.soft);
    painter.drawText(QPointF(0, name_y), reading_.name);
    paint_value(painter);
    paint_track(painter);
    paint_words(painter);
}

void Gauge::paint_value(QPainter& painter) const {
    const Theme& t = theme();
    const double room = width() - left - right_room;
    const QFont unit_font = t.font(14);
    double px = Theme::gauge_px;
    const double unit_width = QFontMetricsF(unit_font).horizontalAdvance(" " + reading_.unit);
    while (px > 15 && tabular_width(t.font(px, QFont::DemiBold), reading_.value) + unit_width > room) px -= 1;
    painter.setFont(t.font(px, QFont::DemiBold));
    painter.setPen(stale_ ? t.faint : t.ink);
    const double value_width = draw_tabular(painter, {0, value_y}, reading_.value);
    painter.setFont(unit_font);
    painter.setPen(stale_ ? t.faint : t.soft);
    painter.drawText(QPointF(value_width + 5, value_y), reading_.unit);
}

void Gauge::paint_track(QPainter& painter) const {
    const Theme& t = theme();
    const double length = width() - left - right_room;
    const QRectF track(0, track_y - track_height / 2, length, track_height);
    painter.setPen(Qt::NoPen);
    painter.setBrush(t.line);
    painter.drawRoundedRect(track, track_height / 2, track_height / 2);
    if (reading_.band_from && reading_.band_to) {
        const QColor colour = reading_.met ? (*reading_.met ? t.meets : t.misses) : t.soft;
        painter.setBrush(faded(colour, stale_ ? 0.25 : 0.5));
        painter.drawRoundedRect(QRectF(track.left() + *reading_.band_from * length, track.top(),
                                       (*reading_.band_to - *reading_.band_from) * length, track_height),
                                track_height / 2, track_height / 2);
    }
    if (reading_.zero) {
        painter.setBrush(t.soft);
        painter.drawRect(QRectF(track.left() + *reading_.zero * length - 0.75, track.top() - 3, 1.5, track_height + 6));
    }
    if (!reading_.needle) return;
    const double x = track.left() + *reading_.needle * length;
    QPainterPath needle;
    if (reading_.beyond) { // points out of the end it lies beyond
        const double way = *reading_.needle > 0.5 ? 1 : -1;
        needle.moveTo(x - 8 * way, track_y + 4);
        needle.lineTo(x, track_y + 9);
        needle.lineTo(x - 8 * way, track_y + 14);
    } else {
        needle.moveTo(x, track_y + 5);
        needle.lineTo(x - 5, track_y + 13);
        needle.lineTo(x + 5, track_y + 13);
    }
    needle.closeSubpath();
    painter.setBrush(stale_ ? t.faint : t.ink);
    painter.drawPath(needle);
}

void Gauge::paint_words(QPainter& painter) const {
    const Theme& t = theme();
    const double room = width() - left - right_room + 8;
    double fact_at = words_y;
    if (!reading_.words.isEmpty()) {
        QColor colour = reading_.met ? (*reading_.met ? t.meets : t.misses) : t.soft;
        const QString sign = reading_.met ? QString(QChar(*reading_.met ? 0x2713 : 0x25B2)) + " " : QString();
        painter.setFont(t.font(Theme::note_px, QFont::DemiBold));
        painter.setPen(stale_ ? t.faint : colour);
        painter.drawText(QPointF(0, words_y),
                         QFontMetricsF(painter.font()).elidedText(sign + reading_.words, Qt::ElideRight, room));
        fact_at = fact_y;
    }
    painter.setFont(t.font(Theme::axis_px));
    painter.setPen(t.faint);
    painter.drawText(QPointF(0, fact_at),
                     QFontMetricsF(painter.font()).elidedText(reading_.fact, Qt::ElideRight, room));
}

} // namespace sinewright::ui
