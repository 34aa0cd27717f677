/// The sheet by keys: typing, walking, turning, joining; and the fields that open on it.
#include "ui/sheet/editing.hpp"
#include "ui/sheet/reading.hpp"
#include "ui/sheet/sheet.hpp"
#include "ui/sheet/typing.hpp"
#include <QKeyEvent>

namespace sinewright::ui {

namespace {
std::optional<Way> arrow(int key) {
    switch (key) {
    case Qt::Key_Right:
        return Way::right;
    case Qt::Key_Down:
        return Way::down;
    case Qt::Key_Left:
        return Way::left;
    case Qt::Key_Up:
        return Way::up;
    default:
        return std::nullopt;
    }
}
} // namespace

void SheetView::keyPressEvent(QKeyEvent* event) {
    const Qt::KeyboardModifiers modifiers = event->modifiers() & ~Qt::KeypadModifier;
    if (gesture_key(*event)) return;
    if (modifiers == Qt::AltModifier && alt_key(event->key())) return;
    if (modifiers.testFlag(Qt::ControlModifier) && control_key(*event)) return;
    if (!modifiers.testFlag(Qt::ControlModifier) && !modifiers.testFlag(Qt::AltModifier) && plain_key(*event)) return;
    QWidget::keyPressEvent(event);
}

bool SheetView::gesture_key(QKeyEvent& event) {
    if (event.key() == Qt::Key_Escape) return back_to_rest();
    if (!gesture_) return false;
    gesture_acts_ = true;
    const bool taken = gesture_->key(event);
    gesture_acts_ = false;
    if (!taken) return false;
    if (gesture_->over()) end_gesture(false);
    update();
    return true;
}

bool SheetView::alt_key(int key) {
    switch (key) {
    case Qt::Key_Right:
        turn_selection(1);
        return true;
    case Qt::Key_Left:
        turn_selection(-1);
        return true;
    case Qt::Key_Up:
        flip_selection(true);
        return true;
    case Qt::Key_Down:
        flip_selection(false);
        return true;
    default:
        return false;
    }
}

bool SheetView::control_key(QKeyEvent& event) {
    if (const auto way = arrow(event.key())) { // nudge
        const auto refs = desk_.selected();
        const Cell by = stepped({0, 0}, *way);
        if (refs.empty()) return false;
        desk_.lay_out(
            tr("Move %1").arg(named(refs)), [&](Design& d) { move_parts(d, refs, by.x * grid_px, by.y * grid_px); },
            QStringLiteral("nudge"));
        return true;
    }
    const QPointF middle = QPointF(width(), height()) / 2;
    switch (event.key()) {
    case Qt::Key_C:
        copy_selection();
        return true;
    case Qt::Key_X:
        cut_selection();
        return true;
    case Qt::Key_V:
        paste();
        return true;
    case Qt::Key_D:
        duplicate_selection();
        return true;
    case Qt::Key_A:
        select_all();
        return true;
    case Qt::Key_0:
        zoom_to_fit();
        return true;
    case Qt::Key_Plus:
    case Qt::Key_Equal:
        zoom_by(1.2, middle);
        return true;
    case Qt::Key_Minus:
        zoom_by(1 / 1.2, middle);
        return true;
    case Qt::Key_J:
        if (const int part = desk_.selected_part(); part >= 0 && !desk_.part(part).ports.empty())
            begin(key_join_gesture(desk_, part));
        else
            emit message(tr("Choose a part first, then Ctrl+J joins one of its ends."));
        update();
        return true;
    default:
        return false;
    }
}

bool SheetView::plain_key(QKeyEvent& event) {
    if (const auto way = arrow(event.key())) return walk(*way), true;
    switch (event.key()) {
    case Qt::Key_Delete:
    case Qt::Key_Backspace:
        delete_selection();
        return true;
    case Qt::Key_Return:
    case Qt::Key_Enter:
        if (const int part = desk_.selected_part(); part >= 0) edit_value(part);
        return true;
    case Qt::Key_F2:
        if (const int part = desk_.selected_part(); part >= 0)
            rename_part_at(part);
        else if (desk_.emphasis.join >= 0)
            rename_net_at(drawing().joins()[static_cast<std::size_t>(desk_.emphasis.join)].net, to_sheet(last_view_));
        return true;
    default:
        break;
    }
    const QString text = event.text();
    if (text.isEmpty() || !(text.front().isLetterOrNumber() || text.front() == QLatin1Char('.'))) return false;
    if (gesture_) end_gesture(true);
    open_typed(text);
    return true;
}

void SheetView::walk(Way way) {
    const int from = desk_.selected_part();
    if (drawing().parts().empty()) return;
    const int to = from < 0 ? 0 : part_towards(drawing(), from, way);
    focus_part(text_of(desk_.part(to).ref));
}

QPoint SheetView::typing_place() const {
    const bool inside = rect().contains(last_view_.toPoint()) && !last_view_.isNull();
    return inside ? last_view_.toPoint() : rect().center();
}

void SheetView::open_typed(const QString& first) {
    const QPoint place = typing_place();
    InlineField::Job job;
    job.label = tr("Type a part or a value");
    job.text = first;
    job.select_all = false;
    job.take_on_leaving = false;
    job.offers = [](const QString& text) {
        QStringList lines;
        for (const Meaning& meaning : meanings_of(text)) lines << meaning.words;
        return lines;
    };
    job.take = [this, place](const QString& text, int line) -> QString {
        const auto meanings = meanings_of(text);
        if (line < 0 || line >= static_cast<int>(meanings.size()))
            return tr("That names no part and no value; try 4k7, 10n, op or lamp.");
        const Meaning& meaning = meanings[static_cast<std::size_t>(line)];
        drop_meaning(meaning.kind, meaning.value, to_sheet(place));
        return {};
    };
    field_->open(place, std::move(job));
}

void SheetView::edit_value(int part) {
    const Part& what = desk_.document.design().parts[static_cast<std::size_t>(part)];
    if (!shown_parameter(what)) {
        emit message(tr("%1 has no single value to type.").arg(text_of(what.ref)));
        return;
    }
    desk_.document.end_merge();
    const std::string ref = what.ref;
    const PartText& text = drawing().texts()[static_cast<std::size_t>(part)];
    const QPointF at = text.value.isEmpty() ? text.ref_box.bottomLeft() : text.value_box.topLeft() - QPointF(8, 8);
    InlineField::Job job;
    job.label = tr("Value of %1").arg(text_of(ref));
    job.text = text.value;
    job.take = [this, ref](const QString& typed, int) -> QString {
        return desk_.attempt(tr("Value of %1").arg(text_of(ref)), [&](Design& d) { return set_value(d, ref, typed); });
    };
    field_->open(to_view(at).toPoint(), std::move(job));
}

void SheetView::rename_part_at(int part) {
    const std::string ref = desk_.part(part).ref;
    InlineField::Job job;
    job.label = tr("Reference of %1").arg(text_of(ref));
    job.text = text_of(ref);
    job.take = [this, ref](const QString& typed, int) -> QString {
        const std::string name = typed.trimmed().toStdString();
        const QString refusal = desk_.attempt(
            tr("Rename %1").arg(text_of(ref)), [&](Design& d) { return rename_part(d, ref, name); }, true);
        if (refusal.isEmpty()) desk_.document.select({text_of(name)});
        return refusal;
    };
    field_->open(to_view(drawing().texts()[static_cast<std::size_t>(part)].ref_box.topLeft() - QPointF(8, 8)).toPoint(),
                 std::move(job));
}

void SheetView::rename_net_at(const std::string& net, QPointF at) {
    InlineField::Job job;
    job.label = tr("Name of net %1").arg(text_of(net));
    job.text = text_of(net);
    job.take = [this, net](const QString& typed, int) -> QString {
        const QString name = typed.trimmed();
        return desk_.attempt(tr("Name net %1").arg(name),
                             [&](Design& d) { return rename_net(d, net, name.toStdString()); });
    };
    field_->open(to_view(at).toPoint() + QPoint(8, 8), std::move(job));
}

} // namespace sinewright::ui
