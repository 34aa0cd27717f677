#include "core/design/file.hpp"
#include "core/design/utf8.hpp"
#include "core/design/words.hpp"
#include "core/quantity/quantity.hpp"
#include <algorithm>
#include <cerrno>
#include <cstring>
#include <fstream>
#include <nlohmann/json.hpp>
#include <set>

namespace sinewright {

namespace {

using Json = nlohmann::ordered_json;

/// Deeper than any design goes; keeps a hostile file from exhausting the stack when it is written back.
constexpr int deepest_nesting = 64;

std::string type_of(const Json& j) {
    return j.is_null()      ? "null"
           : j.is_object()  ? "an object"
           : j.is_array()   ? "a list"
           : j.is_string()  ? "text"
           : j.is_boolean() ? "true or false"
                            : "a number";
}

/// Watches the parser for what JSON allows and a design does not: doubled keys and bottomless nesting.
class Watch {
  public:
    bool operator()(int depth, Json::parse_event_t event, const Json& parsed) {
        if (depth > deepest_nesting) too_deep = true;
        if (event == Json::parse_event_t::object_start) keys_.emplace_back();
        if (event == Json::parse_event_t::object_end && !keys_.empty()) keys_.pop_back();
        if (event == Json::parse_event_t::key && !keys_.empty() && parsed.is_string()) {
            const auto key = parsed.get<std::string>();
            if (!keys_.back().insert(key).second) doubled.push_back(key);
        }
        return !too_deep;
    }
    bool too_deep = false;
    std::vector<std::string> doubled;

  private:
    std::vector<std::set<std::string>> keys_;
};

class Reader {
  public:
    explicit Reader(std::string_view file) : file_(file) {}

    Design read(const Json& top) {
        header(top);
        if (!faults.empty()) return {};
        // Parts first, wherever they stand: they decide the units in which dials are written.
        if (top.contains("parts")) top_level("parts", top["parts"]);
        for (const auto& [key, value] : top.items())
            if (key != "parts") top_level(key, value);
        return std::move(design_);
    }
    Faults faults;

  private:
    void add(FaultKind kind, const std::string& where, const std::string& sentence, const std::string& remedy = "") {
        faults.push_back({kind, where, sentence, remedy});
    }
    bool wants(const Json& j, bool is_right, const std::string& where, const std::string& wanted) {
        if (!is_right)
            add(FaultKind::malformed_file, where, where + " must be " + wanted + "; it is " + type_of(j) + ".");
        return is_right;
    }
    bool object(const Json& j, const std::string& where) { return wants(j, j.is_object(), where, "an object"); }
    bool list(const Json& j, const std::string& where) { return wants(j, j.is_array(), where, "a list"); }

    std::string text(const Json& j, const std::string& where) {
        return wants(j, j.is_string(), where, "text") ? j.get<std::string>() : std::string();
    }

    /// A number, or text with letter code, prefix and unit.
    std::optional<Value> value(const Json& j, const std::string& where, std::string_view unit) {
        if (j.is_number()) return Value{j.get<double>(), ""};
        if (!wants(j, j.is_string(), where, "a number or text such as \"4k7\"")) return std::nullopt;
        const auto spelling = j.get<std::string>();
        const auto parsed = parse_quantity(spelling, unit);
        if (!parsed) {
            Fault fault = parsed.fault();
            fault.where = where;
            fault.sentence = where + ": " + fault.sentence;
            faults.push_back(std::move(fault));
            return std::nullopt;
        }
        return Value{*parsed, spelling};
    }
    double number(const Json& j, const std::string& where, std::string_view unit, double otherwise) {
        const auto v = value(j, where, unit);
        return v ? v->si : otherwise;
    }
    void unknown_key(const std::string& where, const std::string& key, const std::string& right) {
        add(FaultKind::unknown_key, where + "." + key, where + ": unknown key `" + key + "`.",
            "Keys are " + right + ".");
    }

