#include "core/design/file.hpp"
#include "core/design/words.hpp"
#include "core/parts/resolve.hpp"
#include "core/quantity/quantity.hpp"
#include <algorithm>
#include <cmath>
#include <set>

namespace sinewright {

namespace {

constexpr std::size_t longest_name = 100;

std::string range_words(Range range) {
    switch (range) {
    case Range::positive:
        return "must be above zero";
    case Range::not_negative:
        return "must not be below zero";
    case Range::negative:
        return "must be below zero";
    case Range::from_0_to_1:
        return "must lie from 0 to 1";
    case Range::any:
        break;
    }
    return "must be finite";
}

bool in_range(double value, Range range) {
    if (!std::isfinite(value)) return false;
    switch (range) {
    case Range::positive:
        return value > 0;
    case Range::not_negative:
        return value >= 0;
    case Range::negative:
        return value < 0;
    case Range::from_0_to_1:
        return value >= 0 && value <= 1;
    case Range::any:
        break;
    }
    return true;
}

class Validator {
  public:
    explicit Validator(const Design& design) : design_(design) {
        for (const std::string& net : nets_of(design)) nets_.insert(net);
    }

    Faults run() {
        if (design_.parts.size() > max_parts)
            add(FaultKind::limit_exceeded, "parts",
                "The design has " + std::to_string(design_.parts.size()) + " parts; at most " +
                    std::to_string(max_parts) + " are allowed.",
                "Split it.");
        if (!(design_.temperature_c > -273.15) || !std::isfinite(design_.temperature_c))
            add(FaultKind::value_out_of_range, "temperature_c", "temperature_c lies below absolute zero.",
                "Give a temperature in °C.");
        std::set<std::string> refs;
        for (const Part& part : design_.parts) {
            name(part.ref, "part");
            if (!refs.insert(part.ref).second)
                add(FaultKind::duplicate_name, part.ref, "There are two parts named " + part.ref + ".",
                    "Rename one of them.");
            check_part(part);
        }
        for (const std::string& net : nets_) name(net, "net");
        references();
        groups_and_dials();
        targets();
        return std::move(faults_);
    }

  private:
    void add(FaultKind kind, std::string where, std::string sentence, std::string remedy) {
        faults_.push_back({kind, std::move(where), std::move(sentence), std::move(remedy)});
    }

    void name(const std::string& text, const std::string& what) {
        const std::string shown = printable(text);
        const std::string where = what == "net" ? "net " + shown : shown;
        if (text.empty())
            add(FaultKind::bad_quantity, what, "A " + what + " has an empty name.", "Give it a name.");
        else if (shown != text)
            add(FaultKind::bad_quantity, where, "The " + what + " name `" + shown + "` contains control characters.",
                "Use letters, digits and marks only.");
        else if (text.size() > longest_name)
            add(FaultKind::limit_exceeded, where.substr(0, 40) + "…", "A " + what + " name is longer than 100 bytes.",
                "Shorten it.");
    }

    void check_part(const Part& part) {
        const PartKind* kind = find_part_kind(part.kind);
        if (!kind) {
            faults_.push_back(unknown_kind(part.ref, part.kind));
            return;
        }
        bool sound = true;
        std::set<std::string> seen;
        for (const Parameter& given : part.parameters) {
            const int k = kind->parameter(given.name);
            if (k < 0)
                faults_.push_back(unknown_parameter(part.ref, *kind, given.name)), sound = false;
            else
                sound = check_parameter(part, kind->parameters[k], given) && sound;
            if (!seen.insert(given.name).second)
                add(FaultKind::duplicate_name, part.ref + "." + given.name,
                    part.ref + ": " + given.name + " is given twice.", "Remove one."),
                    sound = false;
        }
        for (const ParameterInfo& info : kind->parameters)
            if (info.required && !part.find(info.name))
                add(FaultKind::missing_value, part.ref + "." + std::string(info.name),
                    part.ref + ": a " + std::string(kind->title) + " needs " + std::string(info.name) + ".",
                    std::string(info.help)),
                    sound = false;
        check_terminals(part, *kind);
        if (part.tolerance && !(part.tolerance->si >= 0 && part.tolerance->si < 1))
            add(FaultKind::value_out_of_range, part.ref + ".tolerance",
                part.ref + ": tolerance must lie from 0 to below 100 %.", "Write it like 1%.");
        if (part.tempco && !(std::abs(part.tempco->si) < 1))
            add(FaultKind::value_out_of_range, part.ref + ".tempco", part.ref + ": tempco is out of all reason.",
                "Write it like 50ppm.");
        if (!sound) return;
        const PartValues values = resolve(*kind, part, design_.temperature_c + 273.15);
        if (kind->check)
            if (const std::string wrong = kind->check(values); !wrong.empty())
                add(FaultKind::value_out_of_range, part.ref, part.ref + ": " + wrong + ".", "");
        if (kind->main >= 0 && values.has(kind->main) &&
            !in_range(values[kind->main], kind->parameters[kind->main].range))
            add(FaultKind::value_out_of_range, part.ref + ".tempco",
                part.ref + ": at this temperature its tempco takes " + std::string(kind->parameters[kind->main].name) +
                    " out of range.",
                "Check temperature_c and tempco.");
    }

