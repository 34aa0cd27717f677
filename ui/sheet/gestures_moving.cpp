/// Moving parts, names and the cut; choosing by a box; placing a new part.
#include "ui/sheet/editing.hpp"
#include "ui/sheet/gestures.hpp"
#include "ui/sheet/reading.hpp"
#include <QObject>
#include <algorithm>
#include <cmath>

namespace sinewright::ui {

namespace {

class MoveParts : public Gesture {
  public:
    MoveParts(Desk& desk, QPointF start) : desk_(desk), start_(start), refs_(desk.selected()) {}
    void move(QPointF at, Qt::KeyboardModifiers) override {
        const Cell by = nearest_cell(at - start_);
        if (by == by_) return;
        by_ = by;
        desk_.preview([this](Design& d) { change(d); });
    }
    bool finish(QPointF at, Qt::KeyboardModifiers modifiers) override {
        move(at, modifiers);
        if (by_ == Cell{})
            desk_.end_preview();
        else
            desk_.lay_out(QObject::tr("Move %1").arg(named(refs_)),
                          [this](Design& d) { change(d), join_touching(d, refs_); });
        return true;
    }
    void abandon() override { desk_.end_preview(); }

  private:
    void change(Design& d) const { move_parts(d, refs_, by_.x * grid_px, by_.y * grid_px); }
    Desk& desk_;
    QPointF start_;
    std::vector<std::string> refs_;
    Cell by_;
};

class BoxChoice : public Gesture {
  public:
    BoxChoice(Desk& desk, QPointF start, bool adding)
        : desk_(desk), start_(start), end_(start), before_(adding ? desk.document.selection() : QStringList()) {}
    void move(QPointF at, Qt::KeyboardModifiers) override {
        end_ = at;
        QStringList chosen = before_;
        const QRectF box = QRectF(start_, end_).normalized();
        for (const PartShape& part : desk_.drawing().parts())
            if (box.contains(part.body)) chosen << text_of(part.ref);
        desk_.document.select(chosen);
        desk_.repaint();
    }
    bool finish(QPointF at, Qt::KeyboardModifiers modifiers) override { return move(at, modifiers), true; }
    void abandon() override { desk_.document.select(before_); }
    void paint(QPainter& painter) const override {
        QColor tint = theme().accent;
        painter.setPen(QPen(tint, 1, Qt::DashLine));
        tint.setAlpha(24);
        painter.setBrush(tint);
        painter.drawRoundedRect(QRectF(start_, end_).normalized(), 4, 4);
    }

  private:
    Desk& desk_;
    QPointF start_, end_;
    QStringList before_;
};

/// The cut goes from terminal to terminal, those of the loop first.
class MoveCut : public Gesture {
  public:
    explicit MoveCut(Desk& desk) : desk_(desk), terminal_(desk.overlay().cut->terminal) {}
    void move(QPointF at, Qt::KeyboardModifiers) override {
        TerminalRef best = terminal_;
        double least = 1e18;
        for (const PartShape& part : desk_.drawing().parts())
            for (const PlacedPort& port : part.ports) {
                if (!port.net || port.net == ground_net) continue;
                const QPointF tip = sheet_point(port.at) + direction(port.out) * grid_px;
                const double off_loop = desk_.overlay().ribbon.contains(sheet_point(port.at)) ? 1 : 2;
                const double d = std::hypot(at.x() - tip.x(), at.y() - tip.y()) * off_loop;
                if (d < least) least = d, best = {part.ref, port.terminal};
            }
        if (best == terminal_ && moved_) return;
        terminal_ = best, moved_ = true;
        desk_.preview([this](Design& d) { set_cut(d, terminal_); });
    }
    bool finish(QPointF, Qt::KeyboardModifiers) override {
        if (!moved_) return desk_.end_preview(), true;
        desk_.edit(QObject::tr("Open the loop at %1").arg(terminal_text(terminal_)),
                   [this](Design& d) { set_cut(d, terminal_); });
        return true;
    }
    void abandon() override { desk_.end_preview(); }

