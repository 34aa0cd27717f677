#pragma once
/// Drawing functions of the symbols, one a part kind; entered in the table of symbols.cpp.
#include "ui/sheet/symbols.hpp"

namespace sinewright::ui::forms {

void resistor(SymbolPen& pen);
void capacitor(SymbolPen& pen);
void inductor(SymbolPen& pen);
void potentiometer(SymbolPen& pen);
void lamp(SymbolPen& pen);
void thermistor(SymbolPen& pen);
void supply(SymbolPen& pen);
void opamp(SymbolPen& pen);
void limiter(SymbolPen& pen);
void diode(SymbolPen& pen);
void zener(SymbolPen& pen);
void jfet(SymbolPen& pen);
void photocell(SymbolPen& pen);
void multiplier(SymbolPen& pen);
void servo(SymbolPen& pen);

} // namespace sinewright::ui::forms
