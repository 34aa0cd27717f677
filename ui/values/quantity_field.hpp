#pragma once
/// A field for one physical value: letter codes and prefixes in, steps along preferred numbers, faults in words.
#include "core/design/design.hpp"
#include "core/quantity/preferred.hpp"
#include <QLineEdit>

namespace sinewright::ui {

class QuantityField : public QLineEdit {
    Q_OBJECT
  public:
    explicit QuantityField(const QString& unit, QWidget* parent = nullptr);
    /// Shows a value as it was written, else as letter code. Nothing: empty, the placeholder tells the default.
    void show_value(const std::optional<Value>& value);
    void set_series(Series series) { series_ = series; }
    void show_fault(const QString& sentence); ///< empty: all is well

    /// How a value reads in this field.
    static QString text_of(const Value& value, const QString& unit);

  signals:
    void accepted(const sinewright::Value& value); ///< typed and read without fault
    void emptied();                                ///< the text was taken away: back to the default
    void stepped(const sinewright::Value& value);  ///< by arrow key or wheel; steps_ended() follows
    void steps_ended();
    void fault_changed(const QString& sentence); ///< empty: none

  protected:
    void keyPressEvent(QKeyEvent* event) override;
    void wheelEvent(QWheelEvent* event) override;
    void focusOutEvent(QFocusEvent* event) override;

  private:
    void read_text();
    void step(int steps, bool fine);
    QString unit_;
    Series series_ = Series::e24;
    std::optional<Value> value_;
    QString shown_text_;
    double wheel_rest_ = 0;
};

} // namespace sinewright::ui
