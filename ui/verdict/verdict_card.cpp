#include "ui/verdict/verdict_card.hpp"
#include "ui/theme/theme.hpp"
#include <QPainter>
#include <QTextLayout>

namespace sinewright::ui {
namespace {

/// Draws wrapped text in at most `max_lines` lines (the last one elided); returns the y below it.
double draw_wrapped(QPainter& painter, const QString& text, const QRectF& into, int max_lines) {
    const QFontMetricsF metrics(painter.font());
    QTextLayout layout(text, painter.font());
    layout.beginLayout();
    double y = into.top();
    for (int i = 0; i < max_lines; ++i) {
        QTextLine line = layout.createLine();
        if (!line.isValid()) break;
        line.setLineWidth(into.width());
        const bool more = line.textStart() + line.textLength() < text.size();
        QString piece = text.mid(line.textStart(), line.textLength());
        if (i + 1 == max_lines && more)
            piece = metrics.elidedText(text.mid(line.textStart()), Qt::ElideRight, into.width());
        painter.drawText(QPointF(into.left(), y + metrics.ascent()), piece.trimmed());
        y += metrics.height();
    }
    layout.endLayout();
    return y;
}

} // namespace

VerdictCard::VerdictCard(QWidget* parent) : QWidget(parent) {
    setObjectName("verdict_card");
    setFixedWidth(232);
    connect(&ThemeKeeper::instance(), &ThemeKeeper::changed, this, qOverload<>(&QWidget::update));
}

void VerdictCard::say(Tone tone, const QString& headline, const QString& reason) {
    tone_ = tone, headline_ = headline, reason_ = reason;
    setAccessibleName(tr("Verdict: %1").arg(headline));
    setAccessibleDescription(reason);
    setToolTip(reason);
    update();
}

void VerdictCard::set_stale(bool stale) {
    if (stale_ == stale) return;
    stale_ = stale;
    update();
}

void VerdictCard::paintEvent(QPaintEvent*) {
    QPainter painter(this);
    painter.setRenderHint(QPainter::Antialiasing);
    const Theme& t = theme();
    const QColor grounds[] = {t.panel, t.meets_ground, t.misses_ground}, inks[] = {t.ink, t.meets, t.misses};
    const int tone = static_cast<int>(tone_);
    painter.setPen(Qt::NoPen);
    painter.setBrush(stale_ ? t.panel : grounds[tone]);
    painter.drawRoundedRect(rect(), 10, 10);

    const QRectF text = QRectF(rect()).adjusted(18, 12, -14, -10);
    QFont headline_font = t.font(21, QFont::DemiBold);
    const bool long_headline = QFontMetricsF(headline_font).horizontalAdvance(headline_) > text.width();
    if (long_headline) headline_font = t.font(Theme::question_px, QFont::DemiBold);
    painter.setFont(headline_font);
    painter.setPen(stale_ ? t.faint : inks[tone]);
    const double below = draw_wrapped(painter, headline_, text, 2);
    painter.setFont(t.font(Theme::note_px));
    painter.setPen(t.soft);
    const double line = QFontMetricsF(painter.font()).height();
    const QRectF rest(text.left(), below + 2, text.width(), text.bottom() - below - 2);
    draw_wrapped(painter, reason_, rest, std::max(1, int(rest.height() / line)));
}

} // namespace sinewright::ui
