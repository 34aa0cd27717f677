/// Design → Circuit.
#include "core/circuit/circuit.hpp"
#include "core/circuit/topology.hpp"
#include "core/parts/resolve.hpp"
#include <unordered_map>

namespace sinewright {

namespace {

/// Net names to unknown indices, in order of first mention; gnd is −1.
class NetTable {
  public:
    explicit NetTable(const Design& design) {
        for (const Part& part : design.parts)
            for (const TerminalNet& joint : part.terminals)
                if (joint.net && *joint.net != ground_net && index_.emplace(*joint.net, count()).second)
                    names_.push_back(*joint.net);
    }
    int count() const { return static_cast<int>(names_.size()); }
    int of(const std::string& net) const { return net == ground_net ? -1 : index_.at(net); }
    const std::vector<std::string>& names() const { return names_; }

  private:
    std::unordered_map<std::string, int> index_;
    std::vector<std::string> names_;
};

struct Entry {
    int row, column;
    double value;
};

/// Collects what all parts contribute; sizes are known only at the end, so entries wait in lists.
class Collector final : public PartStamp {
  public:
    Collector(const NetTable& nets, std::vector<Unknown>& unknowns, std::vector<Element>& elements)
        : nets_(nets), unknowns_(unknowns), elements_(elements) {}

    void begin(const Design& design, int part) { part_ = part, seen_ = &design.parts[part]; }
    /// The terminal of the present part that hangs on the opened side instead of its net.
    void open_terminal(int terminal, int unknown) { opened_terminal_ = terminal, opened_unknown_ = unknown; }
    void open_nothing() { opened_terminal_ = -1; }

    int net(int terminal) const override {
        if (terminal == opened_terminal_) return opened_unknown_;
        const auto& joint = seen_->terminals[terminal].net;
        return joint ? nets_.of(*joint) : -1; // unconnected terminals are a fault before any number counts
    }
    int internal_voltage(std::string_view name) override { return add(name, UnknownKind::internal_voltage, "V", 1, 0); }
    int branch_current(std::string_view name) override { return add(name, UnknownKind::branch_current, "A", 1e-3, 0); }
    int state(std::string_view name, std::string_view unit, double typical, double start) override {
        return add(name, UnknownKind::state, unit, typical, start);
    }
    void g(int row, int column, double value) override {
        if (row >= 0 && column >= 0) G.push_back({row, column, value});
    }
    void c(int row, int column, double value) override {
        if (row >= 0 && column >= 0) C.push_back({row, column, value});
    }
    void source(int row, double value) override {
        if (row >= 0) s.push_back({row, 0, value});
    }
    void nonlinear(LawPtr law, std::vector<Combination> controls, std::vector<Combination> injections) override {
        for (auto* list : {&controls, &injections})
            for (Combination& combination : *list)
                std::erase_if(combination, [](const Weighted& w) { return w.index < 0; });
        elements_.push_back({part_, std::move(law), std::move(controls), std::move(injections), seen_->ref});
    }
    void tie(Tie how, int a, int b) override { ties.push_back({how, a, b, part_}); }

    std::vector<Entry> G, C, s;
    std::vector<TieEdge> ties;

