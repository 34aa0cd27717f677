#pragma once
/// All colours, type sizes and spacings of the program, light and dark. The only file that names a colour.
#include <QColor>
#include <QFont>
#include <QObject>
#include <QString>

namespace sinewright::ui {

enum class ThemeChoice { follow_system, light, dark };

struct Theme {
    bool dark = false;
    QColor sheet, panel, raised, line, grid, ink, soft, faint;
    QColor ribbon, ribbon_arrow, accent;
    QColor cut;  ///< cut, Barkhausen point, critical point
    QColor band; ///< margin band, with its alpha
    QColor first_curve, second_curve, ghost;
    QColor meets, misses, warn;
    QColor meets_ground, misses_ground, grows_ground; ///< tinted cards, right half plane
    static constexpr int corner_px = 8, step_px = 4;  ///< corners of cards and buttons; all spacings are whole steps
    // Type sizes in device-independent pixels.
    static constexpr double axis_px = 11.5, note_px = 12.5, body_px = 13.5, question_px = 17, gauge_px = 25;
    QFont font(double px,
               int weight = QFont::Normal) const; ///< the system's sans (Inter where present), tabular figures
};

const Theme& light_theme();
const Theme& dark_theme();

/// WCAG 2.1 contrast ratio of two opaque colours, 1 … 21. Source: WCAG 2.1, relative luminance and contrast ratio.
double contrast_ratio(const QColor& a, const QColor& b);
/// `colour` with its opacity multiplied, for greyed values and tints.
QColor faded(QColor colour, double opacity);

/// The theme in force; widgets repaint on changed().
class ThemeKeeper : public QObject {
    Q_OBJECT
  public:
    static ThemeKeeper& instance();
    const Theme& theme() const { return *in_force_; }
    ThemeChoice choice() const { return choice_; }
    void use(ThemeChoice choice);    ///< also sets the application's palette, font and style sheet
    void choose(ThemeChoice choice); ///< the same, remembered for the next start
    void restore();                  ///< uses the remembered choice; call once there is a QApplication
    bool eventFilter(QObject* watched, QEvent* event) override;
  signals:
    void changed();

  private:
    ThemeKeeper() = default;
    void apply();
    ThemeChoice choice_ = ThemeChoice::follow_system;
    const Theme* in_force_ = &light_theme();
    bool applied_ = false, applying_ = false;
};
inline const Theme& theme() { return ThemeKeeper::instance().theme(); }

} // namespace sinewright::ui