    bool check_parameter(const Part& part, const ParameterInfo& info, const Parameter& given) {
        const std::string where = part.ref + "." + given.name;
        if (const auto* word = std::get_if<std::string>(&given.value)) {
            if (std::find(info.choices.begin(), info.choices.end(), *word) != info.choices.end()) return true;
            std::vector<std::string> names(info.choices.begin(), info.choices.end());
            add(FaultKind::unknown_key, where,
                names.empty() ? part.ref + ": " + given.name + " must be a number."
                              : part.ref + ": " + given.name + " can't be `" + *word + "`.",
                names.empty() ? "Give a value in " + std::string(info.unit) + "."
                              : "It is one of " + quoted_list(names) + ".");
            return false;
        }
        const double value = std::get<Value>(given.value).si;
        if (!info.choices.empty()) {
            add(FaultKind::unknown_key, where, part.ref + ": " + given.name + " must be a word.",
                "It is one of " + quoted_list({info.choices.begin(), info.choices.end()}) + ".");
            return false;
        }
        if (in_range(value, info.range)) return true;
        add(FaultKind::value_out_of_range, where,
            part.ref + ": " + given.name + " is " + si_text(value, info.unit) + "; it " + range_words(info.range) + ".",
            std::string(info.help));
        return false;
    }

    void check_terminals(const Part& part, const PartKind& kind) {
        for (const TerminalNet& joint : part.terminals)
            if (kind.terminal(joint.terminal) < 0) {
                std::vector<std::string> names;
                for (const TerminalInfo& info : kind.terminals) names.emplace_back(info.name);
                add(FaultKind::unknown_key, part.ref + "." + joint.terminal,
                    part.ref + ": " + with_article(kind.title) + " has no terminal `" + joint.terminal + "`.",
                    "Its terminals are " + quoted_list(names) + ".");
            }
        if (part.terminals.size() != kind.terminals.size())
            for (const TerminalInfo& info : kind.terminals)
                if (std::none_of(part.terminals.begin(), part.terminals.end(),
                                 [&](const auto& t) { return t.terminal == info.name; }))
                    add(FaultKind::missing_reference, part.ref,
                        part.ref + ": terminal `" + std::string(info.name) + "` is missing.",
                        "List every terminal; null leaves it unconnected.");
    }

    void terminal_reference(const TerminalRef& ref, const std::string& where, const std::string& what) {
        const Part* part = design_.find(ref.part);
        if (!part) {
            add(FaultKind::missing_reference, where, what + " names part `" + ref.part + "`, which is not there.",
                "Name one of the design's parts.");
            return;
        }
        const PartKind* kind = find_part_kind(part->kind);
        if (!kind || kind->terminal(ref.terminal) >= 0) return;
        std::vector<std::string> names;
        for (const TerminalInfo& info : kind->terminals) names.emplace_back(info.name);
        add(FaultKind::missing_reference, where,
            what + " names terminal `" + ref.terminal + "` of " + ref.part + ", which it has not.",
            "Its terminals are " + quoted_list(names) + ".");
    }

    void references() {
        if (design_.cut) terminal_reference(*design_.cut, "cut", "The cut");
        if (!design_.output.empty() && !design_.parts.empty() && !nets_.contains(design_.output))
            add(FaultKind::missing_reference, "output", "No net `" + design_.output + "` here, which `output` names.",
                "Nets are " + quoted_list({nets_.begin(), nets_.end()}) + ".");
        for (const Label& label : design_.labels)
            if (label.stub_of) terminal_reference(*label.stub_of, "labels", "The label `" + label.net + "`");
    }

