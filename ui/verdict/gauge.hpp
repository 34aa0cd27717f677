#pragma once
/// One gauge of the verdict strip: name, value with unit, track with band and needle, target in words, a fact.
#include "ui/verdict/gauge_reading.hpp"
#include <QAbstractButton>

namespace sinewright::ui {

/// A button: a click, Enter or the space bar asks for the view that explains the value.
class Gauge : public QAbstractButton {
    Q_OBJECT
  public:
    explicit Gauge(QWidget* parent = nullptr);
    void show_reading(const GaugeReading& reading);
    void set_stale(bool stale); ///< greys the value; it is never blanked
    const GaugeReading& reading() const { return reading_; }
    QSize sizeHint() const override { return {176, 128}; }
    QSize minimumSizeHint() const override { return {140, 128}; }

  protected:
    void paintEvent(QPaintEvent*) override;

  private:
    void paint_value(QPainter& painter) const;
    void paint_track(QPainter& painter) const;
    void paint_words(QPainter& painter) const;
    void describe();
    GaugeReading reading_;
    bool stale_ = false;
};

} // namespace sinewright::ui
