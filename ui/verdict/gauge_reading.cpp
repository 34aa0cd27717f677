#include "ui/verdict/gauge_reading.hpp"
#include "core/quantity/quantity.hpp"
#include <QCoreApplication>
#include <QStringList>
#include <algorithm>
#include <cmath>

namespace sinewright::ui {
namespace {

QString tr(const char* text) { return QCoreApplication::translate("gauge", text); }

/// How a result is called, written and scaled.
struct Quantity {
    const char* key;
    const char* name;
    const char* unit;     ///< as shown
    double shown = 1;     ///< shown value = SI value × this (100 for per cent)
    int decimals = -1;    ///< −1: five significant digits
    bool signed_ = false; ///< a plus is written, and 0 is marked on the track
    bool positive = false;
    const char* view = "Start";
};

constexpr Quantity quantities[] = {
    {"startup_margin_db", QT_TRANSLATE_NOOP("gauge", "Start-up margin"), "dB", 1, 2, true, false},
    {"frequency_hz", QT_TRANSLATE_NOOP("gauge", "Frequency"), "Hz", 1, -1, false, true},
    {"growth_per_cycle", QT_TRANSLATE_NOOP("gauge", "Growth per cycle"), "%", 100, 1, true, false},
    {"growth_per_s", QT_TRANSLATE_NOOP("gauge", "Growth rate"), "1/s", 1, -1, true, false},
    {"amplitude_v", QT_TRANSLATE_NOOP("gauge", "Peak level"), "V", 1, 3, false, true, "Rest"},
    {"rms_v", QT_TRANSLATE_NOOP("gauge", "Level"), "V rms", 1, 3, false, true, "Rest"},
    {"thd_db", QT_TRANSLATE_NOOP("gauge", "THD"), "dB", 1, 1, false, false, "Purity"},
    {"thd_ratio", QT_TRANSLATE_NOOP("gauge", "THD"), "%", 100, -1, false, true, "Purity"},
    {"settling_time_s", QT_TRANSLATE_NOOP("gauge", "Settling to 1 %"), "s", 1, 3, false, true, "Settle"},
    {"yield", QT_TRANSLATE_NOOP("gauge", "Yield"), "%", 100, 1, false, true, "Units"},
};

const Quantity* find_quantity(const std::string& key) {
    const auto found = std::find_if(std::begin(quantities), std::end(quantities),
                                    [&](const Quantity& quantity) { return key == quantity.key; });
    return found == std::end(quantities) ? nullptr : found;
}

constexpr std::size_t fewest_gauges = 3; // fewer targets leave room for what is useful anyway

constexpr Quantity plain_quantity{"", "", ""};

QString number(const Quantity& quantity, double si) {
    const double value = si * quantity.shown;
    int decimals = quantity.decimals;
    if (decimals < 0) decimals = value == 0 ? 0 : std::clamp(4 - int(std::floor(std::log10(std::abs(value)))), 0, 6);
    QString text = QString::fromStdString(plain_text(value, decimals));
    if (quantity.signed_ && value > 0) text.prepend('+');
    return text;
}

/// A limit as short as it was meant: "0.2", "−40", "1".
QString limit(const Quantity& quantity, double si) {
    const double value = si * quantity.shown;
    QString text = QString::number(value, 'g', 6);
    const auto point = text.indexOf('.');
    if (!text.contains('e'))
        return QString::fromStdString(plain_text(value, point < 0 ? 0 : int(text.size() - point) - 1));
    return text.replace('-', QChar(0x2212));
}

QString target_words(const Quantity& quantity, const TargetFinding& finding, const Target* target) {
    if (target && target->nominal && target->within) {
        const QString nominal = quantity.shown == 1
                                    ? QString::fromStdString(si_text(target->nominal->si, quantity.unit, 6))
                                    : limit(quantity, target->nominal->si);
        return tr("%1 within %2 %").arg(nominal, limit({"", "", "", 100}, target->within->si));
    }
    if (finding.min && finding.max) {
        const QString both = limit(quantity, *finding.min) + " … " + limit(quantity, *finding.max);
        return (finding.met == false ? tr("outside %1") : tr("within %1")).arg(both);
    }
    if (finding.max) return (finding.met == false ? tr("over %1") : tr("below %1")).arg(limit(quantity, *finding.max));
    if (finding.min)
        return (finding.met == false ? tr("short of %1") : tr("above %1")).arg(limit(quantity, *finding.min));
    return {};
}

struct Track {
    double from = 0, to = 1;
    double place(double value) const { return (value - from) / (to - from); }
};

/// The stretch of values a track shows: the band with half as much room on both sides, or room round a single limit.
Track track_for(const Quantity& quantity, std::optional<double> value, const std::optional<double>& min,
                const std::optional<double>& max) {
    Track track;
    if (min && max && *max > *min) {
        const double span = *max - *min;
        track = {*min - span / 2, *max + span / 2};
    } else if (min || max) {
        const double at = max ? *max : *min;
        const double away = value ? std::abs(*value - at) : 0;
        const double room = std::max({away * 1.3, std::abs(at) * 0.25, 1e-12});
        track = max ? Track{at - room * 1.6, at + room} : Track{at - room, at + room * 1.6};
    } else if (quantity.signed_) {
        const double reach = value && *value != 0 ? std::pow(10, std::ceil(std::log10(std::abs(*value) * 1.2))) : 1;
        track = {-reach, reach};
    } else if (value && *value > 0) {
        const double decade = std::pow(10, std::floor(std::log10(*value)));
        track = {0, 10 * decade};
    }
    if (quantity.positive && track.from < 0) track.from = 0;
    return track;
}

void put_on_track(GaugeReading& reading, const Quantity& quantity, std::optional<double> value,
                  const std::optional<double>& min, const std::optional<double>& max) {
    const Track track = track_for(quantity, value, min, max);
    if (min || max) {
        reading.band_from = min ? std::clamp(track.place(*min), 0.0, 1.0) : 0;
        reading.band_to = max ? std::clamp(track.place(*max), 0.0, 1.0) : 1;
    }
    if (quantity.signed_ && track.from < 0 && track.to > 0) reading.zero = track.place(0);
    if (!value) return;
    const double place = track.place(*value);
    reading.beyond = place < 0 || place > 1;
    reading.needle = std::clamp(place, 0.0, 1.0);
}

QString growth_fact(const Findings& findings) {
    if (!findings.small_signal || !findings.small_signal->growth_per_cycle) return {};
    const double percent = *findings.small_signal->growth_per_cycle * 100;
    const QString amount = QString::fromStdString(si_text(std::abs(percent), "%", 3));
    return percent >= 0 ? tr("grows %1 a cycle").arg(amount) : tr("loses %1 a cycle").arg(amount);
}

QString fact_for(const std::string& key, const Findings& findings) {
    const bool margin_known = findings.loop && findings.loop->barkhausen;
    if (key == "startup_margin_db") return growth_fact(findings);
    if (key == "frequency_hz" && margin_known)
        return tr("Barkhausen point %1 Hz")
            .arg(number(*find_quantity("frequency_hz"), findings.loop->barkhausen->frequency_hz));
    if (key == "growth_per_cycle" && findings.small_signal && findings.small_signal->growth_per_s)
        return tr("growth rate %1 1/s")
            .arg(number(*find_quantity("growth_per_s"), *findings.small_signal->growth_per_s));
    if (key == "growth_per_s" || key == "frequency_hz") return growth_fact(findings);
    return {};
}

GaugeReading reading_of(const TargetFinding& finding, const Findings* findings, const Target* target) {
    const Quantity* known = find_quantity(finding.name);
    const Quantity& quantity = known ? *known : plain_quantity;
    GaugeReading reading;
    reading.key = QString::fromStdString(finding.name);
    reading.name = result_title(finding.name);
    reading.value = finding.value ? number(quantity, *finding.value) : QString(QChar(0x2013));
    reading.unit = quantity.unit;
    reading.met = finding.met;
    reading.words = target_words(quantity, finding, target);
    reading.view = quantity.view;
    if (!finding.value)
        reading.fact = QString::fromStdString(finding.reason);
    else if (findings)
        reading.fact = fact_for(finding.name, *findings);
    put_on_track(reading, quantity, finding.value, finding.min, finding.max);
    return reading;
}

/// The three results every loop has, for designs that set no targets or few.
std::vector<TargetFinding> usual_results(const Findings* findings) {
    TargetFinding margin, frequency, growth;
    margin.name = "startup_margin_db", frequency.name = "frequency_hz", growth.name = "growth_per_cycle";
    margin.reason = tr("what the loop makes up beyond its losses").toStdString();
    frequency.reason = tr("of the pair that grows fastest").toStdString();
    growth.reason = tr("what each cycle adds to the swing").toStdString();
    if (findings && findings->loop) {
        if (findings->loop->barkhausen) margin.value = findings->loop->barkhausen->startup_margin_db;
        margin.reason = findings->loop->barkhausen_reason;
    }
    if (findings && findings->small_signal) {
        frequency.value = findings->small_signal->frequency_hz;
        frequency.reason = growth.reason = findings->small_signal->frequency_reason;
        growth.value = findings->small_signal->growth_per_cycle;
    }
    return {margin, frequency, growth};
}

/// Before anything is known a target shows its band all the same.
std::vector<TargetFinding> targets_without_values(const Design& design) {
    std::vector<TargetFinding> findings;
    for (const Target& target : design.targets) {
        TargetFinding finding;
        finding.name = target.name;
        if (target.min) finding.min = target.min->si;
        if (target.max) finding.max = target.max->si;
        if (target.nominal && target.within) {
            const double room = std::abs(target.nominal->si) * target.within->si;
            finding.min = target.nominal->si - room, finding.max = target.nominal->si + room;
        }
        findings.push_back(finding);
    }
    return findings;
}

} // namespace

QString result_title(const std::string& key) {
    const Quantity* known = find_quantity(key);
    return known ? tr(known->name) : QString::fromStdString(key).replace('_', ' ');
}

std::vector<GaugeReading> gauge_readings(const Findings* findings, const Design& design) {
    std::vector<TargetFinding> shown = findings ? findings->targets : std::vector<TargetFinding>{};
    if (shown.empty()) shown = targets_without_values(design);
    for (const TargetFinding& usual : usual_results(findings)) {
        const bool there = std::any_of(shown.begin(), shown.end(),
                                       [&](const TargetFinding& finding) { return finding.name == usual.name; });
        if (shown.size() < fewest_gauges && !there) shown.push_back(usual);
    }
    std::vector<GaugeReading> readings;
    for (const TargetFinding& finding : shown) {
        const auto target = std::find_if(design.targets.begin(), design.targets.end(),
                                         [&](const Target& candidate) { return candidate.name == finding.name; });
        readings.push_back(reading_of(finding, findings, target == design.targets.end() ? nullptr : &*target));
    }
    return readings;
}

} // namespace sinewright::ui
