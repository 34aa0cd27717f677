/// Joining by dragging from a terminal's ring, and by keys.
#include "ui/sheet/editing.hpp"
#include "ui/sheet/gestures.hpp"
#include "ui/sheet/reading.hpp"
#include <QObject>
#include <cmath>

namespace sinewright::ui {

namespace {

constexpr double target_reach_px = 14;

class DragJoin : public Gesture {
  public:
    DragJoin(Desk& desk, const Hit& terminal) : desk_(desk), from_(desk.terminal(terminal)) {
        const PlacedPort& port = desk.part(terminal.part).ports[static_cast<std::size_t>(terminal.port)];
        start_ = end_ = sheet_point(port.at);
        out_ = port.out;
    }
    void move(QPointF at, Qt::KeyboardModifiers) override {
        desk_.end_preview(); // the drawing as it is decides what lies here
        end_ = at;
        target_ = desk_.hit(at, target_reach_px);
        if (target_.on == Hit::On::terminal && desk_.terminal(target_) == from_) target_ = {};
        if (takes())
            desk_.preview([this](Design& d) { (void)apply(d); });
        else
            desk_.repaint();
    }
    bool finish(QPointF at, Qt::KeyboardModifiers) override {
        desk_.end_preview();
        end_ = at;
        target_ = desk_.hit(at, target_reach_px);
        const double length = std::hypot(end_.x() - start_.x(), end_.y() - start_.y());
        if (takes())
            desk_.try_edit(name(), [this](Design& d) { return apply(d); });
        else if (target_.on == Hit::On::nothing && length > grid_px)
            leave_stub();
        else if (target_.on == Hit::On::part)
            desk_.say(QObject::tr("Let go at one of the part's ends to join it."));
        desk_.repaint();
        return true;
    }
    void abandon() override { desk_.end_preview(), desk_.repaint(); }
    bool knows_drawing() const override { return true; }
    void paint(QPainter& painter) const override {
        painter.setPen(QPen(theme().accent, 2, takes() ? Qt::SolidLine : Qt::DashLine, Qt::RoundCap));
        painter.setBrush(Qt::NoBrush);
        if (!takes()) {
            const bool level = out_ == Way::left || out_ == Way::right;
            const QPointF corner = level ? QPointF(end_.x(), start_.y()) : QPointF(start_.x(), end_.y());
            painter.drawPath(rounded({start_, corner, end_}, 10));
        }
        paint_ring(painter, start_, theme().accent, theme().sheet, 6);
        if (target_.on == Hit::On::terminal)
            paint_ring(painter, sheet_point(desk_.part(target_.part).ports[static_cast<std::size_t>(target_.port)].at),
                       theme().accent, theme().sheet, 6);
    }

  private:
    bool takes() const {
        return target_.on == Hit::On::terminal || target_.on == Hit::On::run || target_.on == Hit::On::flag;
    }
    std::string target_net() const {
        return target_.on == Hit::On::run ? desk_.drawing().joins()[static_cast<std::size_t>(target_.join)].net
                                          : desk_.drawing().flags()[static_cast<std::size_t>(target_.flag)].net;
    }
    QString name() const {
        if (target_.on != Hit::On::terminal)
            return QObject::tr("Join %1 to %2").arg(terminal_text(from_), text_of(target_net()));
        const std::string other = desk_.part(target_.part).ref;
        return other == from_.part ? QObject::tr("Join ends of %1").arg(text_of(other))
                                   : QObject::tr("Join %1 and %2").arg(text_of(from_.part), text_of(other));
    }
    QString apply(Design& d) const {
        return target_.on == Hit::On::terminal ? join(d, from_, desk_.terminal(target_))
                                               : join_to_net(d, from_, target_net());
    }
    void leave_stub() {
        const QPointF at = sheet_point(nearest_cell(end_));
        desk_.try_edit(QObject::tr("Name the net at %1").arg(terminal_text(from_)),
                       [&](Design& d) { return add_stub(d, from_, at.x(), at.y()); });
    }

