#include "core/circuit/topology.hpp"
#include "core/circuit/structural_rank.hpp"
#include <algorithm>
#include <numeric>

namespace sinewright {

namespace {

/// Union of unknowns and gnd; gnd (−1) is the last node.
class Pieces {
  public:
    explicit Pieces(int unknowns) : parent_(static_cast<std::size_t>(unknowns) + 1) {
        std::iota(parent_.begin(), parent_.end(), 0);
    }
    int node(int unknown) const { return unknown < 0 ? static_cast<int>(parent_.size()) - 1 : unknown; }
    int find(int unknown) {
        int k = node(unknown);
        while (parent_[k] != k) k = parent_[k] = parent_[parent_[k]];
        return k;
    }
    /// False when they were one piece already.
    bool join(int a, int b) {
        a = find(a), b = find(b);
        parent_[a] = b;
        return a != b;
    }

  private:
    std::vector<int> parent_;
};

std::string list_of(const std::vector<std::string>& names) {
    std::string text;
    for (std::size_t k = 0; k < names.size(); ++k)
        text += (k == 0 ? "" : k + 1 == names.size() ? " and " : ", ") + names[k];
    return text;
}

/// Parts with a terminal on a net.
std::vector<std::string> parts_on(const Design& design, const std::string& net) {
    std::vector<std::string> refs;
    for (const Part& part : design.parts)
        for (const TerminalNet& joint : part.terminals)
            if (joint.net == net) refs.push_back(part.ref);
    return refs;
}

Fault floating(const Design& design, const std::vector<std::string>& nets) {
    if (nets.size() == 1) {
        const auto parts = parts_on(design, nets[0]);
        if (parts.size() == 1)
            return {FaultKind::floating_net, "net " + nets[0],
                    "Net " + nets[0] + " reaches nothing else: join it or remove " + parts[0] + ".",
                    "Join the free end of " + parts[0] + "."};
    }
    const std::string many = nets.size() == 1 ? "Net " + nets[0] + " has" : "Nets " + list_of(nets) + " have";
    return {FaultKind::floating_net, "net " + nets[0],
            many +
                " no DC path to gnd: only capacitors and inputs reach there, so the voltage at rest is undetermined.",
            "Give it a resistor to gnd or to a driven net."};
}

Faults floating_nets(const Design& design, const Circuit& circuit, const std::vector<TieEdge>& ties) {
    Pieces pieces(circuit.size());
    for (const TieEdge& tie : ties)
        if (tie.how != Tie::stores) pieces.join(tie.a, tie.b);
    const bool grounded = std::any_of(ties.begin(), ties.end(), [](const TieEdge& t) { return t.a < 0 || t.b < 0; });
    if (!grounded && circuit.net_count > 0)
        return {{FaultKind::floating_net, "net gnd", "Nothing is joined to gnd, so no voltage has a reference.",
                 "Ground one point of the circuit."}};
    Faults faults;
    std::vector<int> reported;
    for (int k = 0; k < circuit.net_count; ++k) {
        const int piece = pieces.find(k);
        if (piece == pieces.find(-1) || std::find(reported.begin(), reported.end(), piece) != reported.end()) continue;
        reported.push_back(piece);
        std::vector<std::string> nets;
        for (int other = k; other < circuit.net_count; ++other)
            if (pieces.find(other) == piece) nets.push_back(circuit.nets[other]);
        faults.push_back(floating(design, nets));
    }
    return faults;
}

/// Parts of the chain from a to b through a forest of ideal sources (breadth first).
std::vector<int> source_chain(const std::vector<TieEdge>& forest, int unknowns, int a, int b) {
    const auto node = [](int unknown) { return unknown + 1; }; // gnd is −1
    std::vector<std::vector<int>> edges_at(unknowns + 1);
    for (int e = 0; e < static_cast<int>(forest.size()); ++e)
        for (int end : {forest[e].a, forest[e].b}) edges_at[node(end)].push_back(e);
    std::vector<int> came_by(unknowns + 1, -1), queue{a};
    const auto far_end = [&](int e, int from) { return forest[e].a == from ? forest[e].b : forest[e].a; };
    for (std::size_t head = 0; head < queue.size() && queue[head] != b; ++head)
        for (int e : edges_at[node(queue[head])]) {
            const int next = far_end(e, queue[head]);
            if (next == a || came_by[node(next)] >= 0) continue;
            came_by[node(next)] = e;
            queue.push_back(next);
        }
    std::vector<int> parts;
    for (int at = b; at != a; at = far_end(came_by[node(at)], at)) parts.push_back(forest[came_by[node(at)]].part);
    return parts;
}

std::string name_of_source(const Part& part) {
    return part.kind == "supply" || part.kind == "inductor" || part.kind == "potentiometer"
               ? part.ref
               : "the output of " + part.ref;
}

std::string capital(std::string text) {
    if (!text.empty()) text[0] = static_cast<char>(std::toupper(static_cast<unsigned char>(text[0])));
    return text;
}

Fault source_loop(const Design& design, const TieEdge& closing, const std::vector<int>& chain) {
    const Part& part = design.parts[closing.part];
    if (closing.a == closing.b) {
        const bool output = name_of_source(part) != part.ref;
        return {FaultKind::source_loop, part.ref,
                output ? "The output of " + part.ref + " is joined to gnd."
                       : "Both ends of " + part.ref + " are on the same net.",
                "Separate them, or remove " + part.ref + "."};
    }
    std::vector<std::string> names{name_of_source(part)};
    bool inductors = part.kind == "inductor";
    for (const int other : chain) {
        const std::string name = name_of_source(design.parts[other]);
        inductors = inductors || design.parts[other].kind == "inductor";
        if (std::find(names.begin(), names.end(), name) == names.end()) names.push_back(name);
    }
    std::reverse(names.begin(), names.end());
    if (inductors)
        return {FaultKind::source_loop, part.ref,
                capital(list_of(names)) + " form a loop without resistance: its direct current is undetermined.",
                "Give an inductor its winding's series_resistance."};
    if (names.size() == 2)
        return {FaultKind::source_loop, part.ref,
                capital(list_of(names)) + " force different voltages on the same net.",
                "Separate them with a resistor, or remove one."};
    return {FaultKind::source_loop, part.ref, capital(list_of(names)) + " form a loop of ideal sources.",
            "Put a resistor into the loop, or remove one of them."};
}

/// Enough to see what is wrong; a hostile file can hold a million.
constexpr std::size_t most_loops = 20;

Faults source_loops(const Design& design, const Circuit& circuit, const std::vector<TieEdge>& ties) {
    Pieces pieces(circuit.size());
    std::vector<TieEdge> sources;
    Faults faults;
    for (const TieEdge& tie : ties) {
        if (tie.how != Tie::forces_voltage) continue;
        if (pieces.join(tie.a, tie.b))
            sources.push_back(tie);
        else
            faults.push_back(source_loop(design, tie, source_chain(sources, circuit.size(), tie.a, tie.b)));
        if (faults.size() == most_loops) break;
    }
    return faults;
}

/// The unknown no equation is left for and the parts whose equations say too much already. Prefers a net: it can be
/// seen on the sheet.
Faults undetermined(const Circuit& circuit) {
    const StructuralGap gap = find_structural_gap(direct_current_pattern(circuit));
    if (gap.undetermined.empty()) return {};
    const auto is_net = [&](int k) { return circuit.unknowns[k].kind == UnknownKind::net_voltage; };
    const auto net = std::find_if(gap.undetermined.begin(), gap.undetermined.end(), is_net);
    const Unknown& loose = circuit.unknowns[net == gap.undetermined.end() ? gap.undetermined.front() : *net];
    std::vector<std::string> owners;
    for (int row : gap.overdetermined)
        if (const std::string& ref = circuit.unknowns[row].part; !ref.empty()) owners.push_back(ref);
    std::sort(owners.begin(), owners.end());
    owners.erase(std::unique(owners.begin(), owners.end()), owners.end());
    const bool one = owners.size() == 1;
    std::string sentence = "No equation determines " + loose.name + " at DC";
    if (!owners.empty())
        sentence += ": what " + list_of(owners) + (one ? " demands" : " demand") + " is settled elsewhere already";
    return {{FaultKind::singular_pencil, loose.part.empty() ? loose.name : loose.part, sentence + ".",
             owners.empty() ? "Check what drives it: an op-amp may lack feedback to its inverting input."
                            : "Give " + list_of(owners) + " feedback that passes direct current."}};
}

} // namespace

Faults unconnected_terminals(const Design& design) {
    Faults faults;
    if (design.parts.empty())
        faults.push_back(
            {FaultKind::missing_value, "parts", "The design has no parts.", "Drop an amplifier and a network."});
    for (const Part& part : design.parts) {
        const PartKind* kind = find_part_kind(part.kind);
        if (!kind) {
            faults.push_back({FaultKind::unknown_key, part.ref + ".kind",
                              part.ref + ": no part kind is called " + part.kind + ".", "Choose one from the shelf."});
            continue;
        }
        for (std::size_t k = 0; k < kind->terminals.size(); ++k) {
            const TerminalInfo& terminal = kind->terminals[k];
            if (k < part.terminals.size() && part.terminals[k].terminal == terminal.name && part.terminals[k].net)
                continue;
            faults.push_back({FaultKind::unconnected_terminal, part.ref + "." + std::string(terminal.name),
                              part.ref + " is not connected at its " + std::string(terminal.meaning) + ".",
                              "Join it, ground it, or remove " + part.ref + "."});
        }
    }
    return faults;
}

Faults topology_faults(const Design& design, const Circuit& circuit, const std::vector<TieEdge>& ties) {
    Faults faults = source_loops(design, circuit, ties);
    for (Fault& fault : floating_nets(design, circuit, ties)) faults.push_back(std::move(fault));
    return faults.empty() ? undetermined(circuit) : faults;
}

} // namespace sinewright