    void header(const Json& top) {
        if (!top.is_object())
            return add(FaultKind::malformed_file, file_,
                       file_ + " holds " + type_of(top) + " where a design object is wanted.");
        if (!top.contains("format") || top["format"] != "sinewright-design")
            return add(FaultKind::malformed_file, file_,
                       file_ + " is no Sinewright design: `format` must be \"sinewright-design\".");
        if (!top.contains("version") || !top["version"].is_number_integer() || top["version"].get<long long>() < 1)
            return add(FaultKind::malformed_file, "version", file_ + ": `version` must be a whole number from 1.");
        if (top["version"].get<long long>() > 1)
            add(FaultKind::newer_version, "version",
                "File is from a newer version (" + std::to_string(top["version"].get<long long>()) +
                    "); this program reads up to 1.",
                "Open it with a newer program.");
    }

    void top_level(const std::string& key, const Json& j) {
        if (key == "format" || key == "version") return;
        if (key == "title")
            design_.title = text(j, key);
        else if (key == "notes")
            design_.notes = text(j, key);
        else if (key == "temperature_c")
            design_.temperature_c = number(j, key, "°C", 25);
        else if (key == "output")
            design_.output = text(j, key);
        else if (key == "cut")
            cut(j);
        else if (key == "parts")
            each(j, key, [&](const Json& item, const std::string& where) { part(item, where); });
        else if (key == "groups")
            each(j, key, [&](const Json& item, const std::string& where) { group(item, where); });
        else if (key == "dials")
            each(j, key, [&](const Json& item, const std::string& where) { dial(item, where); });
        else if (key == "targets")
            targets(j);
        else if (key == "conditions")
            conditions(j);
        else if (key == "labels")
            each(j, key, [&](const Json& item, const std::string& where) { label(item, where); });
        else if (key == "baseline")
            design_.baseline = j.is_null() ? "" : j.dump();
        else
            design_.unknown.emplace_back(key, j.dump());
    }

    template <class Item> void each(const Json& j, const std::string& key, Item item) {
        if (!list(j, key)) return;
        if (key == "parts" && j.size() > max_parts)
            return add(FaultKind::limit_exceeded, "parts",
                       "The file has " + std::to_string(j.size()) + " parts; at most " + std::to_string(max_parts) +
                           " are allowed.",
                       "Split the design.");
        for (std::size_t k = 0; k < j.size(); ++k) {
            const std::string where = key + "[" + std::to_string(k + 1) + "]";
            if (object(j[k], where)) item(j[k], where);
        }
    }

    std::optional<TerminalRef> terminal_ref(const Json& j, const std::string& where) {
        if (!object(j, where)) return std::nullopt;
        TerminalRef ref;
        for (const auto& [key, v] : j.items()) {
            if (key == "part")
                ref.part = text(v, where + ".part");
            else if (key == "terminal")
                ref.terminal = text(v, where + ".terminal");
            else
                unknown_key(where, key, "part and terminal");
        }
        if (!j.contains("part") || !j.contains("terminal"))
            add(FaultKind::missing_value, where, where + " needs `part` and `terminal`.");
        return ref;
    }

    void cut(const Json& j) {
        if (!j.is_null()) design_.cut = terminal_ref(j, "cut");
    }

    void part(const Json& j, const std::string& position) {
        Part part;
        if (!j.contains("ref"))
            return add(FaultKind::missing_value, position, position + " has no `ref`.", "Name the part: R1.");
        part.ref = text(j["ref"], position + ".ref");
        const std::string where = part.ref.empty() ? position : part.ref;
        if (!j.contains("kind"))
            return add(FaultKind::missing_value, where, where + " has no `kind`.", "Say what it is: \"resistor\".");
        part.kind = text(j["kind"], where + ".kind");
        const PartKind* kind = find_part_kind(part.kind);
        if (!kind) return faults.push_back(unknown_kind(where, part.kind));
        for (const TerminalInfo& info : kind->terminals)
            part.terminals.push_back({std::string(info.name), std::nullopt});
        if (!j.contains("terminals"))
            add(FaultKind::missing_value, where, where + " has no `terminals`.", "List its terminals and their nets.");
        for (const auto& [key, v] : j.items()) part_key(part, *kind, where, key, v);
        const auto order = [&](const Parameter& p) { return kind->parameter(p.name); };
        std::stable_sort(part.parameters.begin(), part.parameters.end(),
                         [&](const auto& a, const auto& b) { return order(a) < order(b); });
        design_.parts.push_back(std::move(part));
    }

