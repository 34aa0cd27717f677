#include "ui/sheet/typing.hpp"
#include "core/parts/part_kind.hpp"
#include "ui/sheet/reading.hpp"
#include "ui/sheet/symbols.hpp"
#include <algorithm>

namespace sinewright::ui {

namespace {

/// Kinds that a bare number can stand for, the range of values that is usual for them first.
struct Candidate {
    std::string_view kind;
    double usual_from, usual_to;
};
constexpr Candidate candidates[] = {
    {"resistor", 0.99, 1e9}, {"capacitor", 0.9e-12, 0.1e-3}, {"inductor", 1e-7, 100},
    {"supply", 1, 100},      {"potentiometer", 100, 1e7},    {"zener", 2, 200},
};

QString words_for(std::string_view kind, const QString& value) {
    const PartKind* known = find_part_kind(kind);
    const std::string_view title = known ? known->title : kind;
    return QString::fromUtf8(title.data(), static_cast<qsizetype>(title.size())) +
           (value.isEmpty() ? QString() : QLatin1Char(' ') + value);
}

std::optional<Value> value_for(std::string_view kind, const std::string& text) {
    Part probe;
    probe.kind = kind;
    const ParameterInfo* parameter = shown_parameter(probe);
    if (!parameter) return std::nullopt;
    const auto si = read_value(text, parameter->unit);
    if (!si) return std::nullopt;
    return Value{*si, text};
}

void add_numbers(const QString& typed, std::vector<Meaning>& meanings) {
    const std::string text = typed.toStdString();
    std::vector<Meaning> unusual;
    for (const Candidate& candidate : candidates) {
        const auto value = value_for(candidate.kind, text);
        if (!value || value->si <= 0) continue;
        const bool usual = value->si >= candidate.usual_from && value->si <= candidate.usual_to;
        (usual ? meanings : unusual).push_back({std::string(candidate.kind), value, words_for(candidate.kind, typed)});
    }
    if (meanings.empty()) meanings = unusual; // 4k7 farad is nobody's wish
}

/// A word, then perhaps a value: "op", "lamp", "pot 10k".
void add_words(const QString& typed, std::vector<Meaning>& meanings) {
    const QString word = typed.section(QLatin1Char(' '), 0, 0).toLower();
    const QString rest = typed.section(QLatin1Char(' '), 1).trimmed();
    if (word.isEmpty() || !word.front().isLetter()) return;
    std::vector<Meaning> later;
    for (const PartKind* kind : part_kinds()) {
        const auto text = [](std::string_view s) {
            return QString::fromUtf8(s.data(), static_cast<qsizetype>(s.size())).toLower();
        };
        const QString names[] = {text(kind->name), text(kind->title), text(symbol_of(kind->name).tile)};
        const bool begins =
            std::any_of(std::begin(names), std::end(names), [&](const QString& n) { return n.startsWith(word); });
        const bool holds = word.size() > 2 && std::any_of(std::begin(names), std::end(names),
                                                          [&](const QString& n) { return n.contains(word); });
        if (!begins && !holds) continue;
        std::optional<Value> value;
        if (!rest.isEmpty() && !(value = value_for(kind->name, rest.toStdString()))) continue;
        (begins ? meanings : later).push_back({std::string(kind->name), value, words_for(kind->name, rest)});
    }
    meanings.insert(meanings.end(), later.begin(), later.end());
}

} // namespace

std::vector<Meaning> meanings_of(const QString& typed) {
    const QString text = typed.trimmed();
    std::vector<Meaning> meanings;
    if (text.isEmpty()) return meanings;
    add_numbers(text, meanings);
    add_words(text, meanings);
    constexpr std::size_t most = 6;
    if (meanings.size() > most) meanings.resize(most);
    return meanings;
}

} // namespace sinewright::ui
