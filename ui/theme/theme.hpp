#pragma once
/// All colours, type sizes and spacings of the program, light and dark. The only file that names a colour.
#include <QColor>
#include <QFont>
#include <QObject>

namespace sinewright::ui {

enum class ThemeChoice { follow_system, light, dark };

struct Theme {
    bool dark = false;
    QColor sheet, panel, raised, line, grid, ink, soft, faint;
    QColor ribbon, ribbon_arrow, accent;
    QColor cut;               ///< cut, Barkhausen point, critical point
    QColor band;              ///< margin band, with its alpha
    QColor first_curve, second_curve, ghost;
    QColor meets, misses, warn;
    QColor meets_ground, misses_ground, grows_ground; ///< tinted cards, right half plane
    // Type sizes in device-independent pixels.
    static constexpr double axis_px = 11.5, note_px = 12.5, body_px = 13.5, question_px = 17, gauge_px = 25;
    QFont font(double px, int weight = QFont::Normal) const; ///< the system's sans (Inter where present), tabular figures
};

const Theme& light_theme();
const Theme& dark_theme();

/// The theme in force; widgets repaint on changed().
class ThemeKeeper : public QObject {
    Q_OBJECT
  public:
    static ThemeKeeper& instance();
    const Theme& theme() const;
    ThemeChoice choice() const { return choice_; }
    void choose(ThemeChoice choice); ///< also sets the application's palette and style sheet
  signals:
    void changed();

  private:
    ThemeKeeper() = default;
    ThemeChoice choice_ = ThemeChoice::follow_system;
};
inline const Theme& theme() { return ThemeKeeper::instance().theme(); }

} // namespace sinewright::ui
