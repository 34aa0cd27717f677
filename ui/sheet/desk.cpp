#include "ui/sheet/desk.hpp"
#include "ui/sheet/auto_place.hpp"
#include "ui/sheet/editing.hpp"
#include <algorithm>
#include <cmath>

namespace sinewright::ui {

namespace {
constexpr double run_reach_px = 7;
double distance(QPointF a, QPointF b) { return std::hypot(a.x() - b.x(), a.y() - b.y()); }
/// From a point to a horizontal or vertical piece.
double distance(QPointF p, QPointF a, QPointF b) {
    const double x = std::clamp(p.x(), std::min(a.x(), b.x()), std::max(a.x(), b.x()));
    const double y = std::clamp(p.y(), std::min(a.y(), b.y()), std::max(a.y(), b.y()));
    return distance(p, QPointF(x, y));
}
} // namespace

QString text_of(const std::string& s) { return QString::fromStdString(s); }

QString named(const std::vector<std::string>& refs) {
    return refs.size() == 1 ? text_of(refs.front()) : QObject::tr("%n parts", nullptr, static_cast<int>(refs.size()));
}

void Desk::work_out_places() {
    const Design& shown = design();
    const bool missing = std::any_of(shown.parts.begin(), shown.parts.end(),
                                     [&](const Part& p) { return !p.place && !worked_out_.contains(p.ref); });
    if (!missing) return;
    Design known = shown;
    fix_places(known, worked_out_);
    worked_out_.merge(auto_places(known));
}

void Desk::take_over() {
    work_out_places();
    drawing_.take_over(design(), worked_out_, theme());
    emphasis.join = emphasis.run = emphasis.hovered_join = emphasis.hovered_run = -1;
    take_over_findings();
}

void Desk::take_over_findings() {
    const ShownPtr latest = analyst.latest();
    const bool stale = latest && latest->revision != document.revision();
    // A value out of date for less than 100 ms is not greyed yet: it would only flicker.
    overlay_ = overlay_of(design(), drawing_, latest ? &latest->findings : nullptr, stale && analyst.stale_too_long(),
                          theme());
    if (repaint) repaint();
}

void Desk::preview(const Change& change) {
    Design changed = document.design();
    fix_places(changed, worked_out_);
    change(changed);
    preview_ = std::move(changed);
    take_over();
}

void Desk::end_preview() {
    if (!preview_) return;
    preview_.reset();
    take_over();
}

void Desk::edit(const QString& name, const Change& change, const QString& merge_key) {
    preview_.reset();
    const quint64 before = document.revision();
    document.edit(name, change, merge_key);
    if (document.revision() == before) take_over(); // nothing changed, but a preview may have been drawn
}

void Desk::lay_out(const QString& name, const Change& change, const QString& merge_key) {
    edit(
        name, [&](Design& d) { fix_places(d, worked_out_), change(d); }, merge_key);
}

QString Desk::attempt(const QString& name, const std::function<QString(Design&)>& change, bool lays_out) {
    Design changed = document.design();
    if (lays_out) fix_places(changed, worked_out_);
    const QString refusal = change(changed);
    if (refusal.isEmpty())
        edit(name, [&](Design& d) { d = std::move(changed); });
    else
        end_preview();
    return refusal;
}

bool Desk::try_edit(const QString& name, const std::function<QString(Design&)>& change) {
    const QString refusal = attempt(name, change);
    if (!refusal.isEmpty() && say) say(refusal);
    return refusal.isEmpty();
}

TerminalRef Desk::terminal(const Hit& hit) const {
    const PartShape& shape = part(hit.part);
    return {shape.ref, shape.ports[static_cast<std::size_t>(hit.port)].terminal};
}

std::vector<std::string> Desk::selected() const {
    std::vector<std::string> refs;
    for (const QString& ref : document.selection()) refs.push_back(ref.toStdString());
    return refs;
}

int Desk::selected_part() const {
    const QStringList& refs = document.selection();
    return refs.size() == 1 ? drawing_.part_index(refs.front().toStdString()) : -1;
}

Hit Desk::hit(QPointF at, double reach_px) const {
    if (overlay_.cut && overlay_.cut->chip.contains(at)) return {Hit::On::cut};
    Hit nearest;
    double least = reach_px;
    if (overlay_.cut && distance(at, overlay_.cut->at) < least) {
        least = distance(at, overlay_.cut->at);
        nearest = {Hit::On::cut};
    }
    for (std::size_t p = 0; p < drawing_.parts().size(); ++p)
        for (std::size_t t = 0; t < drawing_.parts()[p].ports.size(); ++t)
            if (const double d = distance(at, sheet_point(drawing_.parts()[p].ports[t].at)); d < least) {
                least = d;
                nearest = {Hit::On::terminal, static_cast<int>(p), static_cast<int>(t)};
            }
    if (nearest.on != Hit::On::nothing) return nearest;
    for (std::size_t f = 0; f < drawing_.flags().size(); ++f) {
        const Flag& flag = drawing_.flags()[f];
        if (flag.text_box.contains(at) || distance(at, sheet_point(flag.at)) < 8)
            return {Hit::On::flag, -1, -1, -1, -1, static_cast<int>(f)};
    }
    for (std::size_t p = 0; p < drawing_.texts().size(); ++p) {
        if (drawing_.texts()[p].value_box.contains(at)) return {Hit::On::value, static_cast<int>(p)};
        if (drawing_.texts()[p].ref_box.contains(at)) return {Hit::On::ref, static_cast<int>(p)};
    }
    for (std::size_t p = drawing_.parts().size(); p-- > 0;)
        if (drawing_.parts()[p].body.adjusted(-4, -4, 4, 4).contains(at)) return {Hit::On::part, static_cast<int>(p)};
    for (std::size_t j = 0; j < drawing_.joins().size(); ++j)
        for (std::size_t r = 0; r < drawing_.joins()[j].route.runs.size(); ++r) {
            const auto& corners = drawing_.joins()[j].route.runs[r].corners;
            for (std::size_t i = 1; i < corners.size(); ++i)
                if (distance(at, sheet_point(corners[i - 1]), sheet_point(corners[i])) < run_reach_px)
                    return {Hit::On::run, -1, -1, static_cast<int>(j), static_cast<int>(r)};
        }
    for (std::size_t p = 0; p < drawing_.parts().size(); ++p)
        if (drawing_.parts()[p].reach().adjusted(-2, -2, 2, 2).contains(at) && drawing_.parts()[p].ports.size() == 2)
            return {Hit::On::part, static_cast<int>(p)};
    return {};
}

} // namespace sinewright::ui
