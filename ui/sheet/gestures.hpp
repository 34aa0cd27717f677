#pragma once
/// What a press begins and a release ends: moving, joining, boxing, placing, moving the cut or a name.
#include "ui/sheet/desk.hpp"
#include <QKeyEvent>
#include <memory>

namespace sinewright::ui {

class Gesture {
  public:
    virtual ~Gesture() = default;
    virtual void move(QPointF at, Qt::KeyboardModifiers modifiers) = 0;
    /// Release of the button, or the click that ends a gesture begun without one. True: the gesture is over.
    virtual bool finish(QPointF at, Qt::KeyboardModifiers modifiers) = 0;
    virtual void abandon() = 0; ///< Esc: as if it had not begun
    virtual bool key(const QKeyEvent&) { return false; }
    virtual void paint(QPainter&) const {}
    virtual bool by_click() const { return false; } ///< lives without a pressed button
    /// Remembers places in the drawing, so it ends when the design changes under it.
    virtual bool knows_drawing() const { return false; }
    virtual bool over() const { return false; } ///< a key has ended it
};
using GesturePtr = std::unique_ptr<Gesture>;

GesturePtr move_parts_gesture(Desk& desk, QPointF start);
GesturePtr join_gesture(Desk& desk, const Hit& terminal);
GesturePtr box_gesture(Desk& desk, QPointF start, bool adding);
GesturePtr cut_gesture(Desk& desk);
GesturePtr flag_gesture(Desk& desk, int flag, QPointF start);
/// A part follows the pointer and is dropped at each click; one without Shift ends it.
GesturePtr place_gesture(Desk& desk, const std::string& kind, const std::optional<Value>& value);
/// A terminal is chosen with the arrow keys and joined to another.
GesturePtr key_join_gesture(Desk& desk, int part);

/// The part, or terminal, that an arrow key leads to: along a join first, else the nearest that way.
int part_towards(const Drawing& drawing, int from, Way way);
std::pair<int, int> terminal_towards(const Drawing& drawing, std::pair<int, int> from, Way way);

} // namespace sinewright::ui
