#pragma once
/// What the gauges of the verdict strip say: findings turned into words, numbers and places on a track. No physics
/// here.
#include "core/review/findings.hpp"
#include <QString>
#include <optional>
#include <vector>

namespace sinewright::ui {

struct GaugeReading {
    QString key;         ///< the result's name in the file: "startup_margin_db"
    QString name;        ///< "Start-up margin"
    QString value, unit; ///< "+0.28", "dB"; value "–": not known
    // Places on the track, 0 … 1 from its left end.
    std::optional<double> needle; ///< held inside the track; see beyond
    std::optional<double> band_from, band_to;
    std::optional<double> zero; ///< a mark at the value 0 where that decides
    bool beyond = false;        ///< the value lies outside the track
    std::optional<bool> met;    ///< nothing: no target, or not known
    QString words;              ///< the target in words: "within 0.2 … 1"
    QString fact;               ///< the next most useful fact
    QString view;               ///< the view that explains it: "Start"
};

/// What a result is called on screen: "Start-up margin" for "startup_margin_db"; its name in words when unknown.
QString result_title(const std::string& key);

/// One gauge per target; where there are fewer than three, start-up margin, frequency and growth per cycle fill up.
/// Values not known yet (no findings, a failed stage) read "–" with the reason as fact.
std::vector<GaugeReading> gauge_readings(const Findings* findings, const Design& design);

} // namespace sinewright::ui
