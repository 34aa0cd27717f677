#include "core/circuit/topology.hpp"
#include <algorithm>
#include <functional>
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

/// Parts of a chain of ideal sources from a to b, or empty.
std::vector<int> source_chain(const std::vector<TieEdge>& sources, int a, int b) {
    std::vector<std::pair<int, std::vector<int>>> reached{{a, {}}};
    for (std::size_t k = 0; k < reached.size(); ++k) {
        if (reached[k].first == b) return reached[k].second;
        for (const TieEdge& edge : sources)
            for (const auto& [from, to] : {std::pair{edge.a, edge.b}, std::pair{edge.b, edge.a}}) {
                if (from != reached[k].first) continue;
                const bool seen =
                    std::any_of(reached.begin(), reached.end(), [&](const auto& r) { return r.first == to; });
                if (seen) continue;
                auto parts = reached[k].second;
                parts.push_back(edge.part);
                reached.emplace_back(to, std::move(parts));
            }
    }
    return {};
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

Faults source_loops(const Design& design, const Circuit& circuit, const std::vector<TieEdge>& ties) {
    Pieces pieces(circuit.size());
    std::vector<TieEdge> sources;
    Faults faults;
    for (const TieEdge& tie : ties) {
        if (tie.how != Tie::forces_voltage) continue;
        if (pieces.join(tie.a, tie.b))
            sources.push_back(tie);
        else
            faults.push_back(source_loop(design, tie, source_chain(sources, tie.a, tie.b)));
    }
    return faults;
}

/// Which unknowns each equation mentions at DC.
std::vector<std::vector<int>> pattern_at_dc(const Circuit& circuit) {
    std::vector<std::vector<int>> rows(circuit.size());
    for (int row = 0; row < circuit.size(); ++row)
        for (int column = 0; column < circuit.size(); ++column)
            if (circuit.G(row, column) != 0) rows[row].push_back(column);
    for (const Element& element : circuit.elements)
        for (const Combination& injection : element.injections)
            for (const auto& [row, weight] : injection)
                for (const Combination& control : element.controls)
                    for (const auto& [column, weight_in] : control) rows[row].push_back(column);
    return rows;
}

/// An unknown no equation can be spared for (maximum matching of equations and unknowns); −1: none.
int unmatched_unknown(const Circuit& circuit) {
    const auto rows = pattern_at_dc(circuit);
    std::vector<int> row_of(circuit.size(), -1), visited(circuit.size(), -1);
    const std::function<bool(int, int)> place = [&](int row, int round) {
        for (const int column : rows[row]) {
            if (visited[column] == round) continue;
            visited[column] = round;
            if (row_of[column] < 0 || place(row_of[column], round)) {
                row_of[column] = row;
                return true;
            }
        }
        return false;
    };
    for (int row = 0; row < circuit.size(); ++row) place(row, row);
    const auto free = std::find(row_of.begin(), row_of.end(), -1);
    return free == row_of.end() ? -1 : static_cast<int>(free - row_of.begin());
}

} // namespace

Faults unconnected_terminals(const Design& design) {
    Faults faults;
    for (const Part& part : design.parts) {
        const PartKind* kind = find_part_kind(part.kind);
        for (std::size_t k = 0; k < part.terminals.size(); ++k) {
            if (part.terminals[k].net) continue;
            faults.push_back({FaultKind::unconnected_terminal, part.ref + "." + part.terminals[k].terminal,
                              part.ref + " is not connected at its " + std::string(kind->terminals[k].meaning) + ".",
                              "Join it, ground it, or remove " + part.ref + "."});
        }
    }
    return faults;
}

Faults topology_faults(const Design& design, const Circuit& circuit, const std::vector<TieEdge>& ties) {
    Faults faults = source_loops(design, circuit, ties);
    for (Fault& fault : floating_nets(design, circuit, ties)) faults.push_back(std::move(fault));
    if (!faults.empty()) return faults;
    if (const int k = unmatched_unknown(circuit); k >= 0) {
        const Unknown& unknown = circuit.unknowns[k];
        faults.push_back({FaultKind::singular_pencil, unknown.part.empty() ? unknown.name : unknown.part,
                          "No equation determines " + unknown.name + " at DC.",
                          "Check what drives it: an op-amp may lack feedback to its inverting input."});
    }
    return faults;
}

} // namespace sinewright
