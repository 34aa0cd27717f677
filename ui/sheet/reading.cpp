#include "ui/sheet/reading.hpp"
#include "core/quantity/quantity.hpp"
#include <QObject>
#include <cmath>

namespace sinewright::ui {

namespace {

constexpr std::size_t longest_code = 5; // "15n92"; longer values are rounded for reading

bool has_letter_code(std::string_view unit) { return unit == "Ω" || unit == "F" || unit == "H"; }

QString code_of(double si, std::string_view unit) {
    std::string code = letter_code(si, unit);
    if (code.size() > longest_code + 1 && si != 0 && std::isfinite(si)) { // two-byte µ counts for two
        const double scale = std::pow(10.0, 3 - std::floor(std::log10(std::fabs(si))));
        code = letter_code(std::round(si * scale) / scale, unit);
    }
    if (code.size() > longest_code + 1) return QString::fromStdString(si_text(si, unit, 4));
    return QString::fromStdString(code);
}

/// The number of an SI value as spoken: prefix and unit in words.
QString spoken_value(double si, std::string_view unit) {
    struct Prefix {
        double factor;
        const char* word;
    };
    static constexpr Prefix prefixes[] = {{1e9, "giga"},   {1e6, "mega"},   {1e3, "kilo"},  {1, ""},
                                          {1e-3, "milli"}, {1e-6, "micro"}, {1e-9, "nano"}, {1e-12, "pico"}};
    QString word = QString::fromUtf8(unit.data(), static_cast<qsizetype>(unit.size()));
    if (unit == "Ω")
        word = QObject::tr("ohm");
    else if (unit == "F")
        word = QObject::tr("farad");
    else if (unit == "H")
        word = QObject::tr("henry");
    else if (unit == "V")
        word = QObject::tr("volt");
    else if (unit == "Hz")
        word = QObject::tr("hertz");
    for (const Prefix& prefix : prefixes)
        if (std::fabs(si) >= prefix.factor * 0.9999999 || (prefix.factor == 1e-12)) {
            const QString number = QString::number(si / prefix.factor, 'g', 4);
            const QString join = *prefix.word ? QStringLiteral("-") : QString();
            return unit.empty() ? QString::number(si, 'g', 4)
                                : QStringLiteral("%1 %2%3%4").arg(number, QLatin1String(prefix.word), join, word);
        }
    return {};
}

const Value* number_of(const Part& part, std::string_view parameter) {
    const ParameterValue* value = part.find(parameter);
    return value ? std::get_if<Value>(value) : nullptr;
}

bool is_ideal(const Part& part) {
    const ParameterValue* model = part.find("model");
    const std::string* word = model ? std::get_if<std::string>(model) : nullptr;
    return part.kind == "opamp" && (!word || *word == "ideal");
}

} // namespace

const ParameterInfo* shown_parameter(const Part& part) {
    const PartKind* kind = find_part_kind(part.kind);
    // The saturation current of a diode and the sensitivity of a cell are nothing to read off a drawing.
    if (!kind || kind->main < 0 || part.kind == "diode" || part.kind == "photocell") return nullptr;
    return &kind->parameters[static_cast<std::size_t>(kind->main)];
}

Result<double> read_value(const std::string& typed, std::string_view unit) {
    auto read = parse_quantity(typed, unit);
    if (read || unit.empty() || !typed.ends_with(unit)) return read;
    auto without_unit = parse_quantity(std::string_view(typed).substr(0, typed.size() - unit.size()), unit);
    return without_unit ? without_unit : read;
}

QString value_text(const Part& part) {
    if (is_ideal(part)) return QObject::tr("ideal");
    const ParameterInfo* parameter = shown_parameter(part);
    const Value* value = parameter ? number_of(part, parameter->name) : nullptr;
    if (!value) return {};
    if (has_letter_code(parameter->unit)) return code_of(value->si, parameter->unit);
    if (parameter->unit.empty() || parameter->unit.starts_with("1/"))
        return QStringLiteral("×") + QString::number(value->si, 'g', 3);
    return QString::fromStdString(si_text(value->si, parameter->unit, 3));
}

QString terminal_text(const TerminalRef& terminal) {
    QString name = QString::fromStdString(terminal.terminal);
    if (name == QLatin1String("plus"))
        name = QStringLiteral("+");
    else if (name == QLatin1String("minus"))
        name = QStringLiteral("−");
    return QString::fromStdString(terminal.part) + QLatin1Char(' ') + name;
}

QString spoken_part(const Part& part) {
    const PartKind* kind = find_part_kind(part.kind);
    QStringList words{QString::fromStdString(part.ref),
                      kind ? QString::fromUtf8(kind->title.data(), static_cast<qsizetype>(kind->title.size()))
                           : QString::fromStdString(part.kind)};
    const ParameterInfo* parameter = shown_parameter(part);
    const Value* value = parameter ? number_of(part, parameter->name) : nullptr;
    if (is_ideal(part))
        words << QObject::tr("ideal");
    else if (value)
        words << spoken_value(value->si, parameter->unit);
    QStringList ends;
    for (const TerminalNet& terminal : part.terminals) {
        const QString net = !terminal.net                 ? QObject::tr("nothing")
                            : *terminal.net == ground_net ? QObject::tr("ground")
                                                          : QString::fromStdString(*terminal.net);
        ends << (part.terminals.size() == 2
                     ? net
                     : QObject::tr("%1 to %2")
                           .arg(terminal_text({part.ref, terminal.terminal}).section(QLatin1Char(' '), 1), net));
    }
    if (ends.size() == 2)
        words << QObject::tr("between %1 and %2").arg(ends[0], ends[1]);
    else
        words << ends;
    return words.join(QStringLiteral(", "));
}

} // namespace sinewright::ui
