#include "ui/sheet/ribbon.hpp"
#include "ui/sheet/signal_loop.hpp"
#include <cmath>

namespace sinewright::ui {

namespace {
constexpr double radius_px = 22, arrow_spacing_px = 120, shortest_for_arrow_px = 56;

void append(std::vector<QPointF>& points, QPointF p) {
    if (points.empty() || points.back() != p) points.push_back(p);
}

/// Through a part, along its leads and square to them.
void through(std::vector<QPointF>& points, const PartShape& part, const PlacedPort& in, const PlacedPort& out) {
    const QPointF a = sheet_point(in.at), b = sheet_point(out.at), centre = part.body.center();
    append(points, a);
    if (a.x() != b.x() && a.y() != b.y()) {
        const bool level = in.out == Way::left || in.out == Way::right;
        append(points, level ? QPointF(centre.x(), a.y()) : QPointF(a.x(), centre.y()));
        append(points, level ? QPointF(centre.x(), b.y()) : QPointF(b.x(), centre.y()));
    }
    append(points, b);
}

/// Along the drawn join from one terminal to the other; straight across where it is joined by name.
void along_join(std::vector<QPointF>& points, const Drawing& drawing, int part, const std::string& from, int next,
                const std::string& to, Overlay& overlay, double& since_arrow) {
    const auto index = [&](int p, const std::string& terminal) {
        const auto& ports = drawing.parts()[static_cast<std::size_t>(p)].ports;
        for (std::size_t i = 0; i < ports.size(); ++i)
            if (ports[i].terminal == terminal) return static_cast<int>(i);
        return -1;
    };
    const auto [join, start] = drawing.join_at(part, index(part, from));
    const auto [other_join, end] = drawing.join_at(next, index(next, to));
    if (join < 0 || join != other_join) return;
    const std::vector<QPointF> way =
        sheet_points(way_between(drawing.joins()[static_cast<std::size_t>(join)].route, start, end));
    for (std::size_t i = 0; i < way.size(); ++i) {
        append(points, way[i]);
        if (i == 0) continue;
        const QPointF step = way[i] - way[i - 1];
        const double length = std::hypot(step.x(), step.y());
        since_arrow += length;
        if (length < shortest_for_arrow_px || since_arrow < arrow_spacing_px) continue;
        overlay.arrows.push_back({way[i - 1] + step / 2, std::atan2(step.y(), step.x()) * 180 / M_PI});
        since_arrow = length / 2;
    }
}
} // namespace

void lay_ribbon(const Design& design, const Drawing& drawing, const TerminalRef& cut, Overlay& overlay) {
    const std::vector<LoopStep> loop = signal_loop(design, cut);
    std::vector<QPointF> points;
    double since_arrow = arrow_spacing_px;
    for (std::size_t i = 0; i < loop.size(); ++i) {
        const LoopStep &step = loop[i], &next = loop[(i + 1) % loop.size()];
        const PartShape& part = drawing.parts()[static_cast<std::size_t>(step.part)];
        const PlacedPort *in = part.port(step.entry), *out = part.port(step.exit);
        if (!in || !out) return;
        through(points, part, *in, *out);
        since_arrow += 80;
        along_join(points, drawing, step.part, step.exit, next.part, next.entry, overlay, since_arrow);
    }
    if (points.size() < 3) return;
    // Begin in the middle of a run, so that the closing corner is rounded like the others.
    std::size_t longest = 0;
    double most = 0;
    for (std::size_t i = 0; i + 1 < points.size(); ++i)
        if (const double length = QLineF(points[i], points[i + 1]).length(); length > most) most = length, longest = i;
    const QPointF start = (points[longest] + points[longest + 1]) / 2;
    std::vector<QPointF> ring{start};
    for (std::size_t i = 1; i <= points.size(); ++i) append(ring, points[(longest + i) % points.size()]);
    append(ring, start);
    overlay.ribbon = rounded(ring, radius_px);
}

} // namespace sinewright::ui
