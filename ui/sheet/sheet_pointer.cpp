/// The sheet under the pointer: presses, drags, clicks, wheel, drops.
#include "ui/sheet/editing.hpp"
#include "ui/sheet/reading.hpp"
#include "ui/sheet/sheet.hpp"
#include <QDragEnterEvent>
#include <QHelpEvent>
#include <QMimeData>
#include <QMouseEvent>
#include <QToolTip>
#include <cmath>

namespace sinewright::ui {

namespace {
constexpr double drag_from_px = 4, terminal_reach_px = 12;
constexpr int wheel_notch = 120; // eighths of a degree
bool is_part(Hit::On on) { return on == Hit::On::part || on == Hit::On::value || on == Hit::On::ref; }
} // namespace

void SheetView::mousePressEvent(QMouseEvent* event) {
    setFocus(Qt::MouseFocusReason);
    const QPointF at = to_sheet(event->position());
    last_view_ = event->position();
    if (event->button() == Qt::MiddleButton) {
        panning_ = true;
        setCursor(Qt::ClosedHandCursor);
        return;
    }
    if (event->button() != Qt::LeftButton) return;
    if (gesture_ && gesture_->by_click()) {
        finish_gesture(at, event->modifiers());
        return;
    }
    pressed_at_ = event->position();
    press_on(desk_.hit(at, terminal_reach_px / zoom_), at, event->modifiers());
}

void SheetView::press_on(const Hit& hit, QPointF at, Qt::KeyboardModifiers modifiers) {
    pressed_ = hit;
    desk_.emphasis.join = desk_.emphasis.run = -1;
    if (is_part(hit.on)) {
        const QString ref = text_of(desk_.part(hit.part).ref);
        QStringList selection = desk_.document.selection();
        pressed_was_selected_ = selection.contains(ref);
        if (modifiers.testFlag(Qt::ShiftModifier)) {
            if (pressed_was_selected_)
                selection.removeAll(ref);
            else
                selection << ref;
            desk_.document.select(selection);
        } else if (!pressed_was_selected_) {
            desk_.document.select({ref});
        }
    } else if (hit.on == Hit::On::run) {
        desk_.document.select({});
        desk_.emphasis.join = hit.join, desk_.emphasis.run = hit.run;
    } else if (hit.on == Hit::On::nothing) {
        if (!modifiers.testFlag(Qt::ShiftModifier)) desk_.document.select({});
        begin(box_gesture(desk_, at, modifiers.testFlag(Qt::ShiftModifier)));
    }
    update();
}

void SheetView::mouseMoveEvent(QMouseEvent* event) {
    const QPointF at = to_sheet(event->position());
    if (panning_) {
        origin_ -= (event->position() - last_view_) / zoom_;
        last_view_ = event->position();
        fitted_ = false;
        update();
        return;
    }
    last_view_ = event->position();
    if (gesture_) {
        gesture_->move(at, event->modifiers());
        update();
        return;
    }
    const bool dragged = event->buttons().testFlag(Qt::LeftButton) &&
                         (event->position() - pressed_at_).manhattanLength() >= drag_from_px;
    if (!dragged) return hover(at);
    drag_from(pressed_);
    if (gesture_) gesture_->move(at, event->modifiers());
    update();
}

void SheetView::drag_from(const Hit& hit) {
    const QPointF start = to_sheet(pressed_at_);
    if (hit.on == Hit::On::cut)
        begin(cut_gesture(desk_));
    else if (hit.on == Hit::On::terminal)
        begin(join_gesture(desk_, hit));
    else if (hit.on == Hit::On::flag)
        begin(flag_gesture(desk_, hit.flag, start));
    else if (is_part(hit.on) && !desk_.document.selection().isEmpty())
        begin(move_parts_gesture(desk_, start));
}

void SheetView::mouseReleaseEvent(QMouseEvent* event) {
    if (event->button() == Qt::MiddleButton && panning_) {
        panning_ = false;
        unsetCursor();
        return;
    }
    if (event->button() != Qt::LeftButton) return;
    const QPointF at = to_sheet(event->position());
    if (gesture_ && !gesture_->by_click()) {
        finish_gesture(at, event->modifiers());
        pressed_ = {};
        hover(at);
        return;
    }
    const Hit clicked = pressed_;
    pressed_ = {};
    if (!gesture_) click_on(clicked, event->modifiers());
}

void SheetView::click_on(const Hit& hit, Qt::KeyboardModifiers modifiers) {
    if (hit.on == Hit::On::value && modifiers == Qt::NoModifier)
        edit_value(hit.part);
    else if (is_part(hit.on) && pressed_was_selected_ && desk_.document.selection().size() > 1)
        desk_.document.select({text_of(desk_.part(hit.part).ref)});
    else if (hit.on == Hit::On::terminal)
        offer_at_terminal(hit);
    else if (hit.on == Hit::On::cut && !desk_.overlay().cut->detail.isEmpty())
        emit message(desk_.overlay().cut->detail);
}

/// One click on a free end offers to ground it, or to name it.
void SheetView::offer_at_terminal(const Hit& hit) {
    const PlacedPort& port = desk_.part(hit.part).ports[static_cast<std::size_t>(hit.port)];
    const TerminalRef terminal = desk_.terminal(hit);
    desk_.document.select({text_of(terminal.part)});
    if (port.net) return;
    InlineField::Job job;
    job.label = tr("Free end %1: ground it, or type a net's name").arg(terminal_text(terminal));
    job.take_on_leaving = false;
    job.offers = [](const QString& text) {
        return text.trimmed().isEmpty() ? QStringList{tr("ground it")}
                                        : QStringList{tr("name it %1").arg(text.trimmed())};
    };
    job.take = [this, terminal](const QString& text, int) -> QString {
        const std::string name = text.trimmed().toStdString();
        if (name.empty())
            return desk_.attempt(tr("Ground %1").arg(text_of(terminal.part)),
                                 [&](Design& d) { return ground(d, terminal); });
        const int part = drawing().part_index(terminal.part);
        if (part < 0) return {};
        const PlacedPort& end = *desk_.part(part).port(terminal.terminal);
        const QPointF at = sheet_point(stepped(end.at, end.out, 2));
        return desk_.attempt(tr("Name the net at %1").arg(terminal_text(terminal)), [&](Design& d) {
            const QString refusal = add_stub(d, terminal, at.x(), at.y());
            return refusal.isEmpty() ? rename_net(d, *net_of(d, terminal), name) : refusal;
        });
    };
    field_->open(to_view(sheet_point(port.at)).toPoint() + QPoint(12, 10), std::move(job));
}

void SheetView::mouseDoubleClickEvent(QMouseEvent* event) {
    if (event->button() != Qt::LeftButton || gesture_) return;
    const QPointF at = to_sheet(event->position());
    const Hit hit = desk_.hit(at, terminal_reach_px / zoom_);
    pressed_ = {};
    if (hit.on == Hit::On::ref)
        rename_part_at(hit.part);
    else if (hit.on == Hit::On::value || hit.on == Hit::On::part)
        edit_value(hit.part);
    else if (hit.on == Hit::On::flag)
        rename_net_at(drawing().flags()[static_cast<std::size_t>(hit.flag)].net, at);
    else if (hit.on == Hit::On::run)
        rename_net_at(drawing().joins()[static_cast<std::size_t>(hit.join)].net, at);
}

void SheetView::hover(QPointF at) {
    const Hit hit = desk_.hit(at, terminal_reach_px / zoom_);
    if (hit == hovered_) return;
    hovered_ = hit;
    desk_.emphasis.hovered_join = hit.join, desk_.emphasis.hovered_run = hit.run;
    if (hit.on == Hit::On::terminal)
        setCursor(Qt::CrossCursor);
    else if (hit.on == Hit::On::cut || hit.on == Hit::On::flag)
        setCursor(Qt::OpenHandCursor);
    else
        unsetCursor();
    update();
}

void SheetView::leaveEvent(QEvent*) {
    hovered_ = {};
    desk_.emphasis.hovered_join = desk_.emphasis.hovered_run = -1;
    update();
}

void SheetView::wheelEvent(QWheelEvent* event) {
    const QPointF at = to_sheet(event->position());
    const int turned = event->angleDelta().y() != 0 ? event->angleDelta().y() : event->angleDelta().x();
    event->accept();
    if (event->modifiers().testFlag(Qt::ControlModifier))
        return zoom_by(std::pow(1.2, double(turned) / wheel_notch), event->position());
    const Hit hit = desk_.hit(at, 0);
    if (is_part(hit.on) && !gesture_) {
        wheel_left_ += turned;
        const int steps = wheel_left_ / wheel_notch;
        wheel_left_ -= steps * wheel_notch;
        if (steps != 0) step_values(hit.part, steps, event->modifiers().testFlag(Qt::ShiftModifier));
        return;
    }
    QPointF by = event->pixelDelta().isNull() ? QPointF(event->angleDelta()) / 2 : QPointF(event->pixelDelta());
    if (event->modifiers().testFlag(Qt::ShiftModifier) && by.x() == 0) by = {by.y(), 0};
    origin_ -= by / zoom_;
    fitted_ = false;
    field_->drop();
    update();
}

void SheetView::step_values(int part, int steps, bool fine) {
    const std::string ref = desk_.part(part).ref;
    desk_.edit(
        tr("Value of %1").arg(text_of(ref)), [&](Design& d) { step_value(d, ref, steps, fine); },
        QStringLiteral("value ") + text_of(ref));
    wheel_rest_.start();
}

bool SheetView::event(QEvent* event) {
    if (event->type() == QEvent::ToolTip) {
        const auto* help = static_cast<QHelpEvent*>(event);
        const QPointF at = to_sheet(help->pos());
        QString text;
        for (const FaultMark& fault : overlay().faults)
            if (QLineF(fault.badge, at).length() < 14) text = fault.sentence;
        if (text.isEmpty() && hovered_.on == Hit::On::cut && overlay().cut) text = overlay().cut->detail;
        if (text.isEmpty())
            QToolTip::hideText();
        else
            QToolTip::showText(help->globalPos(), text, this);
        return true;
    }
    return QWidget::event(event);
}

void SheetView::dragEnterEvent(QDragEnterEvent* event) {
    if (!event->mimeData()->hasFormat(QLatin1String(kind_mime))) return;
    const QString kind = QString::fromUtf8(event->mimeData()->data(QLatin1String(kind_mime)));
    begin(place_gesture(desk_, kind.toStdString(), std::nullopt));
    gesture_->move(to_sheet(event->position()), event->modifiers());
    event->acceptProposedAction();
}

void SheetView::dragMoveEvent(QDragMoveEvent* event) {
    if (gesture_) gesture_->move(to_sheet(event->position()), event->modifiers());
    event->acceptProposedAction();
}

void SheetView::dragLeaveEvent(QDragLeaveEvent*) { end_gesture(true); }

void SheetView::dropEvent(QDropEvent* event) {
    if (!gesture_) return;
    finish_gesture(to_sheet(event->position()), Qt::NoModifier);
    setFocus(Qt::MouseFocusReason);
    event->acceptProposedAction();
}

} // namespace sinewright::ui
