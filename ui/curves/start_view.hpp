#pragma once
/// The Start view: will it start? Gain and phase, the complex plane, natural frequencies, and a sentence where a
/// picture alone would leave doubt.
#include "ui/document/analyst.hpp"
#include <QWidget>

class QLabel;

namespace sinewright::ui {

class Document;
class FrequencyPlots;
class NaturalFrequencyMap;
class PlanePlot;

class StartView : public QWidget {
    Q_OBJECT
  public:
    StartView(Document& document, Analyst& analyst, QWidget* parent = nullptr);
    /// Shows results given by hand; used where no analyst runs.
    void show_results(const ShownPtr& shown);
    void set_baseline(const LoopCurve& baseline);

  private:
    void mark_stale(bool stale);
    Analyst& analyst_;
    QLabel* note_;
    FrequencyPlots* frequency_;
    PlanePlot* plane_;
    NaturalFrequencyMap* map_;
};

} // namespace sinewright::ui
