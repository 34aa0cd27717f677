#include "ui/shell/sheet_area.hpp"
#include "ui/document/document.hpp"
#include "ui/sheet/sheet.hpp"
#include "ui/shell/empty_sheet.hpp"
#include "ui/values/dials.hpp"
#include "ui/values/properties.hpp"
#include <QLabel>
#include <QResizeEvent>

namespace sinewright::ui {
namespace {
constexpr int note_ms = 5000; // long enough to read a sentence twice
constexpr int empty_width = 520;
} // namespace

SheetArea::SheetArea(Document& document, Analyst& analyst, QWidget* parent)
    : QWidget(parent),
      document_(document),
      sheet_(new SheetView(document, analyst, this)),
      dials_(new Dials(document, this)),
      properties_(new Properties(document, this)),
      empty_(new EmptySheet(this)),
      note_(new QLabel(this)) {
    setObjectName("sheet_area");
    setMinimumSize(360, 240);
    sheet_->lower();
    note_->setObjectName("sheet_note");
    note_->setProperty("role", "floating-note");
    note_->setAttribute(Qt::WA_TransparentForMouseEvents);
    note_->hide();
    note_time_.setSingleShot(true);
    note_time_.setInterval(note_ms);
    connect(&note_time_, &QTimer::timeout, note_, &QWidget::hide);
    connect(sheet_, &SheetView::message, this, &SheetArea::say);
    connect(&document_, &Document::changed, this, &SheetArea::take_over);
    connect(properties_, &Properties::built, this, &SheetArea::keep_clear_of_selection);
    dials_->installEventFilter(this);
    take_over();
}

bool SheetArea::eventFilter(QObject* watched, QEvent* event) {
    const bool moved = event->type() == QEvent::Resize || event->type() == QEvent::Move ||
                       event->type() == QEvent::Show || event->type() == QEvent::Hide;
    if (watched == dials_ && moved) sheet_->keep_clear(dials_->isVisible() ? dials_->geometry() : QRect());
    return QWidget::eventFilter(watched, event);
}

void SheetArea::take_over() {
    const bool empty = document_.design().parts.empty();
    empty_->setVisible(empty);
    properties_->setVisible(!empty);
}

void SheetArea::keep_clear_of_selection() {
    QRectF selected;
    for (const QString& ref : document_.selection())
        if (const int part = sheet_->drawing().part_index(ref.toStdString()); part >= 0) {
            const QRectF reach = sheet_->drawing().parts()[static_cast<std::size_t>(part)].reach();
            selected |= QRectF(sheet_->to_view(reach.topLeft()), sheet_->to_view(reach.bottomRight()));
        }
    properties_->move_to(Qt::TopRightCorner);
    if (selected.intersects(properties_->geometry())) properties_->move_to(Qt::TopLeftCorner);
    if (selected.intersects(properties_->geometry())) properties_->move_to(Qt::TopRightCorner);
}

void SheetArea::say(const QString& note) {
    note_->setText(note);
    note_->setAccessibleName(note);
    note_->setVisible(!note.isEmpty());
    place_note();
    note_time_.start();
}

void SheetArea::place_note() {
    note_->setWordWrap(note_->sizeHint().width() > width() - 80);
    note_->adjustSize();
    note_->move((width() - note_->width()) / 2, height() - note_->height() - 16);
    note_->raise();
}

void SheetArea::resizeEvent(QResizeEvent*) {
    sheet_->setGeometry(rect());
    const QSize wanted(std::min(empty_width, width() - 40), empty_->sizeHint().height() + 20);
    empty_->setGeometry(QRect(QPoint((width() - wanted.width()) / 2, (height() - wanted.height()) / 2), wanted));
    place_note();
}

} // namespace sinewright::ui