  private:
    int add(std::string_view name, UnknownKind kind, std::string_view unit, double typical, double start) {
        unknowns_.push_back(
            {seen_->ref + " " + std::string(name), seen_->ref, kind, std::string(unit), typical, start});
        return static_cast<int>(unknowns_.size()) - 1;
    }
    const NetTable& nets_;
    std::vector<Unknown>& unknowns_;
    std::vector<Element>& elements_;
    const Part* seen_ = nullptr;
    int part_ = 0, opened_terminal_ = -1, opened_unknown_ = -1;
};

/// Stands for the opened side until all inner unknowns are counted.
constexpr int opened_placeholder = 1 << 28;

struct Assembled {
    Circuit circuit;
    std::vector<TieEdge> ties;
};

/// The opened side becomes the last unknown.
void settle_opened_side(Circuit& circuit, Collector& collector, const Part& part, int rest) {
    circuit.opened = circuit.size();
    circuit.rest = rest;
    circuit.unknowns.push_back({"opened side of " + part.ref, part.ref, UnknownKind::net_voltage, "V", 1, 0});
    const auto settle = [&](int& index) { index = index == opened_placeholder ? circuit.opened : index; };
    for (auto* entries : {&collector.G, &collector.C, &collector.s})
        for (Entry& entry : *entries) settle(entry.row), settle(entry.column);
    for (Element& element : circuit.elements)
        for (auto* list : {&element.controls, &element.injections})
            for (Combination& combination : *list)
                for (Weighted& term : combination) settle(term.index);
}

/// G and C are dense: two of this size take 0.6 GB, and LU as much again.
constexpr int most_unknowns = 6000;

/// @param cut_part, cut_terminal  −1: closed.
/// @error limit_exceeded
Result<Assembled> stamp_all(const Design& design, int cut_part, int cut_terminal) {
    Assembled result;
    Circuit& circuit = result.circuit;
    const NetTable nets(design);
    circuit.nets = nets.names();
    circuit.net_count = nets.count();
    circuit.temperature_k = design.temperature_c + 273.15;
    for (const std::string& name : nets.names())
        circuit.unknowns.push_back({"net " + name, "", UnknownKind::net_voltage, "V", 1, 0});
    Collector collector(nets, circuit.unknowns, circuit.elements);
    for (int k = 0; k < static_cast<int>(design.parts.size()); ++k) {
        const Part& part = design.parts[k];
        const PartKind* kind = find_part_kind(part.kind);
        collector.begin(design, k);
        if (k == cut_part) collector.open_terminal(cut_terminal, opened_placeholder);
        kind->stamp(resolve(*kind, part, circuit.temperature_k), collector);
        collector.open_nothing();
    }
    if (cut_part >= 0)
        settle_opened_side(circuit, collector, design.parts[cut_part],
                           nets.of(*design.parts[cut_part].terminals[cut_terminal].net));
    const int n = circuit.size();
    if (n > most_unknowns)
        return Fault{FaultKind::limit_exceeded, "parts",
                     "The circuit has " + std::to_string(n) + " unknowns; at most " + std::to_string(most_unknowns) +
                         " can be solved.",
                     "Use fewer parts or simpler models."};
    if (n == 0)
        return Fault{FaultKind::floating_net, "net gnd", "Every terminal is on gnd, so there is no voltage to find.",
                     "Join the parts to other nets."};
    circuit.G = Matrix::Zero(n, n);
    circuit.C = Matrix::Zero(n, n);
    circuit.s = Vector::Zero(n);
    for (const Entry& e : collector.G) circuit.G(e.row, e.column) += e.value;
    for (const Entry& e : collector.C) circuit.C(e.row, e.column) += e.value;
    for (const Entry& e : collector.s) circuit.s[e.row] += e.value;
    result.ties = std::move(collector.ties);
    return result;
}

} // namespace

int Circuit::net(std::string_view name) const {
    if (name == ground_net) return -1;
    for (int k = 0; k < net_count; ++k)
        if (nets[k] == name) return k;
    return -2;
}

Result<Circuit> assemble(const Design& design) {
    if (Faults open = unconnected_terminals(design); !open.empty()) return open;
    Result<Assembled> assembled = stamp_all(design, -1, -1);
    if (!assembled) return assembled.faults();
    if (Faults faults = topology_faults(design, assembled->circuit, assembled->ties); !faults.empty()) return faults;
    return std::move(assembled->circuit);
}

Result<Circuit> assemble_opened(const Design& design, const Cut& cut) {
    if (Faults open = unconnected_terminals(design); !open.empty()) return open;
    for (int k = 0; k < static_cast<int>(design.parts.size()); ++k) {
        const Part& part = design.parts[k];
        if (part.ref != cut.part) continue;
        const int terminal = find_part_kind(part.kind)->terminal(cut.terminal);
        if (terminal < 0) break;
        const std::string& net = *part.terminals[terminal].net;
        const std::string where = cut.part + "." + cut.terminal;
        if (net == ground_net)
            return Fault{FaultKind::no_loop_gain, where,
                         "The cut lies at " + where + ", which is on gnd: no signal passes there.",
                         "Cut at a terminal that carries the signal."};
        Result<Assembled> assembled = stamp_all(design, k, terminal);
        if (!assembled) return assembled.faults();
        return std::move(assembled->circuit);
    }
    return Fault{FaultKind::missing_reference, "cut",
                 "The cut names " + cut.part + " " + cut.terminal + ", which is not there.",
                 "Name a part of the design and one of its terminals."};
}

} // namespace sinewright
