#include "tests/core/parts/recorded_part.hpp"
#include "core/parts/resolve.hpp"
#include <catch2/catch.hpp>
#include <cmath>

namespace sinewright::testing {

Part part_with(std::string_view kind, const Settings& settings) {
    Part part;
    part.ref = "X1";
    part.kind = kind;
    for (const Setting& setting : settings) {
        if (const double* number = std::get_if<double>(&setting.value))
            part.parameters.push_back({setting.name, Value{*number, ""}});
        else
            part.parameters.push_back({setting.name, std::get<std::string>(setting.value)});
    }
    return part;
}

RecordedPart record(std::string_view kind_name, const Settings& settings, double temperature_k) {
    const PartKind* kind = find_part_kind(kind_name);
    REQUIRE(kind);
    for (const Setting& setting : settings) {
        INFO(setting.name);
        REQUIRE(kind->parameter(setting.name) >= 0);
    }
    return RecordedPart(*kind, resolve(*kind, part_with(kind_name, settings), temperature_k));
}

std::string complaint(std::string_view kind_name, const Settings& settings) {
    const PartKind& kind = *find_part_kind(kind_name);
    return kind.check(resolve(kind, part_with(kind_name, settings), 298.15));
}

std::vector<double> RecordedElement::at(const std::vector<double>& x) const {
    std::vector<double> u;
    for (const Combination& control : controls) {
        double value = 0;
        for (const auto& [index, weight] : control)
            if (index >= 0) value += weight * x[index];
        u.push_back(value);
    }
    return u;
}

RecordedPart::RecordedPart(const PartKind& kind, const PartValues& values) {
    for (const TerminalInfo& terminal : kind.terminals) add(terminal.name, 'n', 1, 0);
    kind.stamp(values, *this);
}

int RecordedPart::add(std::string_view name, char type, double typical, double start) {
    unknowns.push_back({std::string(name), type, typical, start});
    return size() - 1;
}

void RecordedPart::write(std::vector<Entry>& entries, int row, int column, double value) {
    REQUIRE(std::isfinite(value));
    REQUIRE((row >= -1 && row < size() && column >= -1 && column < size()));
    if (row >= 0 && column >= 0) entries.push_back({row, column, value});
}

void RecordedPart::nonlinear(LawPtr law, std::vector<Combination> controls, std::vector<Combination> injections) {
    REQUIRE(static_cast<int>(controls.size()) == law->controls());
    REQUIRE(static_cast<int>(injections.size()) == law->outputs());
    elements.push_back({std::move(law), std::move(controls), std::move(injections)});
}

bool RecordedPart::has_unknown(std::string_view name) const {
    for (const RecordedUnknown& unknown : unknowns)
        if (unknown.name == name) return true;
    return false;
}

int RecordedPart::index(std::string_view name) const {
    INFO("unknown " << name);
    REQUIRE(has_unknown(name));
    int k = 0;
    while (unknowns[k].name != name) ++k;
    return k;
}

std::vector<double> RecordedPart::at(const std::map<std::string, double>& values) const {
    std::vector<double> x;
    for (const RecordedUnknown& unknown : unknowns) x.push_back(unknown.start);
    for (const auto& [name, value] : values) x[index(name)] = value;
    return x;
}

namespace {

struct OneSample {
    std::vector<double> i, q, di, dq;
    OneSample(const RecordedElement& element, const std::vector<double>& x) {
        const int controls = element.law->controls(), outputs = element.law->outputs();
        const std::vector<double> u = element.at(x);
        const double unwritten = std::nan("");
        i.assign(outputs, unwritten), di.assign(outputs * controls, unwritten);
        q.assign(outputs, 0), dq.assign(outputs * controls, 0);
        const bool stores = element.law->stores_charge();
        element.law->evaluate(
            {1, u.data(), i.data(), di.data(), stores ? q.data() : nullptr, stores ? dq.data() : nullptr});
    }
};

} // namespace

std::vector<double> RecordedPart::f(const std::vector<double>& x) const {
    std::vector<double> y(size());
    for (const Entry& e : G_) y[e.row] += e.value * x[e.column];
    for (const Entry& e : s_) y[e.row] -= e.value;
    for (const RecordedElement& element : elements) {
        const OneSample sample(element, x);
        for (std::size_t o = 0; o < element.injections.size(); ++o)
            for (const auto& [row, weight] : element.injections[o])
                if (row >= 0) y[row] += weight * sample.i[o];
    }
    return y;
}

std::vector<double> RecordedPart::q(const std::vector<double>& x) const {
    std::vector<double> y(size());
    for (const Entry& e : C_) y[e.row] += e.value * x[e.column];
    for (const RecordedElement& element : elements) {
        const OneSample sample(element, x);
        for (std::size_t o = 0; o < element.injections.size(); ++o)
            for (const auto& [row, weight] : element.injections[o])
                if (row >= 0) y[row] += weight * sample.q[o];
    }
    return y;
}

namespace {

void add_slopes(const RecordedElement& element, const std::vector<double>& slope, Square& jacobian) {
    const std::size_t controls = element.controls.size();
    for (std::size_t o = 0; o < element.injections.size(); ++o)
        for (std::size_t c = 0; c < controls; ++c)
            for (const auto& [row, out] : element.injections[o])
                for (const auto& [column, in] : element.controls[c])
                    if (row >= 0 && column >= 0) jacobian(row, column) += out * slope[o * controls + c] * in;
}

} // namespace

Square RecordedPart::df(const std::vector<double>& x) const {
    Square jacobian(size());
    for (const Entry& e : G_) jacobian(e.row, e.column) += e.value;
    for (const RecordedElement& element : elements) add_slopes(element, OneSample(element, x).di, jacobian);
    return jacobian;
}

Square RecordedPart::dq(const std::vector<double>& x) const {
    Square jacobian(size());
    for (const Entry& e : C_) jacobian(e.row, e.column) += e.value;
    for (const RecordedElement& element : elements) add_slopes(element, OneSample(element, x).dq, jacobian);
    return jacobian;
}

double RecordedPart::rate(std::string_view state, const std::vector<double>& x) const {
    const int z = index(state);
    const double capacity = dq(x)(z, z);
    REQUIRE(capacity != 0);
    return -f(x)[z] / capacity;
}

double cosine_harmonic(const std::vector<double>& samples, int order) {
    const double count = static_cast<double>(samples.size());
    double sum = 0;
    for (std::size_t k = 0; k < samples.size(); ++k)
        sum += samples[k] * std::cos(2 * M_PI * order * static_cast<double>(k) / count);
    return 2 * sum / count;
}

} // namespace sinewright::testing
