#pragma once
/// One part alone, with every terminal on a net of its own: its equations f and q at any values of its unknowns.
#include "core/design/design.hpp"
#include "core/parts/part_kind.hpp"
#include <map>
#include <string>
#include <variant>
#include <vector>

namespace sinewright::testing {

/// One given parameter: a number or a word.
struct Setting {
    std::string name;
    std::variant<double, std::string> value;
};
using Settings = std::vector<Setting>;

/// A part as a design would hold it.
Part part_with(std::string_view kind, const Settings& settings);

struct RecordedUnknown {
    std::string name; ///< terminal name for nets, otherwise the name the part gave it
    char type;        ///< 'n' net, 'v' internal voltage, 'i' branch current, 's' state
    double typical, start;
};

struct RecordedElement {
    LawPtr law;
    std::vector<Combination> controls, injections;

    /// Control values at x.
    std::vector<double> at(const std::vector<double>& x) const;
};

struct RecordedTie {
    Tie how;
    int a, b;
    bool operator==(const RecordedTie&) const = default;
};

/// Row-major n×n.
struct Square {
    int n = 0;
    std::vector<double> entries;
    explicit Square(int size) : n(size), entries(size * size) {}
    double& operator()(int row, int column) { return entries[row * n + column]; }
    double operator()(int row, int column) const { return entries[row * n + column]; }
};

class RecordedPart final : public PartStamp {
  public:
    RecordedPart(const PartKind& kind, const PartValues& values);

    int size() const { return static_cast<int>(unknowns.size()); }
    int index(std::string_view name) const; ///< fails the test when there is no such unknown
    bool has_unknown(std::string_view name) const;
    /// All unknowns at their start (0 for nets), but those named.
    std::vector<double> at(const std::map<std::string, double>& values) const;

    std::vector<double> f(const std::vector<double>& x) const; ///< G x + B i − s: currents leaving the nets
    std::vector<double> q(const std::vector<double>& x) const; ///< C x + B Q
    Square df(const std::vector<double>& x) const;
    Square dq(const std::vector<double>& x) const;

    double current(std::string_view terminal, const std::vector<double>& x) const { return f(x)[index(terminal)]; }
    double charge(std::string_view terminal, const std::vector<double>& x) const { return q(x)[index(terminal)]; }
    /// dz/dt of a state from its row: C_zz·dz/dt + f_z = 0.
    double rate(std::string_view state, const std::vector<double>& x) const;

    // What the part writes.
    int net(int terminal) const override { return terminal; }
    int internal_voltage(std::string_view name) override { return add(name, 'v', 1, 0); }
    int branch_current(std::string_view name) override { return add(name, 'i', 1e-3, 0); }
    int state(std::string_view name, std::string_view, double typical, double start) override {
        return add(name, 's', typical, start);
    }
    void g(int row, int column, double value) override { write(G_, row, column, value); }
    void c(int row, int column, double value) override { write(C_, row, column, value); }
    void source(int row, double value) override { write(s_, row, 0, value); }
    void nonlinear(LawPtr law, std::vector<Combination> controls, std::vector<Combination> injections) override;
    void tie(Tie how, int a, int b) override { ties.push_back({how, a, b}); }

    std::vector<RecordedUnknown> unknowns;
    std::vector<RecordedElement> elements;
    std::vector<RecordedTie> ties;

  private:
    struct Entry {
        int row, column;
        double value;
    };
    int add(std::string_view name, char type, double typical, double start);
    void write(std::vector<Entry>& entries, int row, int column, double value);
    std::vector<Entry> G_, C_, s_;
};

/// The part of that kind with the given parameters, at a temperature.
RecordedPart record(std::string_view kind, const Settings& settings = {}, double temperature_k = 298.15);

/// What the kind's check finds wrong with these values together; empty: nothing.
std::string complaint(std::string_view kind, const Settings& settings);

/// k-th harmonic of y over one cycle of equidistant samples: Σ y·cos(kφ)·2/N (for laws of even symmetry in time).
double cosine_harmonic(const std::vector<double>& samples, int order);
/// Samples of a function of the phase over one cycle.
template <class Function> std::vector<double> over_a_cycle(int count, Function value) {
    std::vector<double> samples(count);
    for (int k = 0; k < count; ++k) samples[k] = value(2 * 3.14159265358979323846 * k / count);
    return samples;
}
/// Where a rising function crosses `wanted` between low and high (bisection to the last digit).
template <class Function> double solve_rising(Function value, double wanted, double low, double high) {
    for (int k = 0; k < 200; ++k) {
        const double middle = low + (high - low) / 2;
        (value(middle) < wanted ? low : high) = middle;
    }
    return low + (high - low) / 2;
}

} // namespace sinewright::testing