  private:
    Desk& desk_;
    TerminalRef terminal_;
    bool moved_ = false;
};

class MoveFlag : public Gesture {
  public:
    MoveFlag(Desk& desk, int flag, QPointF start)
        : desk_(desk), flag_(desk.drawing().flags()[static_cast<std::size_t>(flag)]), start_(start) {}
    void move(QPointF at, Qt::KeyboardModifiers) override {
        const Cell by = nearest_cell(at - start_);
        if (by == by_) return;
        by_ = by;
        desk_.preview([this](Design& d) { change(d); });
    }
    bool finish(QPointF at, Qt::KeyboardModifiers modifiers) override {
        move(at, modifiers);
        if (by_ == Cell{})
            desk_.end_preview();
        else
            desk_.lay_out(QObject::tr("Move name %1").arg(text_of(flag_.net)), [this](Design& d) { change(d); });
        return true;
    }
    void abandon() override { desk_.end_preview(); }

  private:
    void change(Design& d) const {
        const QPointF to = sheet_point({flag_.at.x + by_.x, flag_.at.y + by_.y});
        if (flag_.label < 0) {
            d.labels.push_back({flag_.net, to.x(), to.y(), std::nullopt});
        } else {
            Label& label = d.labels[static_cast<std::size_t>(flag_.label)];
            label.x = to.x(), label.y = to.y();
        }
    }
    Desk& desk_;
    Flag flag_;
    QPointF start_;
    Cell by_;
};

class PlacePart : public Gesture {
  public:
    PlacePart(Desk& desk, std::string kind, std::optional<Value> value)
        : desk_(desk), kind_(std::move(kind)), value_(std::move(value)) {
        if (symbol_of(kind_).ports.empty()) return;
        desk_.repaint();
    }
    void move(QPointF at, Qt::KeyboardModifiers) override {
        const QPointF snapped = sheet_point(nearest_cell(at));
        place_.x = snapped.x(), place_.y = snapped.y(), seen_ = true;
        desk_.repaint();
    }
    bool finish(QPointF at, Qt::KeyboardModifiers modifiers) override {
        move(at, modifiers);
        const Part part = starting_part(desk_.document.design(), kind_, place_, value_);
        desk_.lay_out(QObject::tr("Drop %1").arg(text_of(part.ref)), [&](Design& d) { drop(d, part); });
        desk_.document.select({text_of(part.ref)});
        return !modifiers.testFlag(Qt::ShiftModifier);
    }
    void abandon() override { desk_.repaint(); }
    bool key(const QKeyEvent& event) override {
        if (!event.modifiers().testFlag(Qt::AltModifier)) return false;
        switch (event.key()) {
        case Qt::Key_Right:
            place_.turn = (place_.turn + 90) % 360;
            break;
        case Qt::Key_Left:
            place_.turn = (place_.turn + 270) % 360;
            break;
        case Qt::Key_Up:
        case Qt::Key_Down:
            place_.flip = !place_.flip, place_.turn = (540 - place_.turn) % 360;
            break;
        default:
            return false;
        }
        desk_.repaint();
        return true;
    }
    void paint(QPainter& painter) const override {
        if (!seen_) return;
        Part part;
        part.kind = kind_;
        painter.setOpacity(0.6);
        paint_part(painter, shape_of(part, place_), theme(), theme().accent);
        painter.setOpacity(1);
    }
    bool by_click() const override { return true; }

  private:
    Desk& desk_;
    std::string kind_;
    std::optional<Value> value_;
    Place place_;
    bool seen_ = false;
};

} // namespace

GesturePtr move_parts_gesture(Desk& desk, QPointF start) { return std::make_unique<MoveParts>(desk, start); }
GesturePtr box_gesture(Desk& desk, QPointF start, bool adding) {
    return std::make_unique<BoxChoice>(desk, start, adding);
}
GesturePtr cut_gesture(Desk& desk) { return std::make_unique<MoveCut>(desk); }
GesturePtr flag_gesture(Desk& desk, int flag, QPointF start) { return std::make_unique<MoveFlag>(desk, flag, start); }
GesturePtr place_gesture(Desk& desk, const std::string& kind, const std::optional<Value>& value) {
    return std::make_unique<PlacePart>(desk, kind, value);
}

} // namespace sinewright::ui
