#pragma once
/// The strip at the foot of the window, always visible: the overall verdict, one gauge per target, and what is wrong.
#include "ui/document/analyst.hpp"
#include "ui/verdict/gauge.hpp"
#include "ui/verdict/problems.hpp"
#include "ui/verdict/verdict_card.hpp"
#include <QWidget>

class QHBoxLayout;

namespace sinewright::ui {

class Document;

class VerdictStrip : public QWidget {
    Q_OBJECT
  public:
    static constexpr int height_px = 140;
    VerdictStrip(Document& document, Analyst& analyst, QWidget* parent = nullptr);
    const VerdictCard& card() const { return *card_; }
    const std::vector<Gauge*>& gauges() const { return gauges_; }
    const ProblemList& problems() const { return *problems_; }

  signals:
    void view_wanted(const QString& view); ///< "Start"
    void part_wanted(const QString& ref);
    void verdict_painted(); ///< the first verdict after results came has reached the screen

  protected:
    void paintEvent(QPaintEvent*) override;

  private:
    void take_over(); ///< the latest findings, or their absence
    void show_stale(bool stale);
    void set_gauges(const std::vector<GaugeReading>& readings);
    Document& document_;
    Analyst& analyst_;
    VerdictCard* card_;
    QHBoxLayout* gauge_row_;
    QWidget* gauge_area_;
    ProblemList* problems_;
    std::vector<Gauge*> gauges_;
};

} // namespace sinewright::ui
