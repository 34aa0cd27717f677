#pragma once
/// The one style sheet: how buttons, tabs, menus, fields and sliders look in a theme.
#include "ui/theme/theme.hpp"

namespace sinewright::ui {

/// Words in braces in the sheet's text are replaced by the theme's colours and sizes.
QString style_sheet(const Theme& theme);

} // namespace sinewright::ui