    void part_key(Part& part, const PartKind& kind, const std::string& where, const std::string& key, const Json& v) {
        if (key == "ref" || key == "kind") return;
        if (key == "terminals") return terminals(part, kind, where, v);
        if (key == "place") return place(part, where, v);
        if (key == "tolerance")
            part.tolerance = value(v, where + ".tolerance", "");
        else if (key == "tempco")
            part.tempco = value(v, where + ".tempco", "1/K");
        else if (key == "spread")
            spread(part, where, v);
        else if (const int k = kind.parameter(key); k < 0)
            faults.push_back(unknown_parameter(where, kind, key));
        else if (!kind.parameters[k].choices.empty() && v.is_string())
            part.parameters.push_back({key, v.get<std::string>()});
        else if (auto number = value(v, where + "." + key, kind.parameters[k].unit))
            part.parameters.push_back({key, *number});
    }

    void spread(Part& part, const std::string& where, const Json& v) {
        const std::string word = text(v, where + ".spread");
        if (word == "uniform")
            part.spread = Spread::uniform;
        else if (word == "normal")
            part.spread = Spread::normal;
        else if (word == "edges")
            part.spread = Spread::edges;
        else if (v.is_string())
            add(FaultKind::unknown_key, where + ".spread", where + ": spread can't be `" + word + "`.",
                "It is uniform, normal or edges.");
    }

    void terminals(Part& part, const PartKind& kind, const std::string& where, const Json& j) {
        if (!object(j, where + ".terminals")) return;
        for (const auto& [key, v] : j.items()) {
            const int k = kind.terminal(key);
            if (k < 0) {
                std::vector<std::string> names;
                for (const TerminalInfo& info : kind.terminals) names.emplace_back(info.name);
                add(FaultKind::unknown_key, where + "." + key,
                    where + ": " + with_article(kind.title) + " has no terminal `" + key + "`.",
                    "Its terminals are " + quoted_list(names) + ".");
            } else if (v.is_string()) {
                part.terminals[k].net = v.get<std::string>();
            } else {
                wants(v, v.is_null(), where + "." + key, "a net name or null");
            }
        }
    }

    void place(Part& part, const std::string& where, const Json& j) {
        if (!object(j, where + ".place")) return;
        Place place;
        for (const auto& [key, v] : j.items()) {
            if (key == "x")
                place.x = number(v, where + ".place.x", "", 0);
            else if (key == "y")
                place.y = number(v, where + ".place.y", "", 0);
            else if (key == "turn" && wants(v, v.is_number_integer(), where + ".place.turn", "0, 90, 180 or 270"))
                place.turn = turn(v, where);
            else if (key == "flip" && wants(v, v.is_boolean(), where + ".place.flip", "true or false"))
                place.flip = v.get<bool>();
            else if (key != "turn" && key != "flip")
                unknown_key(where + ".place", key, "x, y, turn and flip");
        }
        part.place = place;
    }

    int turn(const Json& v, const std::string& where) {
        const auto degrees = v.get<long long>();
        if (degrees % 90 == 0) return static_cast<int>(((degrees % 360) + 360) % 360);
        add(FaultKind::value_out_of_range, where + ".place.turn", where + ": place.turn must be 0, 90, 180 or 270.");
        return 0;
    }

    void names(const Json& j, const std::string& where, std::vector<std::string>& into) {
        if (!list(j, where)) return;
        for (const Json& item : j) into.push_back(text(item, where));
    }

    void group(const Json& j, const std::string& position) {
        Group group;
        for (const auto& [key, v] : j.items()) {
            if (key == "name")
                group.name = text(v, position + ".name");
            else if (key == "members")
                names(v, position + ".members", group.members);
            else if (key == "tracking")
                group.tracking = value(v, position + ".tracking", "");
            else
                unknown_key(position, key, "name, members and tracking");
        }
        design_.groups.push_back(std::move(group));
    }

