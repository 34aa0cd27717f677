#include "ui/curves/start_view.hpp"
#include "ui/curves/frequency_plots.hpp"
#include "ui/curves/natural_frequency_map.hpp"
#include "ui/curves/plane_plot.hpp"
#include "ui/document/document.hpp"
#include <QHBoxLayout>
#include <QLabel>
#include <QVBoxLayout>

namespace sinewright::ui {

namespace {

/// What the plots can't say by themselves; empty when they say it all.
QString note_for(const ShownPtr& shown) {
    if (!shown) return QObject::tr("Working…");
    const Findings& findings = shown->findings;
    const auto first = [](const Faults& faults) {
        return QString::fromStdString(faults.front().sentence + " " + faults.front().remedy).trimmed();
    };
    if (shown->design && shown->design->parts.empty())
        return QObject::tr("Nothing to show yet: drop an amplifier and a network.");
    if (!findings.faults.empty()) return first(findings.faults);
    if (!findings.operating_point.faults.empty()) return first(findings.operating_point.faults);
    if (!findings.small_signal.faults.empty()) return first(findings.small_signal.faults);
    if (!findings.loop.faults.empty()) return first(findings.loop.faults);
    if (!findings.loop) return {};
    QString note;
    if (!findings.loop->barkhausen)
        note = QString::fromStdString(findings.loop->barkhausen_reason);
    else if (!findings.loop->barkhausen->falls)
        note = QObject::tr("The phase rises through zero at this cut, so a gain below one is what starts: the margin "
                           "counts from below.");
    if (findings.loop->cut_chosen) note = QString::fromStdString(findings.loop->cut_reason) + " " + note;
    // Of the notes on counting only a disagreement matters here.
    if (findings.loop->encirclement_note.starts_with("The counts disagree"))
        note += " " + QString::fromStdString(findings.loop->encirclement_note);
    return note.trimmed();
}

} // namespace

StartView::StartView(Document&, Analyst& analyst, QWidget* parent)
    : QWidget(parent),
      analyst_(analyst),
      note_(new QLabel(this)),
      frequency_(new FrequencyPlots(this)),
      plane_(new PlanePlot(this)),
      map_(new NaturalFrequencyMap(this)) {
    setObjectName("start_view");
    note_->setObjectName("start_note");
    note_->setAccessibleName(tr("Note"));
    note_->setWordWrap(true);
    note_->setTextFormat(Qt::PlainText);
    auto* column = new QVBoxLayout(this);
    column->setContentsMargins(0, 0, 0, 0);
    column->setSpacing(6);
    column->addWidget(note_);
    column->addWidget(frequency_, 55);
    auto* row = new QHBoxLayout;
    row->setSpacing(10);
    row->addWidget(plane_, 56);
    row->addWidget(map_, 44);
    column->addLayout(row, 45);
    connect(frequency_, &FrequencyPlots::cursor_moved, plane_, &PlanePlot::set_cursor);
    connect(&analyst_, &Analyst::shown, this, [this] { show_results(analyst_.latest()); });
    connect(&analyst_, &Analyst::stale_for_long, this, [this] { mark_stale(true); });
    connect(&ThemeKeeper::instance(), &ThemeKeeper::changed, this, [this] {
        frequency_->restyle();
        plane_->restyle();
        map_->restyle();
        show_results(analyst_.latest());
    });
    show_results(analyst_.latest());
}

void StartView::show_results(const ShownPtr& shown) {
    const QString note = note_for(shown);
    note_->setFont(theme().font(Theme::note_px));
    QPalette palette = note_->palette();
    palette.setColor(QPalette::WindowText, theme().soft);
    note_->setPalette(palette);
    note_->setText(note);
    note_->setVisible(!note.isEmpty());
    mark_stale(false);
    frequency_->show_results(shown);
    plane_->show_results(shown);
    map_->show_results(shown);
}

void StartView::set_baseline(const LoopCurve& baseline) {
    frequency_->set_baseline(baseline);
    plane_->set_baseline(baseline);
}

void StartView::mark_stale(bool stale) {
    frequency_->set_stale(stale);
    plane_->set_stale(stale);
    map_->set_stale(stale);
}

} // namespace sinewright::ui
