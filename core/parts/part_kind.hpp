#pragma once
/// What a part kind is: its terminals, its parameters and the equations it contributes. One file a kind.
#include "core/parts/law.hpp"
#include <limits>
#include <span>
#include <string>
#include <string_view>
#include <vector>

namespace sinewright {

struct TerminalInfo {
    std::string_view name;    ///< contract name: "plus"
    std::string_view meaning; ///< for help and messages: "non-inverting input"
};

enum class Range { any, positive, not_negative, negative, from_0_to_1 };

struct ParameterInfo {
    std::string_view name;                                      ///< contract name and JSON key
    std::string_view unit;                                      ///< SI unit, "" for a pure number
    double fallback = std::numeric_limits<double>::quiet_NaN(); ///< NaN: no default
    bool required = false;                                      ///< must be given (the main value, mostly)
    Range range = Range::any;
    std::string_view help;                      ///< one plain sentence
    std::vector<std::string_view> choices = {}; ///< non-empty: a word, not a number; the first is the default
};

/// Parameter values of one part, resolved: defaults filled in, temperature coefficient applied to the main value.
/// Index = position in PartKind::parameters. A value neither given nor defaulted is NaN: ask has().
struct PartValues {
    std::vector<double> numbers; ///< per parameter; NaN when absent or a word
    std::vector<int> words;      ///< per parameter; index into choices, −1 for numbers
    std::vector<bool> given;     ///< per parameter: stands in the design, not a default
    double temperature_k = 298.15;

    double operator[](int parameter) const { return numbers[parameter]; }
    bool has(int parameter) const { return numbers[parameter] == numbers[parameter]; }
    int word(int parameter) const { return words[parameter]; }
};

/// One term of a linear combination of unknowns. index −1 is gnd and is dropped.
struct Weighted {
    int index;
    double weight;
    bool operator==(const Weighted&) const = default;
};
using Combination = std::vector<Weighted>;

/// How a part ties two nets together at DC, for finding faults before any number is solved.
enum class Tie {
    conducts,       ///< current flows and depends on the voltage: resistor, diode, channel
    forces_voltage, ///< ideal source or short at DC: supply, ideal output, inductor without resistance
    stores          ///< capacitor: nothing at DC
};

/// What a part writes its equations into. The circuit is d/dt q(x) + f(x) = 0 with
/// f(x) = G x + B i(Aᵀx) − s and q(x) = C x + B Q(Aᵀx) (modified nodal analysis: Ho, Ruehli, Brennan 1975).
/// Rows: one current balance (sum of currents leaving, A) per net but gnd, one equation per further unknown.
/// Index −1 is gnd everywhere: writes to it are dropped.
class PartStamp {
  public:
    virtual ~PartStamp() = default;
    /// Unknown index of the net at terminal number `terminal` of this part (order of PartKind::terminals).
    virtual int net(int terminal) const = 0;
    /// A further node inside the part, in volts ("D1 junction").
    virtual int internal_voltage(std::string_view name) = 0;
    /// A branch current, in amperes, with its own equation row.
    virtual int branch_current(std::string_view name) = 0;
    /// A state with its own equation row. `typical` is its usual size, `start` its value at power-up / first guess.
    virtual int state(std::string_view name, std::string_view unit, double typical, double start) = 0;

    virtual void g(int row, int column, double value) = 0;
    virtual void c(int row, int column, double value) = 0;
    virtual void source(int row, double value) = 0; ///< adds to s
    /// Output o of the law adds weight·i_o (and d/dt weight·q_o) to each row in injections[o].
    virtual void nonlinear(LawPtr law, std::vector<Combination> controls, std::vector<Combination> injections) = 0;
    virtual void tie(Tie how, int a, int b) = 0;

    // Shorthands; each also records its tie.
    void conductance(int a, int b, double siemens) {
        g(a, a, siemens), g(b, b, siemens), g(a, b, -siemens), g(b, a, -siemens);
        tie(Tie::conducts, a, b);
    }
    void capacitance(int a, int b, double farad) {
        c(a, a, farad), c(b, b, farad), c(a, b, -farad), c(b, a, -farad);
        tie(Tie::stores, a, b);
    }
    /// Branch current j flows a → b through the part.
    void branch(int j, int a, int b) { g(a, j, 1), g(b, j, -1); }
    /// An ideal source from `out` to gnd. Returns its branch current; row j starts as v_out − … = 0.
    int ideal_output(int out) {
        const int j = branch_current("output current");
        branch(j, out, -1);
        g(j, out, 1);
        tie(Tie::forces_voltage, out, -1);
        return j;
    }
};

struct PartKind {
    std::string_view name;       ///< contract name and JSON value
    std::string_view title;      ///< "resistor": for people
    std::string_view ref_prefix; ///< "R"
    std::vector<TerminalInfo> terminals;
    std::vector<ParameterInfo> parameters;
    int main = 0; ///< parameter that tolerance and tempco belong to; −1: none
    bool tempco_applies = true;
    /// Words for words: what is wrong with a combination of values (empty: nothing). May be null.
    std::string (*check)(const PartValues&) = nullptr;
    void (*stamp)(const PartValues&, PartStamp&) = nullptr;

    int parameter(std::string_view parameter_name) const; ///< −1: none
    int terminal(std::string_view terminal_name) const;   ///< −1: none
};

/// All part kinds, in the order of the shelf.
std::span<const PartKind* const> part_kinds();
/// Null when no kind has that name.
const PartKind* find_part_kind(std::string_view name);

} // namespace sinewright
