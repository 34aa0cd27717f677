#pragma once
/// Paints a drawing and what lies over it. Nothing is worked out here.
#include "ui/sheet/overlay.hpp"

namespace sinewright::ui {

/// What is picked out while drawing.
struct Emphasis {
    std::set<std::string> selected; ///< part references
    int focused = -1;               ///< part with the keyboard's attention
    int join = -1, run = -1;        ///< selected run
    int hovered_join = -1, hovered_run = -1;
};

void paint_sheet(QPainter& painter, const Drawing& drawing, const Overlay& overlay, const Emphasis& emphasis,
                 const Theme& theme, double line_px = 2);
void paint_part(QPainter& painter, const PartShape& part, const Theme& theme, const QColor& ink, double line_px = 2);
void paint_ring(QPainter& painter, QPointF at, const QColor& colour, const QColor& ground, double radius = 5);

} // namespace sinewright::ui
