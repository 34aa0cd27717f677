#include "ui/values/choice_box.hpp"
#include "ui/theme/theme.hpp"
#include <QPainter>
#include <QWheelEvent>

namespace sinewright::ui {

void ChoiceBox::paintEvent(QPaintEvent* event) {
    QComboBox::paintEvent(event);
    QPainter painter(this);
    painter.setRenderHint(QPainter::Antialiasing);
    painter.setPen(QPen(theme().soft, 1.6, Qt::SolidLine, Qt::RoundCap, Qt::RoundJoin));
    const QPointF tip(width() - 14, height() / 2.0 + 2);
    painter.drawPolyline(QPolygonF{tip + QPointF(-4, -4), tip, tip + QPointF(4, -4)});
}

void ChoiceBox::wheelEvent(QWheelEvent* event) { event->ignore(); }

} // namespace sinewright::ui
