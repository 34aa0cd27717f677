#include "ui/sheet/editing.hpp"
#include <QObject>
#include <algorithm>

namespace sinewright::ui {

namespace {

TerminalNet* find_terminal(Design& design, const TerminalRef& terminal) {
    Part* part = design.find(terminal.part);
    if (!part) return nullptr;
    for (TerminalNet& t : part->terminals)
        if (t.terminal == terminal.terminal) return &t;
    return nullptr;
}

bool has_label(const Design& design, std::string_view net) {
    return std::any_of(design.labels.begin(), design.labels.end(),
                       [&](const Label& label) { return label.net == net; });
}

/// A net that its last terminal left is forgotten, one with a single terminal and no name of its own frees it.
void tidy(Design& design, const std::string& net) {
    if (net == design.output && terminals_on(design, net).empty()) design.output.clear();
    if (net == ground_net || net == design.output || !named_by_program(net) || has_label(design, net)) return;
    const TerminalRefs left = terminals_on(design, net);
    if (left.size() == 1) find_terminal(design, left.front())->net.reset();
}

void drop_stub(Design& design, const TerminalRef& terminal) {
    std::erase_if(design.labels, [&](const Label& label) { return label.stub_of == terminal; });
}

/// Which of two net names stays when they become one: gnd, the output, a name given by hand, the older number.
bool stays_before(const Design& design, const std::string& a, const std::string& b) {
    const auto rank = [&](const std::string& net) {
        return net == ground_net ? 0 : net == design.output ? 1 : named_by_program(net) ? 3 : 2;
    };
    if (rank(a) != rank(b)) return rank(a) < rank(b);
    if (rank(a) == 3) return std::stoull(a.substr(1, 18)) <= std::stoull(b.substr(1, 18));
    return true;
}

Refusal shorted(const Design& design) {
    return QObject::tr("%1 is the output: joining it to ground would short it.")
        .arg(QString::fromStdString(design.output));
}

/// The first amplifier that gets joined drives the output, until the user says otherwise.
void propose_output(Design& design) {
    if (!design.output.empty()) return;
    for (const Part& part : design.parts) {
        const auto driven = part.net_at("out");
        if (!driven || *driven == ground_net) continue;
        const std::string net = *driven, name = "out";
        design.output = net;
        if (named_by_program(net) && terminals_on(design, name).empty()) rename_net(design, net, name);
        return;
    }
}

} // namespace

Refusal join(Design& design, const TerminalRef& a, const TerminalRef& b) {
    if (a == b) return QObject::tr("That is the same end.");
    TerminalNet *first = find_terminal(design, a), *second = find_terminal(design, b);
    if (!first || !second) return QObject::tr("That end is gone.");
    if (!first->net && !second->net) {
        first->net = second->net = free_net(design);
        propose_output(design);
        return {};
    }
    if (!second->net) return join_to_net(design, b, *first->net);
    return join_to_net(design, a, *second->net);
}

Refusal join_to_net(Design& design, const TerminalRef& terminal, const std::string& net) {
    TerminalNet* end = find_terminal(design, terminal);
    if (!end) return QObject::tr("That end is gone.");
    if (end->net == net) return QObject::tr("Those are joined already.");
    if (!end->net) {
        end->net = net;
        propose_output(design);
        return {};
    }
    const std::string other = *end->net;
    const bool grounds = net == ground_net || other == ground_net;
    if (grounds && (net == design.output || other == design.output)) return shorted(design);
    if (stays_before(design, net, other)) return rename_net(design, other, net);
    return rename_net(design, net, other);
}

Refusal ground(Design& design, const TerminalRef& terminal) {
    const auto net = net_of(design, terminal);
    if (net == ground_net) return QObject::tr("It is grounded already.");
    return join_to_net(design, terminal, std::string(ground_net));
}

void free_end(Design& design, const TerminalRef& terminal) {
    TerminalNet* end = find_terminal(design, terminal);
    if (!end || !end->net) return;
    const std::string net = *end->net;
    end->net.reset();
    drop_stub(design, terminal);
    tidy(design, net);
}

void split(Design& design, const std::string& net, const TerminalRefs& leaving) {
    if (leaving.empty()) return;
    const std::string fresh = free_net(design);
    for (const TerminalRef& terminal : leaving) {
        TerminalNet* end = find_terminal(design, terminal);
        if (!end || end->net != net) continue;
        end->net = fresh;
        for (Label& label : design.labels)
            if (label.stub_of == terminal) label.net = fresh;
    }
    tidy(design, fresh);
    tidy(design, net);
}

Refusal add_stub(Design& design, const TerminalRef& terminal, double x, double y) {
    TerminalNet* end = find_terminal(design, terminal);
    if (!end) return QObject::tr("That end is gone.");
    if (end->net == ground_net) return QObject::tr("That end is grounded: a ground needs no name.");
    if (!end->net) end->net = free_net(design);
    drop_stub(design, terminal);
    design.labels.push_back({*end->net, x, y, terminal});
    return {};
}

void remove_label(Design& design, std::size_t label) {
    if (label >= design.labels.size()) return;
    const std::string net = design.labels[label].net;
    design.labels.erase(design.labels.begin() + static_cast<std::ptrdiff_t>(label));
    tidy(design, net);
}

void set_cut(Design& design, const TerminalRef& terminal) { design.cut = terminal; }

void join_touching(Design& design, const std::vector<std::string>& refs) {
    std::map<Cell, TerminalRefs> at;
    for (const Part& part : design.parts)
        for (const PlacedPort& port : shape_of(part, place_of(part, {})).ports)
            at[port.at].push_back({part.ref, port.terminal});
    const auto ours = [&](const TerminalRef& t) { return std::find(refs.begin(), refs.end(), t.part) != refs.end(); };
    for (const auto& [cell, ends] : at)
        for (std::size_t i = 1; i < ends.size(); ++i) {
            const bool touching = ours(ends[i]) || ours(ends[0]);
            const bool one_free = !net_of(design, ends[i]) || !net_of(design, ends[0]);
            if (touching && one_free && ends[i].part != ends[0].part) join(design, ends[0], ends[i]);
        }
}

} // namespace sinewright::ui
