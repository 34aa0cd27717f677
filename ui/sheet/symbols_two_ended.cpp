/// Resistive, reactive and thermal parts, and the supply.
#include "ui/sheet/symbol_forms.hpp"

namespace sinewright::ui::forms {

namespace {
void leads_to(SymbolPen& pen, double half_width) {
    pen.lead({-40, 0}, {-half_width, 0});
    pen.lead({half_width, 0}, {40, 0});
}
} // namespace

void resistor(SymbolPen& pen) {
    leads_to(pen, 28);
    pen.box({-28, -11, 56, 22});
}

void capacitor(SymbolPen& pen) {
    leads_to(pen, 4);
    pen.bar({-4, -17}, {-4, 17});
    pen.bar({4, -17}, {4, 17});
}

void inductor(SymbolPen& pen) {
    leads_to(pen, 28);
    QPainterPath humps(QPointF(-28, 0));
    for (int i = 0; i < 4; ++i) humps.arcTo(QRectF(-28 + 14 * i, -9, 14, 18), 180, -180);
    pen.shape(humps);
}

void potentiometer(SymbolPen& pen) {
    resistor(pen);
    pen.arrow({0, -40}, {0, -12}, 7);
}

void lamp(SymbolPen& pen) {
    leads_to(pen, 18);
    pen.disc({0, 0}, 18);
    const double r = 18 * 0.7071;
    pen.line({-r, -r}, {r, r});
    pen.line({-r, r}, {r, -r});
}

void thermistor(SymbolPen& pen) {
    resistor(pen);
    QPainterPath slant(QPointF(-32, 19));
    slant.lineTo(-20, 19);
    slant.lineTo(20, -17);
    pen.shape(slant, false, 0.85);
    pen.mark({29, 18}, QStringLiteral("ϑ"), 13);
}

void supply(SymbolPen& pen) {
    pen.lead({0, -40}, {0, -5});
    pen.lead({0, 5}, {0, 40});
    pen.bar({-17, -5}, {17, -5});
    pen.line({-9, 5}, {9, 5}, 2);
    pen.mark({-14, -17}, QStringLiteral("+"), 14);
}

} // namespace sinewright::ui::forms