    void unique_names(const std::vector<std::string>& names, const std::string& what) {
        std::set<std::string> seen;
        for (const std::string& text : names) {
            name(text, what);
            if (!seen.insert(text).second)
                add(FaultKind::duplicate_name, what + " " + text, "There are two " + what + "s named " + text + ".",
                    "Rename one of them.");
        }
    }

    void groups_and_dials() {
        std::vector<std::string> groups, dials;
        for (const Group& group : design_.groups) {
            groups.push_back(group.name);
            for (const std::string& member : group.members)
                if (!design_.find(member))
                    add(FaultKind::missing_reference, "group " + group.name,
                        "Group " + group.name + " names part `" + member + "`, which is not there.",
                        "Name parts of the design.");
            if (group.tracking && !(group.tracking->si >= 0 && group.tracking->si < 1))
                add(FaultKind::value_out_of_range, "group " + group.name,
                    "Group " + group.name + ": tracking must lie from 0 to below 100 %.", "Write it like 0.5%.");
        }
        for (const Dial& dial : design_.dials) {
            dials.push_back(dial.name);
            check_dial(dial);
        }
        unique_names(groups, "group");
        unique_names(dials, "dial");
    }

    void check_dial(const Dial& dial) {
        const std::string where = "dial " + dial.name;
        for (const std::string& set : dial.sets) {
            const std::size_t dot = set.find('.');
            const Part* part = dot == std::string::npos ? nullptr : design_.find(set.substr(0, dot));
            const PartKind* kind = part ? find_part_kind(part->kind) : nullptr;
            if (part && !kind) continue;
            const int k = kind ? kind->parameter(set.substr(dot + 1)) : -1;
            if (k < 0 || !kind->parameters[k].choices.empty())
                add(FaultKind::missing_reference, where,
                    "Dial " + dial.name + " sets `" + set + "`, which is not there.",
                    "Write it as part, point, parameter: R1.resistance.");
        }
        if (dial.sets.empty())
            add(FaultKind::missing_value, where, "Dial " + dial.name + " sets nothing.",
                "Name a parameter such as R1.resistance.");
        if (dial.from.si == dial.to.si)
            add(FaultKind::value_out_of_range, where, "Dial " + dial.name + " has no range: from and to are equal.",
                "Give it a range.");
        if (dial.law == DialLaw::log && !(dial.from.si > 0 && dial.to.si > 0))
            add(FaultKind::value_out_of_range, where,
                "Dial " + dial.name + " has a log law, so from and to must be above zero.",
                "Use the linear law or positive ends.");
        if (dial.at &&
            (dial.at->si < std::min(dial.from.si, dial.to.si) || dial.at->si > std::max(dial.from.si, dial.to.si)))
            add(FaultKind::value_out_of_range, where, "Dial " + dial.name + " stands outside its range.",
                "Set `at` between `from` and `to`.");
    }

    void targets() {
        std::set<std::string> seen;
        for (const Target& target : design_.targets) {
            const std::string where = "target " + target.name;
            const auto known = target_names();
            if (std::none_of(known.begin(), known.end(), [&](const TargetName& t) { return t.name == target.name; })) {
                std::vector<std::string> names;
                for (const TargetName& t : known) names.emplace_back(t.name);
                add(FaultKind::unknown_key, where, "No result `" + target.name + "` to set a target on.",
                    "Results are " + quoted_list(names) + ".");
            }
            if (!seen.insert(target.name).second)
                add(FaultKind::duplicate_name, where, "There are two targets on " + target.name + ".", "Remove one.");
            if (target.nominal.has_value() != target.within.has_value())
                add(FaultKind::missing_value, where, "Target " + target.name + ": nominal and within belong together.",
                    "Give both, or min and max.");
            if (!target.nominal && !target.min && !target.max)
                add(FaultKind::missing_value, where, "Target " + target.name + " sets no limit.",
                    "Give min, max, or nominal with within.");
            if (target.within && !(target.within->si > 0))
                add(FaultKind::value_out_of_range, where, "Target " + target.name + ": within must be above zero.",
                    "Write it like 1%.");
            if (target.min && target.max && !(target.min->si <= target.max->si))
                add(FaultKind::value_out_of_range, where, "Target " + target.name + ": min lies above max.",
                    "Exchange them.");
        }
    }

    const Design& design_;
    std::set<std::string> nets_;
    Faults faults_;
};

} // namespace

Faults validate(const Design& design) { return Validator(design).run(); }

} // namespace sinewright
