#include "core/design/atomic_file.hpp"
#include "core/design/file.hpp"
#include <cmath>
#include <nlohmann/json.hpp>

namespace sinewright {

namespace {

using Json = nlohmann::ordered_json;

/// Whole numbers without a decimal point: 25, not 25.0.
Json number(double value) {
    const bool whole = value == std::floor(value) && std::abs(value) < 1e15 && !(value == 0 && std::signbit(value));
    return whole ? Json(static_cast<long long>(value)) : Json(value);
}

Json json_of(const Value& value) { return value.spelling.empty() ? number(value.si) : Json(value.spelling); }
Json json_of(const TerminalRef& ref) { return {{"part", ref.part}, {"terminal", ref.terminal}}; }

/// One line: `{"ref": "R1", "kind": "resistor", …}`.
std::string one_line(const Json& j) {
    if (j.is_object()) {
        std::string text = "{";
        for (const auto& [key, value] : j.items())
            text += (text.size() > 1 ? ", " : "") + Json(key).dump() + ": " + one_line(value);
        return text + "}";
    }
    if (j.is_array()) {
        std::string text = "[";
        for (const Json& item : j) text += (text.size() > 1 ? ", " : "") + one_line(item);
        return text + "]";
    }
    return j.dump(-1, ' ', false, Json::error_handler_t::replace);
}

Json json_of(const Part& part) {
    Json j{{"ref", part.ref}, {"kind", part.kind}};
    for (const Parameter& parameter : part.parameters) {
        if (const auto* word = std::get_if<std::string>(&parameter.value))
            j[parameter.name] = *word;
        else
            j[parameter.name] = json_of(std::get<Value>(parameter.value));
    }
    if (part.tolerance) j["tolerance"] = json_of(*part.tolerance);
    if (part.tempco) j["tempco"] = json_of(*part.tempco);
    if (part.spread)
        j["spread"] = *part.spread == Spread::normal ? "normal" : *part.spread == Spread::edges ? "edges" : "uniform";
    Json terminals = Json::object();
    for (const TerminalNet& joint : part.terminals)
        terminals[joint.terminal] = joint.net ? Json(*joint.net) : Json(nullptr);
    j["terminals"] = terminals;
    if (part.place)
        j["place"] = {{"x", number(part.place->x)},
                      {"y", number(part.place->y)},
                      {"turn", part.place->turn},
                      {"flip", part.place->flip}};
    return j;
}

Json json_of(const Group& group) {
    Json j{{"name", group.name}, {"members", group.members}};
    if (group.tracking) j["tracking"] = json_of(*group.tracking);
    return j;
}

Json json_of(const Dial& dial) {
    Json j{{"name", dial.name},
           {"sets", dial.sets},
           {"from", json_of(dial.from)},
           {"to", json_of(dial.to)},
           {"law", dial.law == DialLaw::log ? "log" : "linear"}};
    if (dial.at) j["at"] = json_of(*dial.at);
    return j;
}

Json json_of(const Label& label) {
    Json j{{"net", label.net}, {"x", number(label.x)}, {"y", number(label.y)}};
    if (label.stub_of) j["stub_of"] = json_of(*label.stub_of);
    return j;
}

Json json_of(const Target& target) {
    Json j = Json::object();
    if (target.nominal) j["nominal"] = json_of(*target.nominal);
    if (target.within) j["within"] = json_of(*target.within);
    if (target.min) j["min"] = json_of(*target.min);
    if (target.max) j["max"] = json_of(*target.max);
    return j;
}

Json json_of(const Conditions& conditions) {
    Json j = Json::object();
    if (conditions.temperature_c)
        j["temperature_c"] = {number((*conditions.temperature_c)[0]), number((*conditions.temperature_c)[1])};
    if (conditions.supply) j["supply"] = json_of(*conditions.supply);
    return j;
}

class Writer {
  public:
    void line(const std::string& key, const std::string& value) {
        text_ += (text_.empty() ? "{\n  " : ",\n  ") + Json(key).dump() + ": " + value;
    }
    void line(const std::string& key, const Json& value) { line(key, one_line(value)); }
    /// A list with one item per line, so that a difference in version control reads well.
    template <class Item> void list(const std::string& key, const std::vector<Item>& items) {
        std::string lines;
        for (const Item& item : items) lines += (lines.empty() ? "\n    " : ",\n    ") + one_line(json_of(item));
        line(key, items.empty() ? "[]" : "[" + lines + "\n  ]");
    }
    std::string finish() { return text_ + "\n}\n"; }

  private:
    std::string text_;
};

} // namespace

std::string design_text(const Design& design) {
    Writer writer;
    writer.line("format", Json("sinewright-design"));
    writer.line("version", Json(1));
    writer.line("title", Json(design.title));
    writer.line("notes", Json(design.notes));
    writer.line("temperature_c", number(design.temperature_c));
    writer.line("output", Json(design.output));
    if (design.cut) writer.line("cut", json_of(*design.cut));
    writer.list("parts", design.parts);
    if (!design.groups.empty()) writer.list("groups", design.groups);
    if (!design.dials.empty()) writer.list("dials", design.dials);
    Json targets = Json::object();
    for (const Target& target : design.targets) targets[target.name] = json_of(target);
    writer.line("targets", targets);
    if (design.conditions) writer.line("conditions", json_of(*design.conditions));
    if (!design.labels.empty()) writer.list("labels", design.labels);
    writer.line("baseline",
                design.baseline.empty() ? std::string("null") : one_line(Json::parse(design.baseline, nullptr, false)));
    for (const auto& [key, value] : design.unknown) writer.line(key, one_line(Json::parse(value, nullptr, false)));
    return writer.finish();
}

Result<std::monostate> write_design(const Design& design, const std::filesystem::path& path) {
    return write_atomically(path, design_text(design));
}

} // namespace sinewright