    Desk& desk_;
    TerminalRef from_;
    QPointF start_, end_;
    Way out_ = Way::any;
    Hit target_;
};

/// Arrow keys go from end to end; the join key or Enter takes the first, then the second.
class KeyJoin : public Gesture {
  public:
    KeyJoin(Desk& desk, int part) : desk_(desk), at_{part, 0} {
        const auto& ports = desk.part(part).ports;
        for (std::size_t t = 0; t < ports.size(); ++t)
            if (!ports[t].net) {
                at_.second = static_cast<int>(t);
                break;
            }
        tell();
    }
    void move(QPointF, Qt::KeyboardModifiers) override {}
    bool finish(QPointF, Qt::KeyboardModifiers) override { return true; }
    void abandon() override { desk_.repaint(); }
    bool knows_drawing() const override { return true; }
    bool key(const QKeyEvent& event) override {
        switch (event.key()) {
        case Qt::Key_Right:
            return go(Way::right);
        case Qt::Key_Left:
            return go(Way::left);
        case Qt::Key_Up:
            return go(Way::up);
        case Qt::Key_Down:
            return go(Way::down);
        case Qt::Key_G:
            if (!event.modifiers().testFlag(Qt::ControlModifier)) return false;
            done_ = desk_.try_edit(QObject::tr("Ground %1").arg(text_of(here().part)),
                                   [this](Design& d) { return ground(d, here()); });
            return true;
        case Qt::Key_J:
            if (!event.modifiers().testFlag(Qt::ControlModifier)) return false;
            [[fallthrough]];
        case Qt::Key_Return:
        case Qt::Key_Enter:
            take();
            return true;
        default:
            return false;
        }
    }
    void paint(QPainter& painter) const override {
        if (first_) paint_ring(painter, first_at_, theme().accent, theme().accent, 6);
        paint_ring(painter, spot(), theme().accent, theme().sheet, 8);
    }
    bool by_click() const override { return true; }
    bool over() const override { return done_; }

  private:
    TerminalRef here() const { return desk_.terminal({Hit::On::terminal, at_.first, at_.second}); }
    QPointF spot() const { return sheet_point(desk_.part(at_.first).ports[static_cast<std::size_t>(at_.second)].at); }
    bool go(Way way) {
        at_ = terminal_towards(desk_.drawing(), at_, way);
        tell();
        return true;
    }
    void tell() {
        const auto& net = desk_.part(at_.first).ports[static_cast<std::size_t>(at_.second)].net;
        const QString where = net ? QObject::tr("on %1").arg(text_of(*net)) : QObject::tr("free");
        desk_.say(
            first_
                ? QObject::tr("%1, %2. Enter joins it to %3.").arg(terminal_text(here()), where, terminal_text(*first_))
                : QObject::tr("%1, %2. Enter begins a join here.").arg(terminal_text(here()), where));
        desk_.repaint();
    }
    void take() {
        if (!first_) {
            first_ = here(), first_at_ = spot();
            tell();
            return;
        }
        const TerminalRef second = here();
        done_ = desk_.try_edit(QObject::tr("Join %1 and %2").arg(text_of(first_->part), text_of(second.part)),
                               [&](Design& d) { return join(d, *first_, second); });
    }

    Desk& desk_;
    std::pair<int, int> at_;
    std::optional<TerminalRef> first_;
    QPointF first_at_;
    bool done_ = false;
};

/// How well a step leads where an arrow key points; nothing: not that way at all.
std::optional<double> step_quality(QPointF step, Way way) {
    const QPointF d = direction(way);
    const double ahead = QPointF::dotProduct(step, d), aside = std::fabs(step.x() * d.y() - step.y() * d.x());
    if (ahead <= 0 || aside > 2 * ahead) return std::nullopt;
    return ahead + 2 * aside;
}

} // namespace

GesturePtr join_gesture(Desk& desk, const Hit& terminal) { return std::make_unique<DragJoin>(desk, terminal); }
GesturePtr key_join_gesture(Desk& desk, int part) { return std::make_unique<KeyJoin>(desk, part); }

int part_towards(const Drawing& drawing, int from, Way way) {
    const PartShape& here = drawing.parts()[static_cast<std::size_t>(from)];
    const auto joined = [&](const PartShape& other) {
        for (const PlacedPort& a : here.ports)
            for (const PlacedPort& b : other.ports)
                if (a.net && a.net == b.net && a.net != ground_net) return true;
        return false;
    };
    int best = from;
    double least = 1e18;
    for (int p = 0; p < static_cast<int>(drawing.parts().size()); ++p) {
        const PartShape& other = drawing.parts()[static_cast<std::size_t>(p)];
        const auto quality = step_quality(other.body.center() - here.body.center(), way);
        if (p == from || !quality) continue;
        const double cost = *quality + (joined(other) ? 0 : 1e6);
        if (cost < least) least = cost, best = p;
    }
    return best;
}

std::pair<int, int> terminal_towards(const Drawing& drawing, std::pair<int, int> from, Way way) {
    const QPointF here = sheet_point(
        drawing.parts()[static_cast<std::size_t>(from.first)].ports[static_cast<std::size_t>(from.second)].at);
    std::pair<int, int> best = from;
    double least = 1e18;
    for (int p = 0; p < static_cast<int>(drawing.parts().size()); ++p)
        for (int t = 0; t < static_cast<int>(drawing.parts()[static_cast<std::size_t>(p)].ports.size()); ++t) {
            const QPointF there =
                sheet_point(drawing.parts()[static_cast<std::size_t>(p)].ports[static_cast<std::size_t>(t)].at);
            const auto quality = step_quality(there - here, way);
            if (quality && *quality < least) least = *quality, best = {p, t};
        }
    return best;
}

} // namespace sinewright::ui
