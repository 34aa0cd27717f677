/// Amplifying, limiting and controlling parts.
#include "ui/sheet/symbol_forms.hpp"

namespace sinewright::ui::forms {

namespace {
QPainterPath triangle(double left, double right, double half_height, double middle = 0) {
    QPainterPath path(QPointF(left, middle - half_height));
    path.lineTo(right, middle);
    path.lineTo(left, middle + half_height);
    path.closeSubpath();
    return path;
}

void diode_body(SymbolPen& pen) {
    pen.lead({-40, 0}, {-11, 0});
    pen.lead({11, 0}, {40, 0});
    pen.shape(triangle(-11, 11, 11), true);
}
} // namespace

void opamp(SymbolPen& pen) {
    pen.lead({-80, -40}, {-55, -40});
    pen.lead({-80, 40}, {-55, 40});
    pen.lead({55, 0}, {80, 0});
    pen.box({-55, -56, 110, 112}, 3);
    if (pen.small()) return pen.shape(triangle(-14, 30, 28));
    pen.shape(triangle(8, 21, 8, -34), false, 0.9);
    pen.mark({36, -34}, QStringLiteral("∞"), 19);
    pen.mark({-42, -40}, QStringLiteral("+"), 17);
    pen.mark({-42, 40}, QStringLiteral("−"), 17);
}

void limiter(SymbolPen& pen) {
    pen.lead({-40, 0}, {-24, 0});
    pen.lead({24, 0}, {40, 0});
    pen.box({-24, -24, 48, 48}, 3);
    QPainterPath law(QPointF(-16, 11));
    law.lineTo(-9, 11);
    law.lineTo(9, -11);
    law.lineTo(16, -11);
    pen.shape(law);
}

void diode(SymbolPen& pen) {
    diode_body(pen);
    pen.bar({11, -11}, {11, 11});
}

void zener(SymbolPen& pen) {
    diode_body(pen);
    QPainterPath bar(QPointF(11, -11));
    bar.lineTo(11, 11);
    bar.lineTo(4, 11);
    pen.shape(bar, false, 1.25);
}

void jfet(SymbolPen& pen) {
    pen.bar({0, -17}, {0, 17});
    for (const double side : {-1.0, 1.0}) {
        pen.line({0, side * 11}, {20, side * 11});
        pen.lead({20, side * 11}, {20, side * 40});
    }
    pen.lead({-40, 0}, {0, 0});
    pen.arrow({-14, 0}, {-2, 0}, 8);
}

void photocell(SymbolPen& pen) {
    if (pen.small()) { // the cell and the light that falls on it
        pen.lead({-60, 16}, {60, 16});
        pen.box({-34, 0, 68, 32}, 3);
        pen.arrow({-34, -34}, {-14, -8}, 12);
        pen.arrow({-8, -34}, {12, -8}, 12);
        return;
    }
    pen.box({-44, -36, 88, 72}, 8);
    for (const double side : {-1.0, 1.0}) {
        pen.lead({side * 60, -20}, {side * 44, -20});
        pen.lead({side * 60, 20}, {side * 44, 20});
    }
    QPainterPath light(QPointF(-44, -20)); // the light-emitting diode, anode above
    light.lineTo(-24, -20);
    light.lineTo(-24, 20);
    light.lineTo(-44, 20);
    pen.shape(light);
    QPainterPath emitter(QPointF(-33, -7));
    emitter.lineTo(-15, -7);
    emitter.lineTo(-24, 7);
    emitter.closeSubpath();
    pen.shape(emitter, true);
    pen.bar({-33, 7}, {-15, 7});
    pen.arrow({-10, -6}, {4, -6}, 4.5);
    pen.arrow({-10, 3}, {4, 3}, 4.5);
    QPainterPath cell(QPointF(44, -20));
    cell.lineTo(20, -20);
    cell.lineTo(20, 20);
    cell.lineTo(44, 20);
    pen.shape(cell);
    pen.box({12, -14, 16, 28}, 2);
}

void multiplier(SymbolPen& pen) {
    pen.lead({-60, -20}, {-36, -20});
    pen.lead({-60, 20}, {-36, 20});
    pen.lead({36, 0}, {60, 0});
    pen.box({-36, -36, 72, 72}, 3);
    pen.line({-9, -9}, {9, 9});
    pen.line({-9, 9}, {9, -9});
    pen.mark({-27, -20}, QStringLiteral("x"), 12);
    pen.mark({-27, 20}, QStringLiteral("y"), 12);
}

void servo(SymbolPen& pen) {
    pen.lead({-60, 0}, {-36, 0});
    pen.lead({36, 0}, {60, 0});
    pen.box({-36, -28, 72, 56}, 3);
    QPainterPath wave(QPointF(-28, 0));
    wave.cubicTo(-23, -14, -18, -14, -15, 0);
    wave.cubicTo(-12, 14, -7, 14, -2, 0);
    pen.shape(wave, false, 0.9);
    QPainterPath step(QPointF(6, 10));
    step.lineTo(16, 10);
    step.lineTo(16, -10);
    step.lineTo(28, -10);
    pen.shape(step, false, 0.9);
}

} // namespace sinewright::ui::forms
