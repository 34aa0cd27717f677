#include "ui/sheet/drawing.hpp"
#include <algorithm>
#include <climits>
#include <cmath>
#include <set>

namespace sinewright::ui {

namespace {
constexpr double corner_radius_px = 10;
constexpr double earth_lead_px = 10, earth_half_bar_px = 13;

/// Cells a name needs to the right of its point.
int name_cells(const std::string& name) { return 1 + static_cast<int>(name.size() * 9 + 12) / grid_px; }
} // namespace

QRectF Earth::box() const {
    const QPointF tip = sheet_point(at), end = tip + direction(way) * (earth_lead_px + 2);
    const double wide = earth_half_bar_px + 1;
    return way == Way::left || way == Way::right ? QRectF(QPointF(std::min(tip.x(), end.x()), tip.y() - wide),
                                                          QPointF(std::max(tip.x(), end.x()), tip.y() + wide))
                                                 : QRectF(QPointF(tip.x() - wide, std::min(tip.y(), end.y())),
                                                          QPointF(tip.x() + wide, std::max(tip.y(), end.y())));
}

std::vector<QPointF> sheet_points(const std::vector<Cell>& cells) {
    std::vector<QPointF> points;
    for (Cell c : cells) points.push_back(sheet_point(c));
    return points;
}

QPainterPath rounded(const std::vector<QPointF>& corners, double radius) {
    QPainterPath path;
    if (corners.empty()) return path;
    path.moveTo(corners.front());
    const auto toward = [](QPointF from, QPointF to, double by) {
        const double length = std::hypot(to.x() - from.x(), to.y() - from.y());
        return length > 0 ? from + (to - from) * (by / length) : from;
    };
    for (std::size_t i = 1; i + 1 < corners.size(); ++i) {
        const QPointF before = corners[i - 1], here = corners[i], after = corners[i + 1];
        const double share_before = i == 1 ? 1 : 0.5,
                     share_after = i + 2 == corners.size() ? 1 : 0.5; // ends give all they have
        const double room = std::min(
            {radius, QLineF(before, here).length() * share_before, QLineF(here, after).length() * share_after});
        path.lineTo(toward(here, before, room));
        path.quadTo(here, toward(here, after, room));
    }
    path.lineTo(corners.back());
    return path;
}

void Drawing::take_over(const Design& design, const Places& worked_out, const Theme& theme) {
    parts_.clear();
    for (const Part& part : design.parts) parts_.push_back(shape_of(part, place_of(part, worked_out)));
    earths_.clear();
    for (int p = 0; p < static_cast<int>(parts_.size()); ++p)
        for (int t = 0; t < static_cast<int>(parts_[static_cast<std::size_t>(p)].ports.size()); ++t) {
            const PlacedPort& port = parts_[static_cast<std::size_t>(p)].ports[static_cast<std::size_t>(t)];
            if (port.net == ground_net) earths_.push_back({p, t, port.at, port.out});
        }
    set_flags(design, theme);
    set_joins();
    draw_joins();
    texts_ = place_texts(design, *this, theme);
    extent_ = {};
    for (const PartShape& part : parts_) extent_ |= part.reach();
    for (const PartText& text : texts_) extent_ |= text.ref_box | text.value_box;
    for (const Earth& earth : earths_) extent_ |= earth.box();
    for (const Flag& flag : flags_) extent_ |= flag.text_box;
    for (const Join& join : joins_)
        for (const QPainterPath& run : join.runs) extent_ |= run.boundingRect();
}

int Drawing::part_index(std::string_view ref) const {
    const auto found = std::find_if(parts_.begin(), parts_.end(), [&](const PartShape& p) { return p.ref == ref; });
    return found == parts_.end() ? -1 : static_cast<int>(found - parts_.begin());
}

std::pair<int, int> Drawing::join_at(int part, int port) const {
    for (std::size_t j = 0; j < joins_.size(); ++j)
        for (std::size_t e = 0; e < joins_[j].ends.size(); ++e)
            if (joins_[j].ends[e].part == part && joins_[j].ends[e].port == port)
                return {static_cast<int>(j), static_cast<int>(e)};
    return {-1, -1};
}

/// To the right of one of the net's terminals, where the ring and its name lie on nothing.
Cell Drawing::room_for_output(const std::string& net) const {
    int right = INT_MIN;
    std::vector<PlacedPort> ends;
    for (const PartShape& part : parts_)
        for (const PlacedPort& port : part.ports)
            if (port.net == net) ends.push_back(port), right = std::max(right, port.at.x);
    const auto free = [&](Cell at) {
        const QRectF wanted(sheet_point(at) + QPointF(-16, -14), QSizeF(16.0 + name_cells(net) * grid_px, 28));
        return std::none_of(parts_.begin(), parts_.end(), [&](const PartShape& part) {
            return part.reach().adjusted(-4, -4, 4, 4).intersects(wanted);
        });
    };
    Cell best = ends.empty() ? Cell{} : Cell{right + 3, ends.front().at.y};
    int least = INT_MAX;
    for (const PlacedPort& end : ends)
        for (int dx = 2; dx <= 12; ++dx)
            for (int dy = -6; dy <= 6; ++dy) {
                const Cell at{end.at.x + dx, end.at.y + dy};
                const int turned = (end.out == Way::right || dy == 0 ? 0 : 1) - (end.terminal == "out" ? 6 : 0);
                const int cost = std::abs(dx - 3) * 2 + std::abs(dy) * 3 + (dy != 0 ? 4 : 0) + turned +
                                 2 * std::max(0, right - at.x + 3);
                if (cost < least && free(at)) least = cost, best = at;
            }
    return best;
}

void Drawing::set_flags(const Design& design, const Theme& theme) {
    flags_.clear();
    const QFontMetricsF metrics(theme.font(14, QFont::DemiBold));
    const auto add = [&](Flag flag) {
        const double gap = flag.output ? 12 : 6;
        flag.text_at = sheet_point(flag.at) + QPointF(gap, 5);
        const QString name = QString::fromStdString(flag.net);
        flag.text_box =
            QRectF(flag.text_at.x() - gap, flag.text_at.y() - 15, metrics.horizontalAdvance(name) + gap + 4, 20);
        flags_.push_back(std::move(flag));
    };
    const auto used = [&](const std::string& net) {
        return std::any_of(parts_.begin(), parts_.end(), [&](const PartShape& part) {
            return std::any_of(part.ports.begin(), part.ports.end(), [&](const PlacedPort& p) { return p.net == net; });
        });
    };
    bool output_named = false;
    for (std::size_t i = 0; i < design.labels.size(); ++i) {
        const Label& label = design.labels[i];
        const Place at = place_of({"", "", {}, {}, {}, {}, {}, Place{label.x, label.y, 0, false}}, {});
        const bool output = label.net == design.output && !label.stub_of && !output_named;
        output_named = output_named || output;
        add({label.net, nearest_cell({at.x, at.y}), output, static_cast<int>(i), label.stub_of, {}, {}});
    }
    if (!output_named && !design.output.empty() && design.output != ground_net && used(design.output))
        add({design.output, room_for_output(design.output), true, -1, std::nullopt, {}, {}});
}

void Drawing::set_joins() {
    joins_.clear();
    Terrain terrain;
    std::vector<std::string> order;
    std::map<std::string, std::vector<JoinEnd>, std::less<>> ends;
    std::map<std::string, std::vector<JoinEnd>, std::less<>> stubs; // by "part.terminal"
    std::map<std::pair<std::string, std::string>, std::size_t> stub_flags;
    for (std::size_t f = 0; f < flags_.size(); ++f)
        if (flags_[f].stub_of) stub_flags[{flags_[f].stub_of->part, flags_[f].stub_of->terminal}] = f;
    for (std::size_t p = 0; p < parts_.size(); ++p) {
        for (Cell c : parts_[p].covered()) terrain.blocked.push_back(c);
        for (std::size_t t = 0; t < parts_[p].ports.size(); ++t) {
            const PlacedPort& port = parts_[p].ports[t];
            const JoinEnd end{static_cast<int>(p), static_cast<int>(t), -1};
            if (!port.net || port.net == ground_net) {
                terrain.blocked.push_back(port.at);
                if (port.net) terrain.blocked.push_back(stepped(port.at, port.out));
                continue;
            }
            const auto stub = stub_flags.find({parts_[p].ref, port.terminal});
            if (stub != stub_flags.end() && flags_[stub->second].net == *port.net) {
                stubs[parts_[p].ref + "." + port.terminal] = {end, {-1, -1, static_cast<int>(stub->second)}};
                continue;
            }
            auto& list = ends[*port.net];
            if (list.empty()) order.push_back(*port.net);
            list.push_back(end);
        }
    }
    for (std::size_t f = 0; f < flags_.size(); ++f) {
        for (int i = 1; i < name_cells(flags_[f].net); ++i)
            terrain.blocked.push_back(stepped(flags_[f].at, Way::right, i));
        if (!flags_[f].stub_of && ends.contains(flags_[f].net))
            ends[flags_[f].net].push_back({-1, -1, static_cast<int>(f)});
    }
    const auto want = [&](const std::string& name, const std::string& net, const std::vector<JoinEnd>& list) {
        WantedNet wanted{name, {}};
        for (const JoinEnd& end : list)
            if (end.flag >= 0)
                wanted.pins.push_back({flags_[static_cast<std::size_t>(end.flag)].at, Way::any});
            else {
                const PlacedPort& port =
                    parts_[static_cast<std::size_t>(end.part)].ports[static_cast<std::size_t>(end.port)];
                wanted.pins.push_back({port.at, port.out});
            }
        joins_.push_back({net, list, {}, {}, {}});
        terrain.nets.push_back(std::move(wanted));
    };
    for (const auto& [name, list] : stubs)
        want("\x01" + name, flags_[static_cast<std::size_t>(list[1].flag)].net, list);
    std::stable_sort(order.begin(), order.end(),
                     [&](const std::string& a, const std::string& b) { return ends[a].size() < ends[b].size(); });
    for (const std::string& net : order) want(net, net, ends[net]);
    const std::vector<Route>& routes = router_.lay(terrain);
    for (std::size_t j = 0; j < joins_.size(); ++j) joins_[j].route = routes[j];
}

/// Paths with rounded corners, and a dot wherever three lines or more come together.
void Drawing::draw_joins() {
    for (Join& join : joins_) {
        std::map<Cell, int> lines;
        for (std::size_t k = 0; k < join.ends.size(); ++k)
            if (join.ends[k].part >= 0) ++lines[join.route.knots[k].at];
        for (const Run& run : join.route.runs) {
            if (run.corners.size() < 2) continue;
            ++lines[run.corners.front()], ++lines[run.corners.back()];
        }
        for (const Run& run : join.route.runs) {
            std::vector<QPointF> points = sheet_points(run.corners);
            const auto round_into_lead = [&](int knot, QPointF tip, QPointF next) {
                const int pin = join.route.knots[static_cast<std::size_t>(knot)].pin;
                const JoinEnd end = pin < 0 ? JoinEnd{} : join.ends[static_cast<std::size_t>(pin)];
                if (end.part < 0) return tip;
                PartShape& part = parts_[static_cast<std::size_t>(end.part)];
                const PlacedPort& port = part.ports[static_cast<std::size_t>(end.port)];
                const QPointF out = direction(port.out);
                if (lines[port.at] != 2 || QPointF::dotProduct(next - tip, out) != 0) return tip;
                const Cell unturned = part.symbol->ports[static_cast<std::size_t>(end.port)].at;
                part.cut_tips.push_back(sheet_point(unturned));
                return tip - out * lead_cut_px;
            };
            if (points.size() > 1) {
                const QPointF head = round_into_lead(run.from, points.front(), points[1]);
                const QPointF tail = round_into_lead(run.to, points.back(), points[points.size() - 2]);
                if (head != points.front()) points.insert(points.begin(), head);
                if (tail != points.back()) points.push_back(tail);
            }
            join.runs.push_back(rounded(points, corner_radius_px));
        }
        for (const auto& [cell, count] : lines)
            if (count >= 3) join.dots.push_back(sheet_point(cell));
    }
}

} // namespace sinewright::ui
