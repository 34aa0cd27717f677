#pragma once
/// The symbols of the part kinds (IEC 60617 forms): where their terminals lie, what they cover, how they are drawn.
/// A new part kind is one entry in the table of symbols.cpp and one drawing function.
#include "ui/sheet/router.hpp"
#include "ui/theme/theme.hpp"
#include <QPainter>
#include <QPainterPath>
#include <span>
#include <string_view>

namespace sinewright::ui {

inline constexpr int grid_px = 20; ///< sheet units to a grid step
inline constexpr int lead_cut_px = 10;

/// Draws in one symbol's own coordinates: ink lines, paper fills, and marks that stay upright when the part is turned.
class SymbolPen {
  public:
    /// @param upright  undoes the part's turn and flip, for marks
    SymbolPen(QPainter& painter, const Theme& theme, const QColor& ink, double line_px, const QTransform& upright = {},
              double smallest_mark_px = 0);
    /// Leads to these tips end `lead_cut_px` early: the join draws the rest, to round its corner.
    void cut_leads(std::vector<QPointF> tips) { cut_tips_ = std::move(tips); }
    void lead(QPointF from, QPointF to);
    void line(QPointF from, QPointF to, double times = 1);
    void bar(QPointF from, QPointF to) { line(from, to, 1.25); }
    void box(const QRectF& rect, double corner = 2);
    void disc(QPointF centre, double radius);
    void shape(const QPainterPath& path, bool filled = false, double times = 1);
    void arrow(QPointF from, QPointF to, double head = 5);
    bool small() const { return smallest_mark_px_ > 0; } ///< a tile: only what shows at that size
    void mark(QPointF centre, const QString& text, double px, int weight = QFont::Medium);

  private:
    void set(double times, bool filled);
    QPainter& painter_;
    const Theme& theme_;
    QColor ink_;
    double line_px_;
    QTransform upright_;
    double smallest_mark_px_;
    std::vector<QPointF> cut_tips_;
};

struct Port {
    std::string_view terminal;
    Cell at; ///< grid steps from the part's centre, unturned
    Way out; ///< the way its lead points
};

struct Symbol {
    std::string_view kind;
    std::string_view tile; ///< short word under the shelf's tile
    QRectF body;           ///< what joins run round; unturned
    std::vector<Port> ports;
    void (*draw)(SymbolPen&) = nullptr;
    bool has_face = false; ///< marks inside: an amplifier's value stands below it
};

std::span<const Symbol> all_symbols();
/// A plain box without terminals for a kind that has no symbol.
const Symbol& symbol_of(std::string_view kind);

/// Draws a kind's symbol as large as fits into `into`, for tiles and lists.
void paint_symbol(QPainter& painter, std::string_view kind, const QRectF& into, const Theme& theme);

} // namespace sinewright::ui
