#pragma once
/// The design document: what the user drew and asked for. Plain values; every analysis starts from here.
#include "core/result.hpp"
#include <array>
#include <optional>
#include <string>
#include <string_view>
#include <utility>
#include <variant>
#include <vector>

namespace sinewright {

inline constexpr std::string_view ground_net = "gnd";
inline constexpr std::size_t max_parts = 2000;
inline constexpr std::size_t max_file_bytes = 8u << 20;

/// A physical value and how it was written; the spelling is kept so that a saved file reads as it was typed.
struct Value {
    double si = 0;        ///< in SI base units
    std::string spelling; ///< "4k7"; empty: the file holds the bare number
    bool operator==(const Value&) const = default;
};

/// A parameter is a number or one of a few words (`model`, `law`).
using ParameterValue = std::variant<Value, std::string>;
struct Parameter {
    std::string name;
    ParameterValue value;
    bool operator==(const Parameter&) const = default;
};

struct TerminalNet {
    std::string terminal;
    std::optional<std::string> net; ///< nothing: unconnected
    bool operator==(const TerminalNet&) const = default;
};

/// Where a part lies on the sheet; never changes a result.
struct Place {
    double x = 0, y = 0; ///< sheet units (20 to a grid step), of the part's centre
    int turn = 0;        ///< degrees clockwise: 0, 90, 180, 270
    bool flip = false;   ///< mirrored left to right before turning
    bool operator==(const Place&) const = default;
};

enum class Spread { uniform, normal, edges };

struct Part {
    std::string ref;                    ///< "R3"; unique in the design
    std::string kind;                   ///< name of a part kind: "resistor"
    std::vector<Parameter> parameters;  ///< only those given; order of the part kind's description
    std::vector<TerminalNet> terminals; ///< all terminals of the kind, in its order
    std::optional<Value> tolerance;     ///< of the main value, as a ratio (0.01)
    std::optional<Value> tempco;        ///< 1/K
    std::optional<Spread> spread;
    std::optional<Place> place;

    const ParameterValue* find(std::string_view parameter) const;
    /// The net at a terminal; nothing when unconnected or no such terminal.
    std::optional<std::string> net_at(std::string_view terminal) const;
    bool operator==(const Part&) const = default;
};

struct TerminalRef {
    std::string part, terminal;
    bool operator==(const TerminalRef&) const = default;
};
using Cut = TerminalRef;

struct Group {
    std::string name;
    std::vector<std::string> members;
    std::optional<Value> tracking;
    bool operator==(const Group&) const = default;
};

enum class DialLaw { linear, log };
struct Dial {
    std::string name;
    std::vector<std::string> sets; ///< "R1.resistance"
    Value from, to;
    DialLaw law = DialLaw::linear;
    std::optional<Value> at;
    bool operator==(const Dial&) const = default;
};

/// A wanted range of one result: {nominal, within} or {min and/or max}.
struct Target {
    std::string name; ///< "startup_margin_db", "frequency_hz", "thd_db", …
    std::optional<Value> nominal, within, min, max;
    bool operator==(const Target&) const = default;
};

/// A net's name set down on the sheet. With `stub_of` that terminal is joined by name, not by a drawn join.
struct Label {
    std::string net;
    double x = 0, y = 0;
    std::optional<TerminalRef> stub_of;
    bool operator==(const Label&) const = default;
};

/// Conditions varied in builds.
struct Conditions {
    std::optional<std::array<double, 2>> temperature_c;
    std::optional<Value> supply;
    bool operator==(const Conditions&) const = default;
};

struct Design {
    std::string title;
    std::string notes;
    double temperature_c = 25;
    std::string output;
    std::optional<Cut> cut;
    std::vector<Part> parts;
    std::vector<Group> groups;
    std::vector<Dial> dials;
    std::vector<Target> targets;
    std::optional<Conditions> conditions;
    std::vector<Label> labels;
    std::string baseline;                                     ///< JSON text, empty: null
    std::vector<std::pair<std::string, std::string>> unknown; ///< top-level keys kept as JSON text, in file order

    const Part* find(std::string_view ref) const;
    Part* find(std::string_view ref);
    bool operator==(const Design&) const = default;
};

/// All net names in order of first mention, gnd included when mentioned.
std::vector<std::string> nets_of(const Design& design);

} // namespace sinewright
