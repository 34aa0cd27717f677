#include "ui/sheet/sheet.hpp"
#include "ui/sheet/access.hpp"
#include "ui/sheet/editing.hpp"
#include "ui/sheet/reading.hpp"
#include "ui/sheet/typing.hpp"
#include <QPainter>
#include <QResizeEvent>
#include <algorithm>
#include <cmath>
#include <set>

namespace sinewright::ui {

namespace {
constexpr double smallest_zoom = 0.2, largest_zoom = 4, fit_margin_px = 40;
constexpr double natural_from =
    0.94; ///< a drawing that nearly fits at its natural size is shown at it: lines stay crisp
constexpr int wheel_rest_ms = 800;
} // namespace

SheetView::SheetView(Document& document, Analyst& analyst, QWidget* parent)
    : QWidget((install_sheet_access(), parent)), // before anything asks for the interface, which is made only once
      desk_(document, analyst),
      field_(new InlineField(this)) {
    setObjectName(QStringLiteral("sheet"));
    setAccessibleName(tr("Sheet"));
    setFocusPolicy(Qt::StrongFocus);
    setMouseTracking(true);
    setAcceptDrops(true);
    setMinimumSize(320, 240);
    desk_.repaint = [this] { update(); };
    desk_.say = [this](const QString& text) { emit message(text); };
    wheel_rest_.setSingleShot(true);
    wheel_rest_.setInterval(wheel_rest_ms);
    connect(&wheel_rest_, &QTimer::timeout, this, [this] { desk_.document.end_merge(); });
    connect(&document, &Document::changed, this, &SheetView::take_over_document);
    connect(&document, &Document::replaced, this, [this] {
        end_gesture(true);
        field_->drop();
        zoom_to_fit();
    });
    connect(&document, &Document::selection_changed, this, &SheetView::describe);
    connect(&analyst, &Analyst::shown, this, [this] {
        const bool had_cut = desk_.overlay().cut.has_value();
        desk_.take_over_findings();
        if (fitted_ && !had_cut && desk_.overlay().cut) zoom_to_fit(); // the chip at the cut wants room too
    });
    connect(&analyst, &Analyst::became_stale, this, [this] { desk_.take_over_findings(); });
    connect(&analyst, &Analyst::stale_for_long, this, [this] { desk_.take_over_findings(); });
    connect(&ThemeKeeper::instance(), &ThemeKeeper::changed, this, [this] { desk_.take_over(); });
    desk_.take_over();
    describe();
}

SheetView::~SheetView() = default;

void SheetView::zoom_to_fit() {
    const QRectF room = QRectF(rect()).adjusted(fit_margin_px, fit_margin_px, -fit_margin_px, -fit_margin_px);
    fit_into(room);
    if (covers_drawing(card_)) {
        // Beside the card or above it, whichever leaves the drawing larger.
        const QRectF beside(card_.right() + fit_margin_px / 2, room.top(), room.right() - card_.right(), room.height());
        const QRectF above(room.left(), room.top(), room.width(), card_.top() - room.top());
        fit_into(above);
        const double zoom_above = zoom_;
        fit_into(beside);
        if (zoom_above > zoom_) fit_into(above);
    }
    fitted_ = true;
    update();
}

void SheetView::fit_into(const QRectF& room) {
    QRectF extent = desk_.drawing().extent();
    if (desk_.overlay().cut) extent |= desk_.overlay().cut->chip;
    zoom_ = 1;
    if (!extent.isEmpty())
        zoom_ = std::max(smallest_zoom, std::min(std::max(80.0, room.width()) / extent.width(),
                                                 std::max(80.0, room.height()) / extent.height()));
    if (zoom_ > natural_from) zoom_ = 1;
    origin_ = extent.center() - room.center() / zoom_;
    origin_ = {std::round(origin_.x() * zoom_) / zoom_, std::round(origin_.y() * zoom_) / zoom_};
}

bool SheetView::covers_drawing(const QRectF& card) const {
    if (card.isEmpty()) return false;
    const QRectF covered(card.topLeft() / zoom_ + origin_, card.size() / zoom_);
    for (const PartShape& part : desk_.drawing().parts())
        if (part.reach().intersects(covered)) return true;
    for (const Join& join : desk_.drawing().joins())
        for (const QPainterPath& run : join.runs)
            if (run.intersects(covered)) return true;
    return false;
}

void SheetView::keep_clear(const QRect& card) {
    if (card == card_) return;
    card_ = card;
    if (fitted_) zoom_to_fit();
}

void SheetView::zoom_by(double factor, QPointF about) {
    const QPointF fixed = to_sheet(about);
    zoom_ = std::clamp(zoom_ * factor, smallest_zoom, largest_zoom);
    origin_ = fixed - about / zoom_;
    fitted_ = false;
    field_->drop();
    update();
}

void SheetView::resizeEvent(QResizeEvent* event) {
    if (fitted_ || event->oldSize().isEmpty()) zoom_to_fit();
}

void SheetView::paintEvent(QPaintEvent*) {
    QPainter painter(this);
    painter.fillRect(rect(), theme().sheet);
    painter.setRenderHint(QPainter::Antialiasing);
    painter.scale(zoom_, zoom_);
    painter.translate(-origin_);
    Emphasis emphasis = desk_.emphasis;
    for (const std::string& ref : desk_.selected()) emphasis.selected.insert(ref);
    paint_sheet(painter, desk_.drawing(), desk_.overlay(), emphasis, theme(), line_px_);
    if (hovered_.on == Hit::On::terminal && !gesture_)
        paint_ring(painter, sheet_point(desk_.part(hovered_.part).ports[static_cast<std::size_t>(hovered_.port)].at),
                   theme().accent, theme().sheet, 6);
    if (gesture_) gesture_->paint(painter);
    if (!hasFocus() || !focus_by_key_) return;
    painter.resetTransform();
    painter.setPen(QPen(theme().accent, 2));
    painter.setBrush(Qt::NoBrush);
    painter.drawRect(QRectF(rect()).adjusted(1, 1, -1, -1));
}

void SheetView::focusInEvent(QFocusEvent* event) {
    focus_by_key_ = event->reason() == Qt::TabFocusReason || event->reason() == Qt::BacktabFocusReason;
    QWidget::focusInEvent(event);
}

void SheetView::arm_kind(const QString& kind) {
    if (kind == armed_) return;
    if (gesture_) end_gesture(true);
    armed_ = kind;
    if (!kind.isEmpty()) {
        begin(place_gesture(desk_, kind.toStdString(), std::nullopt));
        armed_ = kind;
        setFocus(Qt::OtherFocusReason);
        emit message(tr("Click the sheet to drop it. Alt+← and Alt+→ turn it, Alt+↑ flips it, Esc drops the idea."));
    }
    emit armed_changed(armed_);
}

void SheetView::drop_typed(const QString& text) {
    const auto meanings = meanings_of(text);
    if (meanings.empty()) {
        emit message(tr("“%1” names no part and no value; try 4k7, 10n, op or lamp.").arg(text));
        return;
    }
    drop_meaning(meanings.front().kind, meanings.front().value, to_sheet(QPointF(width(), height()) / 2));
}

void SheetView::drop_meaning(const std::string& kind, const std::optional<Value>& value, QPointF at) {
    const QPointF free = sheet_point(free_cell_near(at, kind));
    const Part part = starting_part(desk_.document.design(), kind, {free.x(), free.y(), 0, false}, value);
    desk_.lay_out(tr("Drop %1").arg(text_of(part.ref)), [&](Design& d) { drop(d, part); });
    desk_.document.select({text_of(part.ref)});
}

/// The nearest place where a part of this kind lies on no other.
Cell SheetView::free_cell_near(QPointF at, std::string_view kind) const {
    Part probe;
    probe.kind = kind;
    const auto lies_free = [&](Cell c) {
        const QPointF p = sheet_point(c);
        const QRectF reach =
            shape_of(probe, {p.x(), p.y(), 0, false}).reach().adjusted(-grid_px, -grid_px, grid_px, grid_px);
        return std::none_of(drawing().parts().begin(), drawing().parts().end(),
                            [&](const PartShape& part) { return part.reach().intersects(reach); });
    };
    const Cell start = nearest_cell(at);
    constexpr int farthest = 60;
    for (int ring = 0; ring < farthest; ++ring)
        for (int dy = -ring; dy <= ring; ++dy)
            for (int dx = -ring; dx <= ring; ++dx) {
                if (std::max(std::abs(dx), std::abs(dy)) != ring) continue;
                if (const Cell c{start.x + dx, start.y + dy}; lies_free(c)) return c;
            }
    return start;
}

void SheetView::focus_part(const QString& ref) {
    const int part = drawing().part_index(ref.toStdString());
    if (part < 0) return;
    desk_.document.select({ref});
    const QRectF body = desk_.part(part).reach();
    const QRectF view(to_sheet({0, 0}), to_sheet(QPointF(width(), height())));
    if (!view.contains(body)) origin_ += body.center() - view.center(), fitted_ = false;
    update();
}

QString SheetView::part_in_words(int part) const {
    const auto& parts = desk_.design().parts;
    return part >= 0 && part < static_cast<int>(parts.size()) ? spoken_part(parts[static_cast<std::size_t>(part)])
                                                              : QString();
}

bool SheetView::is_selected(int part) const {
    return desk_.document.selection().contains(text_of(desk_.part(part).ref));
}

/// What a screen reader says of the sheet: the selected part, or how much there is.
void SheetView::describe() {
    const int part = desk_.selected_part();
    desk_.emphasis.focused = part;
    const auto& parts = desk_.document.design().parts;
    if (part >= 0)
        setAccessibleDescription(part_in_words(part));
    else if (parts.empty())
        setAccessibleDescription(tr("Empty. Type a value such as 10k, or choose a part on the shelf."));
    else
        setAccessibleDescription(parts.size() == 1 ? tr("One part")
                                                   : tr("%n parts", nullptr, static_cast<int>(parts.size())));
    report_selection(*this, part);
    update();
}

void SheetView::take_over_document() {
    if (desk_.document.history().count() == 0) desk_.forget_places(); // another design: its parts only share names
    if (gesture_ && !gesture_acts_ && gesture_->knows_drawing()) end_gesture(true);
    hovered_ = pressed_ = {};
    desk_.take_over();
    describe();
}

void SheetView::begin(GesturePtr gesture) {
    desk_.document.end_merge();
    gesture_ = std::move(gesture);
}

void SheetView::end_gesture(bool abandon) {
    if (gesture_ && abandon) gesture_->abandon();
    gesture_.reset();
    if (!armed_.isEmpty()) {
        armed_.clear();
        emit armed_changed(armed_);
    }
    update();
}

/// True: the gesture is over.
bool SheetView::finish_gesture(QPointF at, Qt::KeyboardModifiers modifiers) {
    gesture_acts_ = true;
    const bool over = gesture_->finish(at, modifiers);
    gesture_acts_ = false;
    if (over) end_gesture(false);
    return over;
}

/// Esc: the innermost thing that is not at rest comes to rest. False: everything is.
bool SheetView::back_to_rest() {
    if (gesture_) return end_gesture(true), true;
    if (desk_.emphasis.join >= 0) return desk_.emphasis.join = desk_.emphasis.run = -1, update(), true;
    if (!desk_.document.selection().isEmpty()) return desk_.document.select({}), true;
    return false;
}

} // namespace sinewright::ui
