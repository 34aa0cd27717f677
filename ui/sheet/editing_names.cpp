#include "core/parts/part_kind.hpp"
#include "ui/sheet/editing.hpp"
#include <QObject>
#include <algorithm>
#include <set>

namespace sinewright::ui {

bool named_by_program(std::string_view net) {
    return net.size() > 1 && net[0] == 'n' &&
           std::all_of(net.begin() + 1, net.end(), [](char c) { return c >= '0' && c <= '9'; });
}

std::string free_ref(const Design& design, std::string_view kind) {
    const PartKind* known = find_part_kind(kind);
    const std::string prefix(known ? known->ref_prefix : "X");
    for (int i = 1;; ++i)
        if (std::string ref = prefix + std::to_string(i); !design.find(ref)) return ref;
}

std::string free_net(const Design& design) {
    std::set<std::string> used;
    for (const std::string& net : nets_of(design)) used.insert(net);
    for (const Label& label : design.labels) used.insert(label.net);
    used.insert(design.output);
    for (int i = 1;; ++i) {
        std::string net(1, 'n');
        net += std::to_string(i);
        if (!used.contains(net)) return net;
    }
}

std::optional<std::string> net_of(const Design& design, const TerminalRef& terminal) {
    const Part* part = design.find(terminal.part);
    return part ? part->net_at(terminal.terminal) : std::nullopt;
}

TerminalRefs terminals_on(const Design& design, std::string_view net) {
    TerminalRefs list;
    for (const Part& part : design.parts)
        for (const TerminalNet& t : part.terminals)
            if (t.net == net) list.push_back({part.ref, t.terminal});
    return list;
}

namespace {
bool is_name(const std::string& name) {
    return !name.empty() && name.size() <= 64 && std::none_of(name.begin(), name.end(), [](char c) {
        return static_cast<unsigned char>(c) <= ' ' || c == '.' || c == '"';
    });
}

void replace_net(Design& design, const std::string& net, const std::string& name) {
    for (Part& part : design.parts)
        for (TerminalNet& t : part.terminals)
            if (t.net == net) t.net = name;
    for (Label& label : design.labels)
        if (label.net == net) label.net = name;
    if (design.output == net) design.output = name;
}
} // namespace

Refusal rename_net(Design& design, const std::string& net, const std::string& name) {
    if (name == net) return {};
    if (!is_name(name)) return QObject::tr("A net's name has no spaces, points or quotes.");
    if (net == ground_net) return QObject::tr("gnd is the reference of every design and keeps its name.");
    if (name == ground_net && net == design.output)
        return QObject::tr("%1 is the output: joining it to ground would short it.").arg(QString::fromStdString(net));
    replace_net(design, net, name);
    if (name == ground_net) std::erase_if(design.labels, [](const Label& label) { return label.net == ground_net; });
    return {};
}

Refusal rename_part(Design& design, const std::string& ref, const std::string& name) {
    if (name == ref) return {};
    if (!is_name(name)) return QObject::tr("A part's reference has no spaces, points or quotes.");
    if (design.find(name)) return QObject::tr("There is a part %1 already.").arg(QString::fromStdString(name));
    Part* part = design.find(ref);
    if (!part) return QObject::tr("There is no part %1.").arg(QString::fromStdString(ref));
    part->ref = name;
    const auto follow = [&](std::string& who) {
        if (who == ref) who = name;
    };
    if (design.cut) follow(design.cut->part);
    for (Group& group : design.groups)
        for (std::string& member : group.members) follow(member);
    for (Dial& dial : design.dials)
        for (std::string& set : dial.sets)
            if (set.starts_with(ref + ".")) set = name + set.substr(ref.size());
    for (Label& label : design.labels)
        if (label.stub_of) follow(label.stub_of->part);
    return {};
}

} // namespace sinewright::ui