    /// Unit of the first parameter a dial sets, once parts are known; decides what "4k7" means.
    std::string_view dial_unit(const Json& j) {
        if (!j.contains("sets") || !j["sets"].is_array() || j["sets"].empty() || !j["sets"][0].is_string()) return "";
        const auto set = j["sets"][0].get<std::string>();
        const std::size_t dot = set.find('.');
        if (dot == std::string::npos) return "";
        const Part* part = design_.find(set.substr(0, dot));
        const PartKind* kind = part ? find_part_kind(part->kind) : nullptr;
        const int k = kind ? kind->parameter(set.substr(dot + 1)) : -1;
        return k < 0 ? "" : kind->parameters[k].unit;
    }

    void dial(const Json& j, const std::string& position) {
        Dial dial;
        const std::string_view unit = dial_unit(j);
        for (const auto& [key, v] : j.items()) {
            if (key == "name")
                dial.name = text(v, position + ".name");
            else if (key == "sets")
                names(v, position + ".sets", dial.sets);
            else if (key == "from")
                dial.from = value(v, position + ".from", unit).value_or(Value{});
            else if (key == "to")
                dial.to = value(v, position + ".to", unit).value_or(Value{});
            else if (key == "at")
                dial.at = value(v, position + ".at", unit);
            else if (key == "law")
                dial_law(dial, v, position);
            else
                unknown_key(position, key, "name, sets, from, to, law and at");
        }
        for (const char* needed : {"name", "sets", "from", "to"})
            if (!j.contains(needed)) add(FaultKind::missing_value, position, position + " has no `" + needed + "`.");
        design_.dials.push_back(std::move(dial));
    }

    void dial_law(Dial& dial, const Json& v, const std::string& position) {
        const std::string law = text(v, position + ".law");
        if (law == "log")
            dial.law = DialLaw::log;
        else if (v.is_string() && law != "linear")
            add(FaultKind::unknown_key, position + ".law", position + ": law can't be `" + law + "`.",
                "It is linear or log.");
    }

    void targets(const Json& j) {
        if (!object(j, "targets")) return;
        for (const auto& [name, limits] : j.items()) {
            const std::string where = "targets." + name;
            Target target{name, {}, {}, {}, {}};
            std::string_view unit;
            for (const TargetName& known : target_names())
                if (known.name == name) unit = known.unit;
            if (!object(limits, where)) continue;
            for (const auto& [key, v] : limits.items()) {
                if (key == "nominal")
                    target.nominal = value(v, where + ".nominal", unit);
                else if (key == "within")
                    target.within = value(v, where + ".within", "");
                else if (key == "min")
                    target.min = value(v, where + ".min", unit);
                else if (key == "max")
                    target.max = value(v, where + ".max", unit);
                else
                    unknown_key(where, key, "nominal with within, or min and max");
            }
            design_.targets.push_back(std::move(target));
        }
    }

    void conditions(const Json& j) {
        if (j.is_null() || !object(j, "conditions")) return;
        Conditions conditions;
        for (const auto& [key, v] : j.items()) {
            if (key == "temperature_c") {
                if (wants(v, v.is_array() && v.size() == 2, "conditions.temperature_c", "a list of two temperatures"))
                    conditions.temperature_c = std::array{number(v[0], "conditions.temperature_c", "°C", 25),
                                                          number(v[1], "conditions.temperature_c", "°C", 25)};
            } else if (key == "supply") {
                conditions.supply = value(v, "conditions.supply", "");
            } else {
                unknown_key("conditions", key, "temperature_c and supply");
            }
        }
        design_.conditions = conditions;
    }

    void label(const Json& j, const std::string& position) {
        Label label;
        for (const auto& [key, v] : j.items()) {
            if (key == "net")
                label.net = text(v, position + ".net");
            else if (key == "x")
                label.x = number(v, position + ".x", "", 0);
            else if (key == "y")
                label.y = number(v, position + ".y", "", 0);
            else if (key == "stub_of")
                label.stub_of = terminal_ref(v, position + ".stub_of");
            else
                unknown_key(position, key, "net, x, y and stub_of");
        }
        design_.labels.push_back(std::move(label));
    }

