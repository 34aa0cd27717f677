#include "ui/sheet/obstacles.hpp"
#include "ui/sheet/drawing.hpp"
#include <cmath>

namespace sinewright::ui {

namespace {
constexpr double tile_px = 100;
template <class F> void each_tile(const QRectF& rect, F&& visit) {
    const auto tile = [](double v) { return static_cast<int>(std::floor(v / tile_px)); };
    for (int y = tile(rect.top()); y <= tile(rect.bottom()); ++y)
        for (int x = tile(rect.left()); x <= tile(rect.right()); ++x) visit(std::pair{x, y});
}
} // namespace

Obstacles::Obstacles(const Drawing& drawing) {
    for (const PartShape& part : drawing.parts()) {
        add(part.body);
        for (const PlacedPort& port : part.ports) {
            const QPointF tip = sheet_point(port.at), root = tip - direction(port.out) * grid_px;
            add(QRectF(tip, root).normalized().adjusted(-3, -3, 3, 3));
        }
    }
    for (const Earth& earth : drawing.earths()) add(earth.box());
    for (const Flag& flag : drawing.flags()) add(flag.text_box);
    for (const Join& join : drawing.joins())
        for (const Run& run : join.route.runs)
            for (std::size_t i = 1; i < run.corners.size(); ++i)
                add(QRectF(sheet_point(run.corners[i - 1]), sheet_point(run.corners[i]))
                        .normalized()
                        .adjusted(-4, -4, 4, 4));
}

void Obstacles::add(const QRectF& rect) {
    each_tile(rect, [&](std::pair<int, int> tile) { tiles_[tile].push_back(rect); });
}

double Obstacles::overlap(const QRectF& box) const {
    double area = 0;
    if (!box.isValid()) return area;
    each_tile(box, [&](std::pair<int, int> tile) {
        const auto found = tiles_.find(tile);
        if (found == tiles_.end()) return;
        for (const QRectF& other : found->second)
            if (const QRectF both = other & box; both.isValid()) area += both.width() * both.height();
    });
    return area;
}

} // namespace sinewright::ui
