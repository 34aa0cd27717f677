#pragma once
/// Gain and phase of the loop against frequency, the Barkhausen point in both, and the start-up margin as a band with a
/// lens that magnifies the crossing.
#include "ui/curves/plot_style.hpp"
#include "ui/document/analyst.hpp"

namespace sinewright::ui {

class FrequencyPlots : public QCustomPlot {
    Q_OBJECT
  public:
    explicit FrequencyPlots(QWidget* parent = nullptr);
    /// Takes over new results; null or without a curve: empty axes.
    void show_results(const ShownPtr& shown);
    /// A dotted curve to compare with; empty: none.
    void set_baseline(const LoopCurve& baseline);
    void set_stale(bool stale);
    void restyle();
    /// Read-out at a frequency; 0: none.
    void set_cursor(double frequency_hz);
    double cursor_hz() const { return cursor_hz_; }
    QString readout() const { return readout_->text(); }
    QString margin_text() const { return margin_->text(); }
    QString point_text() const { return point_label_->text(); }
    void reset_ranges();

  signals:
    void cursor_moved(double frequency_hz); ///< 0: left

  protected:
    void mouseMoveEvent(QMouseEvent* event) override;
    void mouseDoubleClickEvent(QMouseEvent* event) override;
    void leaveEvent(QEvent* event) override;
    void keyPressEvent(QKeyEvent* event) override;
    void resizeEvent(QResizeEvent* event) override;

  private:
    void build_axes();
    void build_items();
    void build_lens();
    void fill_graphs();
    void place_point();
    void place_lens();
    void choose_ranges();
    void zoom(double factor, double centre_hz);
    ShownPtr shown_;
    bool stale_ = false, ranges_chosen_ = false;
    double cursor_hz_ = 0;
    QCPAxisRect *gain_rect_ = nullptr, *phase_rect_ = nullptr, *lens_rect_ = nullptr;
    QCPGraph *gain_ = nullptr, *phase_ = nullptr, *ghost_gain_ = nullptr, *ghost_phase_ = nullptr;
    QCPGraph *lens_curve_ = nullptr, *lens_zero_ = nullptr;
    QCPItemRect* band_ = nullptr;
    QCPItemLine *point_line_ = nullptr, *cursor_line_ = nullptr, *zero_gain_ = nullptr, *zero_phase_ = nullptr;
    QCPGraph *gain_ring_ = nullptr, *phase_ring_ = nullptr, *lens_ring_ = nullptr;
    QCPItemText *margin_ = nullptr, *lens_zero_label_ = nullptr, *point_label_ = nullptr, *readout_ = nullptr;
    QCPItemRect* lens_card_ = nullptr;
    QList<QCPItemText*> titles_;
};

} // namespace sinewright::ui
