#include "ui/sheet/symbols.hpp"
#include "ui/sheet/symbol_forms.hpp"
#include <algorithm>
#include <array>
#include <cmath>

namespace sinewright::ui {

namespace {

std::vector<Port> in_line(std::string_view first, std::string_view last, int reach = 2) {
    return {{first, {-reach, 0}, Way::left}, {last, {reach, 0}, Way::right}};
}

QRectF centred(double width, double height) { return {-width / 2, -height / 2, width, height}; }

/// The table: one entry a part kind. Terminals lie on grid points.
const std::array symbols{
    Symbol{"resistor", "R", centred(56, 22), in_line("a", "b"), forms::resistor},
    Symbol{"capacitor", "C", centred(12, 34), in_line("a", "b"), forms::capacitor},
    Symbol{"inductor", "L", {-28, -12, 56, 16}, in_line("a", "b"), forms::inductor},
    Symbol{"potentiometer",
           "pot",
           centred(56, 22),
           {{"a", {-2, 0}, Way::left}, {"w", {0, -2}, Way::up}, {"b", {2, 0}, Way::right}},
           forms::potentiometer},
    Symbol{"opamp",
           "op-amp",
           centred(110, 112),
           {{"plus", {-4, -2}, Way::left}, {"minus", {-4, 2}, Way::left}, {"out", {4, 0}, Way::right}},
           forms::opamp,
           true},
    Symbol{"limiter", "limiter", centred(48, 48), in_line("in", "out"), forms::limiter},
    Symbol{"diode", "diode", centred(24, 24), in_line("a", "k"), forms::diode},
    Symbol{"zener", "zener", centred(24, 24), in_line("a", "k"), forms::zener},
    Symbol{"lamp", "lamp", centred(38, 38), in_line("a", "b"), forms::lamp},
    Symbol{"thermistor", "bead", {-32, -18, 64, 38}, in_line("a", "b"), forms::thermistor},
    Symbol{"jfet",
           "FET",
           {-14, -22, 38, 44},
           {{"d", {1, -2}, Way::up}, {"g", {-2, 0}, Way::left}, {"s", {1, 2}, Way::down}},
           forms::jfet},
    Symbol{"photocell",
           "cell",
           centred(88, 72),
           {{"anode", {-3, -1}, Way::left},
            {"cathode", {-3, 1}, Way::left},
            {"a", {3, -1}, Way::right},
            {"b", {3, 1}, Way::right}},
           forms::photocell},
    Symbol{"multiplier",
           "times",
           centred(72, 72),
           {{"x", {-3, -1}, Way::left}, {"y", {-3, 1}, Way::left}, {"out", {3, 0}, Way::right}},
           forms::multiplier},
    Symbol{"servo", "servo", centred(72, 56), in_line("sense", "control", 3), forms::servo},
    Symbol{
        "supply", "supply", centred(36, 12), {{"plus", {0, -2}, Way::up}, {"minus", {0, 2}, Way::down}}, forms::supply},
};

void unknown_box(SymbolPen& pen) { pen.box(centred(56, 56)), pen.mark({0, 0}, QStringLiteral("?"), 17); }

} // namespace

std::span<const Symbol> all_symbols() { return symbols; }

const Symbol& symbol_of(std::string_view kind) {
    static const Symbol unknown{"", "", centred(56, 56), {}, unknown_box};
    const auto found = std::find_if(symbols.begin(), symbols.end(), [&](const Symbol& s) { return s.kind == kind; });
    return found == symbols.end() ? unknown : *found;
}

SymbolPen::SymbolPen(QPainter& painter, const Theme& theme, const QColor& ink, double line_px,
                     const QTransform& upright, double smallest_mark_px)
    : painter_(painter),
      theme_(theme),
      ink_(ink),
      line_px_(line_px),
      upright_(upright),
      smallest_mark_px_(smallest_mark_px) {}

void SymbolPen::set(double times, bool filled) {
    painter_.setPen(QPen(ink_, line_px_ * times, Qt::SolidLine, Qt::RoundCap, Qt::RoundJoin));
    painter_.setBrush(filled ? QBrush(theme_.raised) : QBrush(Qt::NoBrush));
}

void SymbolPen::lead(QPointF from, QPointF to) {
    const double length = std::hypot(to.x() - from.x(), to.y() - from.y());
    for (const QPointF& tip : cut_tips_) {
        const QPointF step = (to - from) * (lead_cut_px / length);
        if (tip == from)
            from += step;
        else if (tip == to)
            to -= step;
    }
    line(from, to);
}

void SymbolPen::line(QPointF from, QPointF to, double times) {
    set(times, false);
    painter_.drawLine(from, to);
}

void SymbolPen::box(const QRectF& rect, double corner) {
    set(1, true);
    painter_.drawRoundedRect(rect, corner, corner);
}

void SymbolPen::disc(QPointF centre, double radius) {
    set(1, true);
    painter_.drawEllipse(centre, radius, radius);
}

void SymbolPen::shape(const QPainterPath& path, bool filled, double times) {
    set(times, filled);
    painter_.drawPath(path);
}

void SymbolPen::arrow(QPointF from, QPointF to, double head) {
    const double angle = std::atan2(to.y() - from.y(), to.x() - from.x());
    QPainterPath path(from);
    path.lineTo(to);
    for (const double side : {2.6, -2.6}) {
        path.moveTo(to);
        path.lineTo(to + head * QPointF(std::cos(angle + side), std::sin(angle + side)));
    }
    shape(path, false, 0.85);
}

void SymbolPen::mark(QPointF centre, const QString& text, double px, int weight) {
    if (px < smallest_mark_px_) return;
    painter_.save();
    painter_.translate(centre);
    painter_.setTransform(upright_, true);
    painter_.setPen(ink_);
    painter_.setFont(theme_.font(px, weight));
    painter_.drawText(QRectF(-40, -20, 80, 40), Qt::AlignCenter, text);
    painter_.restore();
}

void paint_symbol(QPainter& painter, std::string_view kind, const QRectF& into, const Theme& theme) {
    const Symbol& symbol = symbol_of(kind);
    constexpr double lead_shown = 8; // a tile shows the form, not the length of the leads
    QRectF bounds = symbol.body;
    for (const Port& port : symbol.ports) {
        const QPointF tip(port.at.x * grid_px, port.at.y * grid_px);
        bounds.setLeft(std::min(bounds.left(), std::max(tip.x(), symbol.body.left() - lead_shown)));
        bounds.setRight(std::max(bounds.right(), std::min(tip.x(), symbol.body.right() + lead_shown)));
        bounds.setTop(std::min(bounds.top(), std::max(tip.y(), symbol.body.top() - lead_shown)));
        bounds.setBottom(std::max(bounds.bottom(), std::min(tip.y(), symbol.body.bottom() + lead_shown)));
    }
    const double scale = std::min(into.width() / bounds.width(), into.height() / bounds.height());
    painter.save();
    painter.setRenderHint(QPainter::Antialiasing);
    painter.setClipRect(into.adjusted(-1, -1, 1, 1), Qt::IntersectClip);
    painter.translate(into.center());
    painter.scale(scale, scale);
    painter.translate(-bounds.center());
    SymbolPen pen(painter, theme, theme.ink, 1.6 / scale, {}, 7 / scale);
    symbol.draw(pen);
    painter.restore();
}

} // namespace sinewright::ui
