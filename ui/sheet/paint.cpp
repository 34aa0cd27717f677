#include "ui/sheet/paint.hpp"

namespace sinewright::ui {

namespace {

QPen round_pen(const QColor& colour, double width) {
    return {colour, width, Qt::SolidLine, Qt::RoundCap, Qt::RoundJoin};
}

void paint_ribbon(QPainter& painter, const Overlay& overlay, const Theme& theme) {
    painter.setBrush(Qt::NoBrush);
    painter.setPen(round_pen(theme.ribbon, 20));
    painter.drawPath(overlay.ribbon);
    painter.setPen(round_pen(theme.ribbon_arrow, 2.2));
    for (const RibbonArrow& arrow : overlay.arrows) {
        painter.save();
        painter.translate(arrow.at);
        painter.rotate(arrow.degrees);
        const QPointF head[] = {{-5, -6}, {4, 0}, {-5, 6}};
        painter.drawPolyline(head, 3);
        painter.restore();
    }
}

void paint_joins(QPainter& painter, const Drawing& drawing, const Overlay& overlay, const Emphasis& emphasis,
                 const Theme& theme, double line_px) {
    for (std::size_t j = 0; j < drawing.joins().size(); ++j) {
        const Join& join = drawing.joins()[j];
        const QColor ink = overlay.faulty_nets.contains(join.net) ? theme.misses : theme.ink;
        painter.setBrush(Qt::NoBrush);
        for (std::size_t r = 0; r < join.runs.size(); ++r) {
            const bool selected = static_cast<int>(j) == emphasis.join && static_cast<int>(r) == emphasis.run;
            const bool hovered =
                static_cast<int>(j) == emphasis.hovered_join && static_cast<int>(r) == emphasis.hovered_run;
            painter.setPen(round_pen(selected || hovered ? theme.accent : ink, selected ? line_px * 1.75 : line_px));
            painter.drawPath(join.runs[r]);
        }
        painter.setPen(Qt::NoPen);
        painter.setBrush(ink);
        for (const QPointF& dot : join.dots) painter.drawEllipse(dot, 2 * line_px, 2 * line_px);
    }
}

void paint_earths(QPainter& painter, const Drawing& drawing, const Theme& theme, double line_px) {
    for (const Earth& earth : drawing.earths()) {
        const QPointF tip = sheet_point(earth.at), foot = tip + direction(earth.way) * 10;
        const QPointF half = QPointF(-direction(earth.way).y(), direction(earth.way).x()) * 13;
        painter.setPen(round_pen(theme.ink, line_px));
        painter.drawLine(tip, foot);
        painter.setPen(round_pen(theme.ink, line_px * 1.25));
        painter.drawLine(foot - half, foot + half);
    }
}

/// Ends that nothing is joined to.
void paint_free_ends(QPainter& painter, const Drawing& drawing, const Theme& theme) {
    for (const PartShape& part : drawing.parts())
        for (const PlacedPort& port : part.ports)
            if (!port.net) paint_ring(painter, sheet_point(port.at), theme.soft, theme.sheet, 3);
}

void paint_flags(QPainter& painter, const Drawing& drawing, const Theme& theme) {
    painter.setFont(theme.font(14, QFont::DemiBold));
    for (const Flag& flag : drawing.flags()) {
        if (flag.output) paint_ring(painter, sheet_point(flag.at), theme.ink, theme.sheet);
        painter.setPen(flag.output ? theme.ink : theme.soft);
        painter.drawText(flag.text_at, QString::fromStdString(flag.net));
    }
}

void paint_texts(QPainter& painter, const Drawing& drawing, const Overlay& overlay, const Theme& theme) {
    const QFont ref_font = theme.font(12), value_font = theme.font(14, QFont::DemiBold);
    for (std::size_t i = 0; i < drawing.texts().size(); ++i) {
        const PartText& text = drawing.texts()[i];
        painter.setFont(ref_font);
        painter.setPen(overlay.faulty_parts.contains(static_cast<int>(i)) ? theme.misses : theme.soft);
        painter.drawText(text.ref_at, text.ref);
        if (text.value.isEmpty()) continue;
        painter.setFont(value_font);
        painter.setPen(theme.ink);
        painter.drawText(text.value_at, text.value);
    }
}

void paint_cut(QPainter& painter, const CutMark& mark, const Theme& theme) {
    painter.save();
    painter.translate(mark.at);
    painter.rotate(mark.along.x() != 0 ? 0 : 90);
    painter.fillRect(QRectF(-6, -4, 12, 8), theme.ribbon); // the join is open between the brackets
    painter.setBrush(Qt::NoBrush);
    painter.setPen(round_pen(theme.cut, 3));
    for (const double side : {-1.0, 1.0}) {
        QPainterPath bracket(QPointF(side * 8, -14));
        bracket.quadTo(QPointF(side, 0), QPointF(side * 8, 14));
        painter.drawPath(bracket);
    }
    painter.restore();
    const QColor ground = mark.stale ? theme.soft : theme.cut;
    painter.setPen(mark.chosen ? QPen(theme.sheet, 1.5, Qt::DashLine) : QPen(Qt::NoPen));
    painter.setBrush(ground);
    painter.drawRoundedRect(mark.chip, mark.chip.height() / 2, mark.chip.height() / 2);
    painter.setPen(theme.sheet);
    painter.setFont(theme.font(13, QFont::DemiBold));
    painter.drawText(mark.chip, Qt::AlignCenter, mark.words);
}

void paint_fault(QPainter& painter, const FaultMark& fault, const Theme& theme) {
    if (fault.open_end) return paint_ring(painter, fault.badge, theme.misses, theme.sheet, 4);
    painter.setPen(round_pen(theme.misses, 1.6));
    painter.setBrush(theme.misses);
    const QPointF corners[] = {fault.badge + QPointF(0, -7), fault.badge + QPointF(7, 6), fault.badge + QPointF(-7, 6)};
    painter.drawPolygon(corners, 3);
    painter.setPen(round_pen(theme.sheet, 1.8));
    painter.drawLine(fault.badge + QPointF(0, -2), fault.badge + QPointF(0, 1));
    painter.drawPoint(fault.badge + QPointF(0, 4));
}

} // namespace

void paint_ring(QPainter& painter, QPointF at, const QColor& colour, const QColor& ground, double radius) {
    painter.setPen(QPen(colour, 2));
    painter.setBrush(ground);
    painter.drawEllipse(at, radius, radius);
}

void paint_part(QPainter& painter, const PartShape& part, const Theme& theme, const QColor& ink, double line_px) {
    painter.save();
    painter.setTransform(part.transform, true);
    SymbolPen pen(painter, theme, ink, line_px, part.upright());
    pen.cut_leads(part.cut_tips);
    part.symbol->draw(pen);
    painter.restore();
}

void paint_sheet(QPainter& painter, const Drawing& drawing, const Overlay& overlay, const Emphasis& emphasis,
                 const Theme& theme, double line_px) {
    painter.setRenderHint(QPainter::Antialiasing);
    painter.setRenderHint(QPainter::TextAntialiasing);
    paint_ribbon(painter, overlay, theme);
    paint_joins(painter, drawing, overlay, emphasis, theme, line_px);
    paint_earths(painter, drawing, theme, line_px);
    for (std::size_t p = 0; p < drawing.parts().size(); ++p) {
        const PartShape& part = drawing.parts()[p];
        if (emphasis.selected.contains(part.ref)) {
            painter.setPen(QPen(theme.accent, 1.5));
            painter.setBrush(Qt::NoBrush);
            const PartText& text = drawing.texts()[p];
            const QRectF whole = part.reach() | text.ref_box | text.value_box;
            painter.drawRoundedRect(whole.adjusted(-6, -6, 6, 6), 8, 8);
        }
        const QColor ink = overlay.faulty_parts.contains(static_cast<int>(p)) ? theme.misses : theme.ink;
        paint_part(painter, part, theme, ink, line_px);
    }
    paint_free_ends(painter, drawing, theme);
    paint_texts(painter, drawing, overlay, theme);
    paint_flags(painter, drawing, theme);
    if (overlay.cut) paint_cut(painter, *overlay.cut, theme);
    for (const FaultMark& fault : overlay.faults) paint_fault(painter, fault, theme);
}

} // namespace sinewright::ui
