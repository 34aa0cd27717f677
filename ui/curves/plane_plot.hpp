#pragma once
/// Loop gain in the complex plane with the critical point +1.
#include "ui/curves/plot_style.hpp"
#include "ui/document/analyst.hpp"

namespace sinewright::ui {

class PlanePlot : public QCustomPlot {
    Q_OBJECT
  public:
    explicit PlanePlot(QWidget* parent = nullptr);
    void show_results(const ShownPtr& shown);
    void set_baseline(const LoopCurve& baseline);
    void set_stale(bool stale);
    void restyle();
    /// A dot at the curve's point of this frequency; 0: none.
    void set_cursor(double frequency_hz);
    void reset_ranges();
    QString encirclement_text() const { return words_->text(); }

  protected:
    void resizeEvent(QResizeEvent* event) override;
    void mouseDoubleClickEvent(QMouseEvent* event) override;
    void wheelEvent(QWheelEvent* event) override;
    void keyPressEvent(QKeyEvent* event) override;

  private:
    void equal_scales(QPointF centre, double half_height);
    void zoom(double factor, QPointF at);
    void place_arrow();
    ShownPtr shown_;
    bool stale_ = false, chosen_by_hand_ = false;
    double cursor_hz_ = 0;
    QCPCurve *curve_ = nullptr, *mirrored_ = nullptr, *ghost_ = nullptr;
    QCPGraph *critical_ = nullptr, *dot_ = nullptr;
    QCPItemLine *margin_ = nullptr, *arrow_ = nullptr, *real_axis_ = nullptr, *imaginary_axis_ = nullptr;
    QCPItemText *words_ = nullptr, *critical_label_ = nullptr;
    QList<QCPItemText*> titles_;
};

} // namespace sinewright::ui
