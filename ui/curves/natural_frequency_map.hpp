#pragma once
/// Natural frequencies: growth across, frequency up; the right half grows, the left dies away.
#include "ui/curves/plot_style.hpp"
#include "ui/document/analyst.hpp"

namespace sinewright::ui {

class NaturalFrequencyMap : public QCustomPlot {
    Q_OBJECT
  public:
    explicit NaturalFrequencyMap(QWidget* parent = nullptr);
    void show_results(const ShownPtr& shown);
    void set_stale(bool stale);
    void restyle();
    void reset_ranges();
    QString growth_text() const { return growth_->text(); }
    int trail_length() const { return trail_->data()->size() / 2; }

  protected:
    void mouseDoubleClickEvent(QMouseEvent* event) override;
    void keyPressEvent(QKeyEvent* event) override;

  private:
    void extend_trail();
    ShownPtr shown_;
    bool stale_ = false;
    QStringList trail_of_; ///< parts of the design the trail belongs to
    QCPGraph* roots_ = nullptr;
    QCPCurve* trail_ = nullptr;
    QCPItemRect* right_half_ = nullptr;
    QCPItemLine *axis_ = nullptr, *real_ = nullptr, *distance_ = nullptr;
    QCPItemText *growth_ = nullptr, *grows_ = nullptr, *dies_ = nullptr, *outside_ = nullptr;
    QList<QCPItemText*> titles_;
};

} // namespace sinewright::ui
