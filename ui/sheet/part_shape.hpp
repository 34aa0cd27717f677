#pragma once
/// One part laid on the sheet: its symbol turned and set down, its terminals in grid cells.
#include "core/design/design.hpp"
#include "ui/sheet/symbols.hpp"
#include <QTransform>
#include <map>

namespace sinewright::ui {

/// Places worked out for parts whose design gives none, by reference.
using Places = std::map<std::string, Place, std::less<>>;
/// The design's place of a part, else the one worked out, else the origin; on the grid and within reach.
Place place_of(const Part& part, const Places& worked_out);

Cell nearest_cell(QPointF at);
inline QPointF sheet_point(Cell c) { return {double(c.x) * grid_px, double(c.y) * grid_px}; }
QPointF direction(Way way); ///< unit vector; (0, 0) for any

struct PlacedPort {
    std::string terminal;
    Cell at;
    Way out = Way::any;
    std::optional<std::string> net;
};

struct PartShape {
    std::string ref;
    Place place;
    const Symbol* symbol = nullptr;
    QTransform transform; ///< symbol → sheet
    QRectF body;          ///< on the sheet
    std::vector<PlacedPort> ports;
    std::vector<QPointF> cut_tips; ///< symbol coordinates; see SymbolPen::cut_leads

    QTransform upright() const; ///< undoes turn and flip
    const PlacedPort* port(std::string_view terminal) const;
    /// Body and leads as grid cells, without the terminals themselves.
    std::vector<Cell> covered() const;
    QRectF reach() const; ///< body and leads
};

PartShape shape_of(const Part& part, const Place& place);
/// Turned and flipped as `place` says, about the origin.
Cell oriented(Cell cell, const Place& place);
Way oriented(Way way, const Place& place);
/// The cells a body covers, with the clearance a join keeps from it.
std::vector<Cell> cells_under(const QRectF& body);

} // namespace sinewright::ui
