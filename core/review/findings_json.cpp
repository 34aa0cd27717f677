/// `check --json` and `curves --json`.
#include "core/parts/part_kind.hpp"
#include "core/review/describe.hpp"
#include "core/review/findings.hpp"
#include <cmath>
#include <nlohmann/json.hpp>
#include <numbers>

namespace sinewright {

namespace {

using Json = nlohmann::ordered_json;

/// JSON knows finite numbers only.
Json number(double value) { return std::isfinite(value) ? Json(value) : Json(nullptr); }

template <class T> void optional(Json& j, const char* key, const std::optional<T>& value, const std::string& reason) {
    if (value) {
        j[key] = *value;
        return;
    }
    j[key] = nullptr;
    j[std::string(key) + "_reason"] = reason.empty() ? "It is not known." : reason;
}

Json json_of(const Faults& faults) {
    Json list = Json::array();
    for (const Fault& fault : faults) {
        Json j{{"where", fault.where}, {"sentence", fault.sentence}};
        if (!fault.remedy.empty()) j["remedy"] = fault.remedy;
        list.push_back(j);
    }
    return list;
}

Json json_of(const Cut& cut) { return {{"part", cut.part}, {"terminal", cut.terminal}}; }

Json net_voltages(const std::vector<std::string>& nets, const Vector& x) {
    Json j = Json::object();
    for (std::size_t k = 0; k < nets.size(); ++k) j[nets[k]] = number(x[static_cast<int>(k)]);
    return j;
}

Json json_of(const OperatingPoint& rest, const std::vector<std::string>& nets) {
    Json j{{"nets", net_voltages(nets, rest.x)}, {"method", rest.method}, {"iterations", rest.iterations}};
    if (!rest.others.empty()) {
        j["other_states"] = Json::array();
        for (const Vector& x : rest.others) j["other_states"].push_back({{"nets", net_voltages(nets, x)}});
    }
    return j;
}

Json json_of(const SmallSignal& small) {
    Json j{{"outcome", small.outcome == Outcome::starts    ? "starts"
                       : small.outcome == Outcome::latches ? "latches"
                                                           : "decays"}};
    optional(j, "frequency_hz", small.frequency_hz, small.frequency_reason);
    optional(j, "growth_per_s", small.growth_per_s, small.frequency_reason);
    optional(j, "growth_per_cycle", small.growth_per_cycle, small.frequency_reason);
    j["right_half_plane"] = small.right_half_plane;
    j["natural_frequencies"] = Json::array();
    for (const Complex s : small.natural_frequencies)
        j["natural_frequencies"].push_back({{"re", number(s.real())}, {"im", number(s.imag())}});
    return j;
}

Json json_of(const LoopFinding& loop) {
    Json j{{"cut", json_of(loop.cut)}, {"cut_chosen", loop.cut_chosen}, {"cut_reason", loop.cut_reason}};
    std::optional<Json> point;
    if (loop.barkhausen)
        point = Json{{"frequency_hz", loop.barkhausen->frequency_hz},
                     {"gain", loop.barkhausen->gain},
                     {"startup_margin_db", loop.barkhausen->startup_margin_db},
                     {"phase", loop.barkhausen->falls ? "falls" : "rises"}};
    optional(j, "barkhausen", point, loop.barkhausen_reason);
    j["crossings"] = Json::array();
    for (const Crossing& c : loop.crossings)
        j["crossings"].push_back(
            {{"frequency_hz", c.frequency_hz}, {"gain", c.gain}, {"phase", c.falls ? "falls" : "rises"}});
    optional(j, "encirclements", loop.encirclements, loop.encirclement_note);
    optional(j, "opened_right_half_plane", loop.opened_right_half_plane, loop.encirclement_note);
    if (!loop.encirclement_note.empty()) j["encirclement_note"] = loop.encirclement_note;
    if (!loop.sweep_note.empty()) j["sweep_note"] = loop.sweep_note;
    return j;
}

/// A stage not reached is absent; one that failed is null with its reason.
template <class T, class ToJson> void section(Json& j, const char* key, const Stage<T>& stage, ToJson to_json) {
    if (stage) {
        j[key] = to_json(*stage);
    } else if (!stage.faults.empty()) {
        j[key] = nullptr;
        const Fault& fault = stage.faults.front();
        j[std::string(key) + "_reason"] = fault.sentence + (fault.remedy.empty() ? "" : " " + fault.remedy);
    }
}

Json json_of(const TargetFinding& target) {
    Json j{{"name", target.name}};
    optional(j, "value", target.value, target.reason);
    if (target.min) j["min"] = *target.min;
    if (target.max) j["max"] = *target.max;
    j["met"] = target.met ? Json(*target.met) : Json(nullptr);
    return j;
}

} // namespace

std::string findings_json(const Findings& findings, const Design& design) {
    Json j{{"format", "sinewright-findings"}, {"version", 1}, {"title", design.title}};
    if (!findings.faults.empty()) j["faults"] = json_of(findings.faults);
    section(j, "operating_point", findings.operating_point,
            [&](const OperatingPoint& rest) { return json_of(rest, findings.nets); });
    section(j, "small_signal", findings.small_signal, [](const SmallSignal& small) { return json_of(small); });
    section(j, "loop", findings.loop, [](const LoopFinding& loop) { return json_of(loop); });
    j["targets"] = Json::array();
    for (const TargetFinding& target : findings.targets) j["targets"].push_back(json_of(target));
    j["verdict"] = findings.verdict == Verdict::meets    ? "meets"
                   : findings.verdict == Verdict::misses ? "misses"
                                                         : "unknown";
    j["headline"] = findings.headline;
    j["main_reason"] = findings.main_reason;
    return j.dump(1, ' ', false, Json::error_handler_t::replace) + "\n";
}

std::string curves_json(const LoopCurve& curve, const Cut& cut) {
    Json j{{"format", "sinewright-curves"}, {"version", 1}, {"cut", json_of(cut)}};
    Json f = Json::array(), re = Json::array(), im = Json::array(), db = Json::array(), phase = Json::array();
    for (std::size_t k = 0; k < curve.gain.size(); ++k) {
        const Complex l = curve.gain[k];
        f.push_back(curve.frequency_hz[k]);
        re.push_back(number(l.real())), im.push_back(number(l.imag()));
        db.push_back(number(20 * std::log10(std::abs(l))));
        phase.push_back(number(std::arg(l) * 180 / std::numbers::pi));
    }
    j["frequency_hz"] = f, j["re"] = re, j["im"] = im, j["gain_db"] = db, j["phase_deg"] = phase;
    return j.dump() + "\n";
}

std::string kinds_json() {
    Json kinds = Json::array();
    for (const PartKind* kind : part_kinds()) {
        Json j{
            {"kind", kind->name}, {"title", kind->title}, {"terminals", Json::array()}, {"parameters", Json::array()}};
        for (const TerminalInfo& t : kind->terminals)
            j["terminals"].push_back({{"name", t.name}, {"meaning", t.meaning}});
        for (const ParameterInfo& p : kind->parameters) {
            Json q{{"name", p.name}, {"unit", p.unit}, {"required", p.required}};
            if (!p.choices.empty())
                q["choices"] = p.choices, q["default"] = p.choices.front();
            else
                q["default"] = number(p.fallback);
            q["help"] = p.help;
            j["parameters"].push_back(q);
        }
        j["tolerance_of"] = kind->main >= 0 ? Json(kind->parameters[kind->main].name) : Json(nullptr);
        kinds.push_back(j);
    }
    return Json{{"format", "sinewright-kinds"}, {"version", 1}, {"kinds", kinds}}.dump(1) + "\n";
}

} // namespace sinewright
