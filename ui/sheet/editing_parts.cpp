#include "core/parts/part_kind.hpp"
#include "core/quantity/preferred.hpp"
#include "core/quantity/quantity.hpp"
#include "ui/sheet/editing.hpp"
#include "ui/sheet/reading.hpp"
#include <QObject>
#include <algorithm>
#include <cmath>
#include <limits>
#include <set>

namespace sinewright::ui {

namespace {

/// Typical values a dropped part starts from; source: common practice, no source.
struct StartingValue {
    std::string_view kind, parameter, text;
};
constexpr StartingValue starting_values[] = {
    {"resistor", "resistance", "10k"},
    {"capacitor", "capacitance", "10n"},
    {"inductor", "inductance", "10m"},
    {"potentiometer", "resistance", "10k"},
    {"supply", "voltage", "9"},
    {"opamp", "model", "macro"},
    {"opamp", "gbw", "10M"},
    {"opamp", "slew_rate", "10M"},
    {"opamp", "swing_high", "13"},
    {"opamp", "swing_low", "-13"},
    {"opamp", "output_resistance", "50"},
    {"limiter", "law", "tanh"},
    {"limiter", "gain", "1"},
    {"limiter", "limit", "1"},
    {"zener", "breakdown_voltage", "5.1"},
    {"lamp", "cold_resistance", "480"},
    {"lamp", "heat_capacity", "14e-6"},
    {"lamp", "conduction", "40e-6"},
    {"lamp", "radiation", "40e-15"},
    {"thermistor", "resistance_25", "5k"},
    {"thermistor", "beta", "3500"},
    {"thermistor", "heat_capacity", "100e-6"},
    {"thermistor", "dissipation", "50e-6"},
    {"jfet", "pinch_off", "-2"},
    {"jfet", "beta", "1e-3"},
    {"photocell", "sensitivity", "0.1"},
    {"photocell", "lag", "20m"},
    {"multiplier", "scale", "0.1"},
    {"servo", "detector_lag", "10m"},
    {"servo", "setpoint", "2"},
    {"servo", "rate", "2"},
};

ParameterValue starting_value(const PartKind& kind, const StartingValue& start) {
    const ParameterInfo& info = kind.parameters[static_cast<std::size_t>(kind.parameter(start.parameter))];
    if (!info.choices.empty()) return std::string(start.text);
    const auto si = parse_quantity(start.text, info.unit);
    return Value{si ? *si : 0, std::string(start.text)};
}

/// Parameters stand in the order of the kind's description.
void put(Part& part, std::string_view name, const ParameterValue& value) {
    for (Parameter& parameter : part.parameters)
        if (parameter.name == name) {
            parameter.value = value;
            return;
        }
    const PartKind* kind = find_part_kind(part.kind);
    const int order = kind ? kind->parameter(name) : 0;
    const auto after = std::find_if(part.parameters.begin(), part.parameters.end(),
                                    [&](const Parameter& p) { return kind && kind->parameter(p.name) > order; });
    part.parameters.insert(after, {std::string(name), value});
}

bool chosen(const std::vector<std::string>& refs, const std::string& ref) {
    return std::find(refs.begin(), refs.end(), ref) != refs.end();
}

/// The place of the part nearest the parts' middle: turning and flipping about it is undone by turning back.
QPointF pivot(const Design& design, const std::vector<std::string>& refs) {
    QPointF low(std::numeric_limits<double>::max(), std::numeric_limits<double>::max()), high = -low;
    std::vector<QPointF> places;
    for (const Part& part : design.parts) {
        if (!chosen(refs, part.ref)) continue;
        const Place place = place_of(part, {});
        places.emplace_back(place.x, place.y);
        low = {std::min(low.x(), place.x), std::min(low.y(), place.y)};
        high = {std::max(high.x(), place.x), std::max(high.y(), place.y)};
    }
    const auto off_middle = [&](QPointF p) {
        const QPointF d = 2 * p - (low + high);
        return QPointF::dotProduct(d, d);
    };
    const auto nearest = std::min_element(places.begin(), places.end(),
                                          [&](QPointF a, QPointF c) { return off_middle(a) < off_middle(c); });
    return nearest == places.end() ? QPointF() : *nearest;
}

template <class F> void each_place(Design& design, const std::vector<std::string>& refs, F&& change) {
    for (Part& part : design.parts)
        if (chosen(refs, part.ref)) {
            Place place = place_of(part, {});
            change(place);
            part.place = place;
        }
}

} // namespace

Part starting_part(const Design& design, std::string_view kind, const Place& place, const std::optional<Value>& value) {
    Part part;
    part.ref = free_ref(design, kind);
    part.kind = kind;
    part.place = place;
    const PartKind* known = find_part_kind(kind);
    if (!known) return part;
    for (const TerminalInfo& terminal : known->terminals)
        part.terminals.push_back({std::string(terminal.name), std::nullopt});
    for (const StartingValue& start : starting_values)
        if (start.kind == kind && known->parameter(start.parameter) >= 0)
            put(part, start.parameter, starting_value(*known, start));
    const ParameterInfo* shown = shown_parameter(part);
    if (value && shown) put(part, shown->name, *value);
    return part;
}

void drop(Design& design, const Part& part) {
    design.parts.push_back(part);
    join_touching(design, {part.ref});
}

void remove_parts(Design& design, const std::vector<std::string>& refs) {
    for (const std::string& ref : refs) {
        const Part* part = design.find(ref);
        if (!part) continue;
        const auto terminals = part->terminals;
        for (const TerminalNet& t : terminals) free_end(design, {ref, t.terminal});
    }
    std::erase_if(design.parts, [&](const Part& part) { return chosen(refs, part.ref); });
    if (design.cut && chosen(refs, design.cut->part)) design.cut.reset();
    for (Group& group : design.groups)
        std::erase_if(group.members, [&](const std::string& m) { return chosen(refs, m); });
    std::erase_if(design.groups, [](const Group& group) { return group.members.empty(); });
    for (Dial& dial : design.dials)
        std::erase_if(dial.sets, [&](const std::string& set) { return chosen(refs, set.substr(0, set.find('.'))); });
    std::erase_if(design.dials, [](const Dial& dial) { return dial.sets.empty(); });
}

void move_parts(Design& design, const std::vector<std::string>& refs, double dx, double dy) {
    each_place(design, refs, [&](Place& place) { place.x += dx, place.y += dy; });
    for (Label& label : design.labels) // a stub goes with its part
        if (label.stub_of && chosen(refs, label.stub_of->part)) label.x += dx, label.y += dy;
}

void turn_parts(Design& design, const std::vector<std::string>& refs, int quarters) {
    const QPointF about = pivot(design, refs);
    for (int i = 0; i < ((quarters % 4) + 4) % 4; ++i)
        each_place(design, refs, [&](Place& place) {
            const QPointF from(place.x - about.x(), place.y - about.y());
            place.x = about.x() - from.y(), place.y = about.y() + from.x();
            place.turn = (place.turn + 90) % 360;
        });
}

void flip_parts(Design& design, const std::vector<std::string>& refs, bool upside_down) {
    const QPointF about = pivot(design, refs);
    each_place(design, refs, [&](Place& place) {
        if (upside_down)
            place.y = 2 * about.y() - place.y;
        else
            place.x = 2 * about.x() - place.x;
        // Mirrored left to right after a turn by t equals mirrored first and turned by −t; upside down is half a turn
        // more.
        place.turn = (360 - place.turn + (upside_down ? 180 : 0)) % 360;
        place.flip = !place.flip;
    });
}

Design excerpt(const Design& design, const std::vector<std::string>& refs) {
    Design part_of;
    part_of.title = design.title;
    for (const Part& part : design.parts)
        if (chosen(refs, part.ref)) part_of.parts.push_back(part);
    for (const Part& part : part_of.parts)
        for (const TerminalNet& t : part.terminals) {
            if (!t.net || *t.net == ground_net) continue;
            const bool whole =
                terminals_on(design, *t.net).size() == terminals_on(part_of, *t.net).size() && t.net != design.output;
            if (whole) continue;
            for (Part& mine : part_of.parts)
                for (TerminalNet& end : mine.terminals)
                    if (end.net == t.net && terminals_on(part_of, *t.net).size() < 2) end.net.reset();
        }
    return part_of;
}

std::vector<std::string> add_copies(Design& design, const Design& excerpt, double dx, double dy) {
    std::map<std::string, std::string> names;
    std::vector<std::string> refs;
    for (Part part : excerpt.parts) {
        part.ref = free_ref(design, part.kind);
        Place place = place_of(part, {});
        place.x += dx, place.y += dy;
        part.place = place;
        for (TerminalNet& end : part.terminals) {
            if (!end.net || *end.net == ground_net) continue;
            if (terminals_on(excerpt, *end.net).size() < 2) {
                end.net.reset();
                continue;
            }
            const auto [known, fresh] = names.try_emplace(*end.net);
            if (fresh) known->second = free_net(design);
            end.net = known->second;
        }
        refs.push_back(part.ref);
        design.parts.push_back(std::move(part));
    }
    return refs;
}

void fix_places(Design& design, const Places& worked_out) {
    for (Part& part : design.parts)
        if (!part.place)
            if (const auto found = worked_out.find(part.ref); found != worked_out.end()) part.place = found->second;
}

Refusal set_value(Design& design, const std::string& ref, const QString& text) {
    Part* part = design.find(ref);
    const ParameterInfo* parameter = part ? shown_parameter(*part) : nullptr;
    if (!parameter) return QObject::tr("%1 has no value to set here.").arg(QString::fromStdString(ref));
    const std::string typed = text.trimmed().toStdString();
    if (part->kind == "opamp") {
        const bool ideal = QStringLiteral("ideal") == text.trimmed().toLower();
        put(*part, "model", std::string(ideal ? "ideal" : "macro"));
        if (ideal) return {};
    }
    const auto si = read_value(typed, parameter->unit);
    if (!si) return QString::fromStdString(si.fault().sentence);
    const bool allowed = parameter->range == Range::any || (parameter->range == Range::positive && *si > 0) ||
                         (parameter->range == Range::not_negative && *si >= 0) ||
                         (parameter->range == Range::negative && *si < 0) ||
                         (parameter->range == Range::from_0_to_1 && *si >= 0 && *si <= 1);
    if (!allowed)
        return parameter->range == Range::negative
                   ? QObject::tr("%1 must be below zero.").arg(QString::fromStdString(ref))
                   : QObject::tr("%1 must be above zero.").arg(QString::fromStdString(ref));
    put(*part, parameter->name, Value{*si, typed});
    return {};
}

bool step_value(Design& design, const std::string& ref, int steps, bool fine) {
    Part* part = design.find(ref);
    const ParameterInfo* parameter = part ? shown_parameter(*part) : nullptr;
    const ParameterValue* held = parameter ? part->find(parameter->name) : nullptr;
    const Value* value = held ? std::get_if<Value>(held) : nullptr;
    if (!value || value->si == 0 || !std::isfinite(value->si)) return false;
    const double size = std::fabs(value->si);
    double next = 0;
    if (fine) {
        const double scale = std::pow(10.0, 3 - std::floor(std::log10(size)));
        next = std::round(size * std::pow(1.01, steps) * scale) / scale;
    } else {
        next = step_preferred(size, series_for_tolerance(part->tolerance ? part->tolerance->si : 0), steps);
    }
    next = std::copysign(next, value->si);
    put(*part, parameter->name, Value{next, letter_code(next, parameter->unit)});
    return true;
}

} // namespace sinewright::ui
