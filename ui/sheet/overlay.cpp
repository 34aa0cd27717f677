#include "ui/sheet/overlay.hpp"
#include "core/quantity/quantity.hpp"
#include "ui/sheet/obstacles.hpp"
#include "ui/sheet/reading.hpp"
#include "ui/sheet/ribbon.hpp"
#include <QObject>
#include <algorithm>

namespace sinewright::ui {

namespace {

constexpr double chip_height_px = 24, chip_gap_px = 20;

std::pair<int, int> terminal_index(const Drawing& drawing, const TerminalRef& terminal) {
    const int part = drawing.part_index(terminal.part);
    if (part < 0) return {-1, -1};
    const auto& ports = drawing.parts()[static_cast<std::size_t>(part)].ports;
    for (std::size_t i = 0; i < ports.size(); ++i)
        if (ports[i].terminal == terminal.terminal) return {part, static_cast<int>(i)};
    return {part, -1};
}

QString sentence_of(const Fault& fault) {
    QString text = QString::fromStdString(fault.sentence);
    if (!fault.remedy.empty()) text += QLatin1Char(' ') + QString::fromStdString(fault.remedy);
    return text;
}

void say_margin(CutMark& mark, const Findings* findings) {
    if (!findings) {
        mark.words = QObject::tr("…");
        return;
    }
    if (!findings->loop) {
        mark.words = findings->faults.empty() ? QObject::tr("no loop gain here") : QObject::tr("mend the drawing");
        const Faults& faults = findings->loop.faults.empty() ? findings->faults : findings->loop.faults;
        if (!faults.empty()) mark.detail = sentence_of(faults.front());
        return;
    }
    const LoopFinding& loop = *findings->loop;
    if (!(loop.cut == mark.terminal)) { // the margin known is that of another cut
        mark.words = QObject::tr("…");
        mark.stale = true;
        return;
    }
    if (!loop.barkhausen) {
        mark.words = QObject::tr("no margin here");
        mark.detail = QString::fromStdString(loop.barkhausen_reason);
        return;
    }
    const double margin_db = loop.barkhausen->startup_margin_db;
    mark.words = (margin_db > 0 ? QStringLiteral("+") : QString()) + QString::fromStdString(plain_text(margin_db, 2)) +
                 QStringLiteral(" dB");
    mark.detail = QObject::tr("Start-up margin with the loop opened at %1.").arg(terminal_text(mark.terminal));
    if (loop.cut_chosen && !loop.cut_reason.empty())
        mark.detail += QLatin1Char(' ') + QString::fromStdString(loop.cut_reason);
}

/// Below, above, right or left of the brackets, where least is covered.
QRectF chip_place(const CutMark& mark, double width, const Obstacles& obstacles) {
    const double down = chip_gap_px + chip_height_px / 2, side = chip_gap_px + width / 2;
    const bool level = mark.along.y() == 0;
    std::vector<QPointF> offsets{{0, down}, {0, -down}, {side, 0}, {-side, 0}};
    if (!level) std::rotate(offsets.begin(), offsets.begin() + 2, offsets.end());
    for (const double x : {-1.0, 1.0})
        for (const double y : {1.0, -1.0}) offsets.emplace_back(x * (width / 2 + 12), y * down);
    QRectF best;
    double least = 0;
    for (const QPointF& offset : offsets) {
        const QRectF chip(mark.at.x() + offset.x() - width / 2, mark.at.y() + offset.y() - chip_height_px / 2, width,
                          chip_height_px);
        const double crossed = obstacles.overlap(chip.adjusted(-2, -2, 2, 2));
        if (best.isValid() && crossed >= least) continue;
        best = chip, least = crossed;
    }
    return best;
}

void set_cut(const Design& design, const Drawing& drawing, const Findings* findings, bool stale, const Theme& theme,
             Overlay& overlay) {
    CutMark mark;
    if (design.cut)
        mark.terminal = *design.cut;
    else if (findings && findings->loop)
        mark.terminal = findings->loop->cut, mark.chosen = true;
    else
        return;
    const auto [part, port] = terminal_index(drawing, mark.terminal);
    if (port < 0) return;
    lay_ribbon(design, drawing, mark.terminal, overlay);
    std::tie(mark.at, mark.along) = cut_point(drawing, part, port);
    mark.stale = stale;
    say_margin(mark, findings);
    Obstacles obstacles(drawing);
    for (const PartText& text : drawing.texts()) obstacles.add(text.ref_box), obstacles.add(text.value_box);
    const QFontMetricsF metrics(theme.font(13, QFont::DemiBold));
    mark.chip = chip_place(mark, metrics.horizontalAdvance(mark.words) + 24, obstacles);
    overlay.cut = mark;
}

QPointF badge_of_net(const Drawing& drawing, const std::string& net) {
    for (const Join& join : drawing.joins())
        if (join.net == net && !join.route.runs.empty() && join.route.runs.front().corners.size() > 1) {
            const auto& corners = join.route.runs.front().corners;
            return (sheet_point(corners[0]) + sheet_point(corners[1])) / 2 + QPointF(0, -14);
        }
    for (const PartShape& part : drawing.parts())
        for (const PlacedPort& port : part.ports)
            if (port.net == net) return sheet_point(port.at) + QPointF(0, -14);
    return {};
}

void mark_fault(const Fault& fault, const Drawing& drawing, Overlay& overlay) {
    const std::string net_word = "net ";
    if (fault.where.starts_with(net_word)) {
        const std::string net = fault.where.substr(net_word.size());
        const QPointF badge = badge_of_net(drawing, net);
        if (badge.isNull()) return;
        overlay.faulty_nets.insert(net);
        overlay.faults.push_back({badge, sentence_of(fault), false});
        return;
    }
    const auto dot = fault.where.find('.');
    const auto [part, port] = terminal_index(
        drawing, {fault.where.substr(0, dot), dot == std::string::npos ? "" : fault.where.substr(dot + 1)});
    if (part < 0) return;
    const PartShape& shape = drawing.parts()[static_cast<std::size_t>(part)];
    if (port >= 0 && fault.kind == FaultKind::unconnected_terminal) {
        const QPointF tip = sheet_point(shape.ports[static_cast<std::size_t>(port)].at);
        overlay.faults.push_back({tip, sentence_of(fault), true});
        return;
    }
    overlay.faulty_parts.insert(part);
    const QPointF badge = shape.body.topRight() + QPointF(8, -8);
    overlay.faults.push_back({badge, sentence_of(fault), false});
}

} // namespace

std::pair<QPointF, QPointF> cut_point(const Drawing& drawing, int part, int port) {
    const PlacedPort& placed = drawing.parts()[static_cast<std::size_t>(part)].ports[static_cast<std::size_t>(port)];
    const QPointF tip = sheet_point(placed.at);
    const auto [join, end] = drawing.join_at(part, port);
    if (join >= 0)
        for (const Run& run : drawing.joins()[static_cast<std::size_t>(join)].route.runs) {
            if ((run.from != end && run.to != end) || run.corners.size() < 2) continue;
            const auto& c = run.corners;
            const QPointF next = run.from == end ? sheet_point(c[1]) : sheet_point(c[c.size() - 2]);
            const QLineF first(tip, next);
            const QPointF along = (next - tip) / first.length();
            return {tip + along * std::min(20.0, first.length() / 2), along};
        }
    return {tip + direction(placed.out) * 10, direction(placed.out)};
}

Overlay overlay_of(const Design& design, const Drawing& drawing, const Findings* findings, bool stale,
                   const Theme& theme) {
    Overlay overlay;
    set_cut(design, drawing, findings, stale, theme, overlay);
    if (findings && !stale)
        for (const Fault& fault : findings->faults) mark_fault(fault, drawing, overlay);
    return overlay;
}

} // namespace sinewright::ui
