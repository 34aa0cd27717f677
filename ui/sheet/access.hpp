#pragma once
/// The sheet for screen readers: every part is a child with a name such as
/// "R3, resistor, 18 kilo-ohm, between out and n2".

namespace sinewright::ui {

class SheetView;

void install_sheet_access();
/// Tells assistive programs which part has the attention; −1: none.
void report_selection(SheetView& sheet, int part);

} // namespace sinewright::ui
