#include "ui/verdict/verdict_strip.hpp"
#include "ui/document/document.hpp"
#include "ui/theme/theme.hpp"
#include <QHBoxLayout>
#include <QPainter>
#include <algorithm>

namespace sinewright::ui {
namespace {

VerdictCard::Tone tone_of(const Findings& findings) {
    switch (findings.verdict) {
    case Verdict::meets:
        return VerdictCard::Tone::good;
    case Verdict::misses:
        return VerdictCard::Tone::bad;
    case Verdict::unknown:
        break;
    }
    return VerdictCard::Tone::quiet;
}

} // namespace

VerdictStrip::VerdictStrip(Document& document, Analyst& analyst, QWidget* parent)
    : QWidget(parent),
      document_(document),
      analyst_(analyst),
      card_(new VerdictCard(this)),
      gauge_area_(new QWidget(this)),
      problems_(new ProblemList(this)) {
    setObjectName("verdict_strip");
    setAccessibleName(tr("Verdict"));
    setFixedHeight(height_px);
    auto* row = new QHBoxLayout(this);
    row->setContentsMargins(24, 14, 8, 4);
    row->setSpacing(20);
    auto* card_column = new QVBoxLayout;
    card_column->setContentsMargins(0, 4, 0, 14);
    card_column->addWidget(card_);
    row->addLayout(card_column);
    gauge_area_->setObjectName("gauges");
    gauge_row_ = new QHBoxLayout(gauge_area_);
    gauge_row_->setContentsMargins(0, 0, 0, 0);
    gauge_row_->setSpacing(0);
    gauge_row_->addStretch(0);
    row->addWidget(gauge_area_, 3);
    row->addWidget(problems_, 2);
    connect(&analyst_, &Analyst::shown, this, &VerdictStrip::take_over);
    connect(&analyst_, &Analyst::stale_for_long, this, [this] { show_stale(true); });
    connect(&document_, &Document::replaced, this, &VerdictStrip::take_over);
    connect(problems_, &ProblemList::part_wanted, this, &VerdictStrip::part_wanted);
    connect(&ThemeKeeper::instance(), &ThemeKeeper::changed, this, qOverload<>(&QWidget::update));
    take_over();
}

void VerdictStrip::take_over() {
    const ShownPtr shown = analyst_.latest();
    const bool current = analyst_.current();
    const Design& design = document_.design();
    const Findings* findings = current ? &shown->findings : nullptr;
    std::vector<Problem> problems;
    if (design.parts.empty()) {
        card_->say(VerdictCard::Tone::quiet, tr("Nothing drawn yet"),
                   tr("Drop a part, type a value, or open a sample."));
        findings = nullptr;
    } else if (!findings) {
        card_->say(VerdictCard::Tone::quiet, tr("Working…"), {});
    } else {
        problems = problems_in(*findings, design);
        card_->say(tone_of(*findings), QString::fromStdString(findings->headline),
                   QString::fromStdString(findings->main_reason));
    }
    const bool nothing_computed = findings && !findings->small_signal;
    problems_->setVisible(!problems.empty());
    gauge_area_->setVisible(!(nothing_computed && !problems.empty()));
    problems_->set(std::move(problems));
    set_gauges(gauge_readings(findings, design));
    show_stale(false);
}

void VerdictStrip::show_stale(bool stale) {
    const bool drawn = !document_.design().parts.empty();
    card_->set_stale(stale && drawn);
    for (Gauge* gauge : gauges_) gauge->set_stale((stale && drawn) || !analyst_.current());
}

void VerdictStrip::set_gauges(const std::vector<GaugeReading>& readings) {
    while (gauges_.size() > readings.size()) {
        delete gauges_.back();
        gauges_.pop_back();
    }
    while (gauges_.size() < readings.size()) {
        auto* gauge = new Gauge(gauge_area_);
        connect(gauge, &Gauge::clicked, this, [this, gauge] { emit view_wanted(gauge->reading().view); });
        gauge_row_->insertWidget(int(gauges_.size()), gauge, 1);
        gauges_.push_back(gauge);
    }
    for (std::size_t i = 0; i < readings.size(); ++i) gauges_[i]->show_reading(readings[i]);
}

void VerdictStrip::paintEvent(QPaintEvent*) {
    QPainter painter(this);
    painter.fillRect(rect(), theme().raised);
    painter.fillRect(0, 0, width(), 1, theme().line);
    if (analyst_.current()) emit verdict_painted();
}

} // namespace sinewright::ui