    std::string file_;
    Design design_;
};

std::string plain_reason(std::string what) {
    // "[json.exception.parse_error.101] parse error at line 1, column 2: …": the library's tag says nothing to a user.
    if (const auto end = what.find("] "); what.starts_with("[") && end != std::string::npos) what.erase(0, end + 2);
    for (char& c : what)
        if (static_cast<unsigned char>(c) >= 0x80) c = '?'; // the library cuts the text it quotes inside characters
    return printable(what).substr(0, 200);
}

} // namespace

Result<ReadDesign> parse_design(std::string_view json_text, std::string_view name) {
    const std::string file(name);
    if (json_text.size() > max_file_bytes)
        return Fault{FaultKind::limit_exceeded, file, file + " is larger than 8 MiB.", "Split the design."};
    if (json_text.starts_with("\xff\xfe") || json_text.starts_with("\xfe\xff") ||
        json_text.substr(0, 4).find('\0') != std::string_view::npos)
        return Fault{FaultKind::malformed_file, file, file + " is not UTF-8 text: it looks like UTF-16.",
                     "Save it as UTF-8."};
    if (json_text.starts_with("\xef\xbb\xbf")) json_text.remove_prefix(3);
    if (const auto line = line_not_utf8(json_text))
        return Fault{FaultKind::malformed_file, file + ", line " + std::to_string(*line),
                     file + " is not UTF-8 text: line " + std::to_string(*line) + " holds other bytes.",
                     "Save it as UTF-8."};
    Watch watch;
    Json top;
    try {
        top = Json::parse(json_text, std::ref(watch));
    } catch (const Json::exception& error) {
        const bool range = dynamic_cast<const Json::out_of_range*>(&error) != nullptr;
        return Fault{range ? FaultKind::bad_quantity : FaultKind::malformed_file, file,
                     file + (range ? " holds a number out of range: " : " is not readable as JSON: ") +
                         plain_reason(error.what()) + ".",
                     "Mend it there, or take an earlier copy."};
    }
    if (watch.too_deep) return Fault{FaultKind::malformed_file, file, file + " is nested deeper than any design.", ""};
    Reader reader(name);
    for (const std::string& key : watch.doubled)
        reader.faults.push_back({FaultKind::duplicate_name, key,
                                 file + ": the key `" + key.substr(0, 60) + "` stands twice in one object.",
                                 "Remove one of them."});
    if (!reader.faults.empty()) return reader.faults;
    ReadDesign result{reader.read(top), {}};
    Faults faults = std::move(reader.faults);
    // Structure that could not be read would only raise the same complaint again.
    if (faults.empty()) faults = validate(result.design);
    if (!faults.empty()) return faults;
    return result;
}

Result<ReadDesign> read_design(const std::filesystem::path& path) {
    const std::string name = path.filename().string();
    std::error_code error;
    const auto status = std::filesystem::status(path, error);
    const auto refuse = [&](const std::string& why, const std::string& remedy) {
        return Fault{FaultKind::unreadable_file, path.string(), path.string() + " " + why + ".", remedy};
    };
    if (!std::filesystem::exists(status)) return refuse("does not exist", "Check the name.");
    if (std::filesystem::is_directory(status)) return refuse("is a folder, not a design file", "Name a file in it.");
    if (!std::filesystem::is_regular_file(status)) return refuse("is no ordinary file", "Name a design file.");
    if (const auto size = std::filesystem::file_size(path, error); !error && size > max_file_bytes)
        return refuse("is larger than 8 MiB", "Split the design.");
    errno = 0;
    std::ifstream stream(path, std::ios::binary);
    if (!stream) return refuse(std::string("can't be read: ") + std::strerror(errno), "Check its permissions.");
    std::string text{std::istreambuf_iterator<char>(stream), {}};
    if (stream.bad()) return refuse("could not be read to its end", "Check the disk.");
    return parse_design(text, name);
}

} // namespace sinewright
