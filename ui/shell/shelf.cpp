#include "ui/shell/shelf.hpp"
#include "core/parts/part_kind.hpp"
#include "ui/sheet/sheet.hpp"
#include "ui/sheet/symbols.hpp"
#include "ui/theme/theme.hpp"
#include <QApplication>
#include <QDrag>
#include <QHBoxLayout>
#include <QLineEdit>
#include <QMimeData>
#include <QMouseEvent>
#include <QPainter>

namespace sinewright::ui {
namespace {

constexpr double word_px = 11;
constexpr double smallest_word_px = 9;
constexpr int symbol_height = 24;
constexpr int narrow_shelf = 880; // below it, tiles need the room more than the field's hint

QString text(std::string_view view) { return QString::fromUtf8(view.data(), qsizetype(view.size())); }

} // namespace

ShelfTile::ShelfTile(const QString& kind, const QString& word, const QString& title, QWidget* parent)
    : QAbstractButton(parent), kind_(kind), word_(word) {
    setObjectName("tile_" + kind);
    setAccessibleName(tr("Drop a part: %1").arg(title));
    setToolTip(tr("%1: click here and then on the sheet, or drag it there").arg(title));
    setCheckable(true);
    setFocusPolicy(Qt::StrongFocus);
    setAttribute(Qt::WA_Hover);
    setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Expanding);
    connect(&ThemeKeeper::instance(), &ThemeKeeper::changed, this, qOverload<>(&QWidget::update));
}

double ShelfTile::word_width() const { return QFontMetricsF(theme().font(word_px)).horizontalAdvance(word_); }
QSize ShelfTile::sizeHint() const { return {std::max(44, int(word_width()) + 10), 54}; }
QSize ShelfTile::minimumSizeHint() const { return {26, 54}; }

void ShelfTile::paintEvent(QPaintEvent*) {
    QPainter painter(this);
    painter.setRenderHint(QPainter::Antialiasing);
    const Theme& t = theme();
    const bool lit = isChecked();
    painter.setPen(QPen(lit || hasFocus() ? t.accent : underMouse() ? t.soft : t.line, lit ? 1.5 : 1));
    painter.setBrush(lit ? t.meets_ground : t.raised);
    painter.drawRoundedRect(QRectF(rect()).adjusted(0.5, 0.5, -0.5, -0.5), 7, 7);
    const double side = std::min(34.0, width() - 8.0);
    paint_symbol(painter, kind_.toStdString(), QRectF((width() - side) / 2, 7, side, symbol_height), t);

    double px = word_px;
    while (px > smallest_word_px && QFontMetricsF(t.font(px)).horizontalAdvance(word_) > width() - 3) px -= 0.25;
    painter.setFont(t.font(px));
    painter.setPen(lit ? t.ink : t.soft);
    painter.drawText(QRectF(0, height() - 20, width(), 15), Qt::AlignCenter,
                     painter.fontMetrics().elidedText(word_, Qt::ElideRight, width() - 2));
}

void ShelfTile::mousePressEvent(QMouseEvent* event) {
    pressed_at_ = event->pos();
    QAbstractButton::mousePressEvent(event);
}

void ShelfTile::mouseMoveEvent(QMouseEvent* event) {
    const bool far = (event->pos() - pressed_at_).manhattanLength() >= QApplication::startDragDistance();
    if (!(event->buttons() & Qt::LeftButton) || !far) return QAbstractButton::mouseMoveEvent(event);
    setDown(false);
    auto* drag = new QDrag(this);
    auto* carried = new QMimeData;
    carried->setData(QLatin1String(kind_mime), kind_.toUtf8());
    drag->setMimeData(carried);
    drag->exec(Qt::CopyAction);
}

Shelf::Shelf(QWidget* parent) : QWidget(parent), field_(new QLineEdit(this)) {
    setObjectName("shelf");
    setAccessibleName(tr("Shelf of parts"));
    setFixedHeight(height_px);
    field_->setObjectName("type_value");
    field_->setProperty("role", "pill");
    field_->setAccessibleName(tr("Type a value or a kind of part to drop it"));
    field_->setFixedHeight(48);
    field_->setToolTip(tr("A value drops a part that can have it, a word drops its kind: 4k7, 10n, lamp"));
    auto* row = new QHBoxLayout(this);
    row->setContentsMargins(16, 1, 16, 0);
    row->setSpacing(4);
    row->addWidget(field_);
    row->addSpacing(8);
    for (const PartKind* kind : part_kinds()) {
        const QString word = text(symbol_of(kind->name).tile);
        auto* tile =
            new ShelfTile(text(kind->name), word.isEmpty() ? text(kind->title) : word, text(kind->title), this);
        tile->setMaximumHeight(54);
        tile->setMaximumWidth(56);
        row->addWidget(tile, 1);
        tiles_.push_back(tile);
        connect(tile, &ShelfTile::clicked, this,
                [this, tile](bool armed) { emit kind_armed(armed ? tile->kind() : QString()); });
    }
    row->addStretch(0);
    connect(field_, &QLineEdit::returnPressed, this, [this] {
        const QString typed = field_->text().trimmed();
        if (typed.isEmpty()) return;
        field_->clear();
        emit value_typed(typed);
    });
    connect(&ThemeKeeper::instance(), &ThemeKeeper::changed, this, qOverload<>(&QWidget::update));
}

void Shelf::show_armed(const QString& kind) {
    for (ShelfTile* tile : tiles_) tile->setChecked(tile->kind() == kind);
}

void Shelf::resizeEvent(QResizeEvent*) {
    const bool narrow = width() < narrow_shelf;
    field_->setFixedWidth(narrow ? 100 : 184);
    field_->setPlaceholderText(narrow ? tr("4k7, 10n") : tr("type a value: 4k7, 10n"));
}

void Shelf::paintEvent(QPaintEvent*) {
    QPainter painter(this);
    painter.fillRect(rect(), theme().panel);
    painter.fillRect(0, 0, width(), 1, theme().line);
}

} // namespace sinewright::ui
