#include "ui/sheet/part_shape.hpp"
#include <algorithm>
#include <cmath>

namespace sinewright::ui {

namespace {
constexpr double clearance_px = 6;    // between a body and the nearest join
constexpr double farthest_px = 15000; // a file may place parts anywhere; the sheet has an edge

int quarter_turns(const Place& place) { return ((place.turn / 90) % 4 + 4) % 4; }
double on_grid(double v) {
    if (!std::isfinite(v)) return 0;
    return std::round(std::clamp(v, -farthest_px, farthest_px) / grid_px) * grid_px;
}
} // namespace

Place place_of(const Part& part, const Places& worked_out) {
    Place place;
    if (part.place)
        place = *part.place;
    else if (const auto found = worked_out.find(part.ref); found != worked_out.end())
        place = found->second;
    place.x = on_grid(place.x), place.y = on_grid(place.y);
    place.turn = quarter_turns(place) * 90;
    return place;
}

Cell nearest_cell(QPointF at) {
    return {static_cast<int>(std::lround(at.x() / grid_px)), static_cast<int>(std::lround(at.y() / grid_px))};
}

QPointF direction(Way way) {
    const Cell c = stepped({0, 0}, way);
    return {double(c.x), double(c.y)};
}

Cell oriented(Cell cell, const Place& place) {
    if (place.flip) cell.x = -cell.x;
    for (int i = quarter_turns(place); i > 0; --i) cell = {-cell.y, cell.x};
    return cell;
}

Way oriented(Way way, const Place& place) {
    if (way == Way::any) return way;
    if (place.flip && (way == Way::left || way == Way::right)) way = opposite(way);
    return static_cast<Way>((static_cast<int>(way) + quarter_turns(place)) % 4);
}

std::vector<Cell> cells_under(const QRectF& body) {
    const QRectF wide = body.adjusted(-clearance_px, -clearance_px, clearance_px, clearance_px);
    std::vector<Cell> cells;
    const auto first = [](double v) { return static_cast<int>(std::ceil(v / grid_px)); };
    const auto last = [](double v) { return static_cast<int>(std::floor(v / grid_px)); };
    for (int y = first(wide.top()); y <= last(wide.bottom()); ++y)
        for (int x = first(wide.left()); x <= last(wide.right()); ++x) cells.push_back({x, y});
    return cells;
}

PartShape shape_of(const Part& part, const Place& place) {
    PartShape shape{part.ref, place, &symbol_of(part.kind), {}, {}, {}, {}};
    shape.transform.translate(place.x, place.y);
    shape.transform.rotate(place.turn);
    shape.transform.scale(place.flip ? -1 : 1, 1);
    shape.body = shape.transform.mapRect(shape.symbol->body);
    const Cell centre = nearest_cell({place.x, place.y});
    for (const Port& port : shape.symbol->ports) {
        const Cell offset = oriented(port.at, place);
        const std::string terminal(port.terminal);
        shape.ports.push_back(
            {terminal, {centre.x + offset.x, centre.y + offset.y}, oriented(port.out, place), part.net_at(terminal)});
    }
    return shape;
}

QTransform PartShape::upright() const {
    return QTransform(transform.m11(), transform.m12(), transform.m21(), transform.m22(), 0, 0).inverted();
}

const PlacedPort* PartShape::port(std::string_view terminal) const {
    const auto found =
        std::find_if(ports.begin(), ports.end(), [&](const PlacedPort& p) { return p.terminal == terminal; });
    return found == ports.end() ? nullptr : &*found;
}

std::vector<Cell> PartShape::covered() const {
    std::vector<Cell> cells = cells_under(body);
    for (const PlacedPort& port : ports) {
        Cell c = stepped(port.at, opposite(port.out));
        for (int i = 0; i < 4 && !body.contains(sheet_point(c)); ++i, c = stepped(c, opposite(port.out)))
            cells.push_back(c);
    }
    std::erase_if(cells, [&](Cell c) {
        return std::any_of(ports.begin(), ports.end(), [&](const PlacedPort& p) { return p.at == c; });
    });
    return cells;
}

QRectF PartShape::reach() const {
    QRectF rect = body;
    for (const PlacedPort& port : ports) {
        const QPointF p = sheet_point(port.at);
        rect.setLeft(std::min(rect.left(), p.x())), rect.setRight(std::max(rect.right(), p.x()));
        rect.setTop(std::min(rect.top(), p.y())), rect.setBottom(std::max(rect.bottom(), p.y()));
    }
    return rect;
}

} // namespace sinewright::ui
