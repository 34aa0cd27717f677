/// What every part kind must keep, whoever wrote it: run through by being registered.
#include "core/parts/resolve.hpp"
#include "tests/core/parts/parameter_sets.hpp"
#include <catch2/catch.hpp>
#include <cmath>
#include <random>
#include <set>

using namespace sinewright;
using namespace sinewright::testing;

namespace {

constexpr int points_per_set = 24;

std::vector<double> random_point(const RecordedPart& part, const ParameterSet& set, std::mt19937& random) {
    std::uniform_real_distribution<double> either(-1, 1);
    std::vector<double> x;
    for (const RecordedUnknown& unknown : part.unknowns) {
        const double r = either(random);
        switch (unknown.type) {
        case 's':
            x.push_back(unknown.start + set.state_span * unknown.typical * (0.25 + 0.75 * r));
            break;
        case 'i':
            x.push_back(unknown.typical * r);
            break;
        default:
            x.push_back(set.span_v * r);
        }
    }
    return x;
}

struct Slope {
    double value, error;
};

/// Central differences with Richardson extrapolation over halved steps (Ridders 1982); the smallest estimated error
/// wins.
template <class Function> Slope ridders(Function value, double h) {
    constexpr int rows = 8;
    double table[rows][rows];
    Slope best{0, INFINITY};
    for (int i = 0; i < rows; ++i, h /= 2) {
        table[i][0] = (value(h) - value(-h)) / (2 * h);
        double factor = 4;
        for (int j = 1; j <= i; ++j, factor *= 4) {
            table[i][j] = table[i][j - 1] + (table[i][j - 1] - table[i - 1][j - 1]) / (factor - 1);
            const double error =
                std::max(std::abs(table[i][j] - table[i][j - 1]), std::abs(table[i][j] - table[i - 1][j - 1]));
            if (error < best.error) best = {table[i][j], error};
        }
    }
    return best;
}

struct Evaluated {
    std::vector<double> i, q, di, dq;
};

Evaluated evaluated(const Law& law, const std::vector<double>& u, int count, bool derivatives) {
    const double unwritten = std::nan("");
    const std::size_t values = law.outputs() * count, slopes = values * law.controls();
    Evaluated y{std::vector(values, unwritten), std::vector(values, law.stores_charge() ? unwritten : 0),
                std::vector(slopes, unwritten), std::vector(slopes, law.stores_charge() ? unwritten : 0)};
    LawSamples samples{count, u.data(), y.i.data(), nullptr, nullptr, nullptr};
    if (derivatives) samples.di = y.di.data();
    if (law.stores_charge()) samples.q = y.q.data(), samples.dq = derivatives ? y.dq.data() : nullptr;
    law.evaluate(samples);
    return y;
}

/// Runs `check(part, x, set)` at random points of every set of every registered kind.
template <class Check> void everywhere(Check check) {
    std::mt19937 random(20);
    for (const ParameterSet& set : parameter_sets()) {
        const RecordedPart part = record(set.kind, set.settings);
        for (int k = 0; k < points_per_set; ++k) {
            INFO(set.kind << " set " << &set - parameter_sets().data() << " point " << k);
            check(part, random_point(part, set, random), set);
        }
    }
}

} // namespace

TEST_CASE("every registered kind is tried with every parameter and every word it knows", "[parts]") {
    for (const PartKind* kind : part_kinds()) {
        std::set<std::string> seen;
        for (const ParameterSet& set : parameter_sets())
            if (set.kind == kind->name)
                for (const Setting& setting : set.settings) {
                    seen.insert(setting.name);
                    if (const auto* word = std::get_if<std::string>(&setting.value)) seen.insert(*word);
                }
        for (const ParameterInfo& info : kind->parameters) {
            INFO(kind->name << "." << info.name);
            CHECK(seen.contains(std::string(info.name)));
            for (const std::string_view word : info.choices) CHECK(seen.contains(std::string(word)));
        }
    }
}

TEST_CASE("every kind is described for people: title, terminals, units and one sentence a parameter", "[parts]") {
    std::set<std::string_view> names;
    for (const PartKind* kind : part_kinds()) {
        INFO(kind->name);
        CHECK(names.insert(kind->name).second);
        CHECK(find_part_kind(kind->name) == kind);
        CHECK(!kind->title.empty());
        CHECK(!kind->ref_prefix.empty());
        REQUIRE(kind->main < static_cast<int>(kind->parameters.size()));
        for (std::size_t k = 0; k < kind->terminals.size(); ++k) {
            CHECK(!kind->terminals[k].meaning.empty());
            CHECK(kind->terminal(kind->terminals[k].name) == static_cast<int>(k));
        }
        for (std::size_t k = 0; k < kind->parameters.size(); ++k) {
            const ParameterInfo& info = kind->parameters[k];
            INFO(info.name);
            CHECK(kind->parameter(info.name) == static_cast<int>(k));
            CHECK(info.help.ends_with('.'));
            CHECK_FALSE((info.required && !std::isnan(info.fallback)));
        }
        CHECK(kind->parameter("no such parameter") == -1);
        CHECK(kind->terminal("no such terminal") == -1);
    }
    CHECK(find_part_kind("no such kind") == nullptr);
}

TEST_CASE("what a law says of its derivatives is what differences of its values say", "[parts]") {
    int sharp = 0, all = 0;
    everywhere([&](const RecordedPart& part, const std::vector<double>& x, const ParameterSet&) {
        for (const RecordedElement& element : part.elements) {
            const Law& law = *element.law;
            const std::vector<double> u = element.at(x);
            const Evaluated here = evaluated(law, u, 1, true);
            for (int c = 0; c < law.controls(); ++c)
                for (int o = 0; o < law.outputs(); ++o)
                    for (const bool charge : {false, true}) {
                        if (charge && !law.stores_charge()) continue;
                        const auto value = [&](double shift) {
                            std::vector<double> moved = u;
                            moved[c] += shift;
                            const Evaluated there = evaluated(law, moved, 1, false);
                            return charge ? there.q[o] : there.i[o];
                        };
                        const double step = std::max(std::abs(u[c]), 0.1) * 0.03;
                        const Slope differences = ridders(value, step);
                        const double said = (charge ? here.dq : here.di)[o * law.controls() + c];
                        // Differences lose what rounding of the values takes: 1e-16 of the value over the step.
                        const double value_size = std::abs(value(step)) + std::abs(value(-step));
                        const double bound = 1e-8 * std::abs(said) + 2e-14 * value_size / step;
                        INFO("control " << c << " = " << u[c] << ", output " << o << (charge ? ", charge" : ""));
                        ++all;
                        // At a corner (clip, pinch-off) differences do not converge; they then say so themselves.
                        if (differences.error > bound) {
                            CHECK(std::abs(said - differences.value) <= 2 * (std::abs(said) + differences.error));
                            continue;
                        }
                        ++sharp;
                        CHECK(std::abs(said - differences.value) <= bound + differences.error);
                    }
        }
    });
    CHECK(sharp >= 0.95 * all);
}

TEST_CASE("a law gives the same numbers for one sample, many samples, with and without derivatives", "[parts]") {
    everywhere([&](const RecordedPart& part, const std::vector<double>& x, const ParameterSet&) {
        for (const RecordedElement& element : part.elements) {
            const Law& law = *element.law;
            const std::vector<double> u = element.at(x);
            constexpr int count = 3;
            std::vector<double> many;
            for (const double control : u)
                for (int k = 0; k < count; ++k) many.push_back(control * (1 - 0.1 * k));
            const Evaluated all = evaluated(law, many, count, true), values = evaluated(law, many, count, false);
            for (int k = 0; k < count; ++k) {
                std::vector<double> own;
                for (int c = 0; c < law.controls(); ++c) own.push_back(many[c * count + k]);
                const Evaluated one = evaluated(law, own, 1, true);
                for (int o = 0; o < law.outputs(); ++o) {
                    CHECK(all.i[o * count + k] == one.i[o]);
                    CHECK(all.q[o * count + k] == one.q[o]);
                    CHECK(values.i[o * count + k] == Approx(one.i[o]).epsilon(1e-14));
                    CHECK(values.q[o * count + k] == Approx(one.q[o]).epsilon(1e-14));
                    for (int c = 0; c < law.controls(); ++c) {
                        const int slope = o * law.controls() + c;
                        CHECK(all.di[slope * count + k] == one.di[slope]);
                        CHECK(all.dq[slope * count + k] == one.dq[slope]);
                    }
                }
            }
        }
    });
}

TEST_CASE("currents and charges of parts without a hidden joint to gnd add up to zero", "[parts]") {
    // These drive or load gnd inside; every other kind must keep what flows in.
    const std::set<std::string> joined_to_ground{"opamp", "limiter", "multiplier", "servo"};
    everywhere([&](const RecordedPart& part, const std::vector<double>& x, const ParameterSet& set) {
        if (joined_to_ground.contains(set.kind)) return;
        const std::vector<double> f = part.f(x), q = part.q(x);
        double current = 0, currents = 0, charge = 0, charges = 0;
        for (int k = 0; k < part.size(); ++k) {
            if (part.unknowns[k].type != 'n' && part.unknowns[k].type != 'v') continue;
            current += f[k], currents += std::abs(f[k]);
            charge += q[k], charges += std::abs(q[k]);
        }
        CHECK(std::abs(current) <= 1e-15 * currents);
        CHECK(std::abs(charge) <= 1e-15 * charges);

        // Lifting all its nets together changes nothing.
        std::vector<double> lifted = x;
        for (int k = 0; k < part.size(); ++k)
            if (part.unknowns[k].type == 'n' || part.unknowns[k].type == 'v') lifted[k] += 0.5;
        const std::vector<double> f_lifted = part.f(lifted), q_lifted = part.q(lifted);
        for (int k = 0; k < part.size(); ++k) {
            // Bound: 1e-15 V of rounding in the lifted voltages times the steepest law (a knee, 1/mΩ).
            CHECK(f_lifted[k] == Approx(f[k]).epsilon(1e-11).margin(1e-12));
            CHECK(q_lifted[k] == Approx(q[k]).epsilon(1e-11).margin(1e-18));
        }
    });
}

TEST_CASE("every unknown a part adds has an equation that something enters", "[parts]") {
    everywhere([&](const RecordedPart& part, const std::vector<double>& x, const ParameterSet&) {
        const Square df = part.df(x), dq = part.dq(x);
        for (int k = 0; k < part.size(); ++k) {
            if (part.unknowns[k].type == 'n') continue;
            bool row = false, column = false;
            for (int m = 0; m < part.size(); ++m) {
                row = row || df(k, m) != 0 || dq(k, m) != 0;
                column = column || df(m, k) != 0 || dq(m, k) != 0;
            }
            INFO(part.unknowns[k].name);
            CHECK(row);
            CHECK(column);
            CHECK(part.unknowns[k].typical > 0);
            CHECK(std::isfinite(part.unknowns[k].start));
        }
    });
}

TEST_CASE("no part gives anything but finite numbers when an iteration strays far off", "[parts]") {
    for (const ParameterSet& set : parameter_sets()) {
        const RecordedPart part = record(set.kind, set.settings);
        for (const double far : {-1e4, -300.0, 0.0, 300.0, 1e4}) {
            for (int strayed = 0; strayed < part.size(); ++strayed) {
                std::vector<double> x = part.at({});
                x[strayed] = far;
                INFO(set.kind << ": " << part.unknowns[strayed].name << " = " << far);
                const Square df = part.df(x), dq = part.dq(x);
                for (const auto* numbers : {&df.entries, &dq.entries})
                    for (const double y : *numbers) CHECK(std::isfinite(y));
                for (const double y : part.f(x)) CHECK(std::isfinite(y));
                for (const double y : part.q(x)) CHECK(std::isfinite(y));
            }
        }
    }
}

TEST_CASE("temperature coefficient moves the main value of every kind it applies to, and no other value", "[parts]") {
    constexpr double tempco_per_k = 1e-3, warm_k = 298.15 + 40;
    for (const ParameterSet& set : parameter_sets()) {
        const PartKind& kind = *find_part_kind(set.kind);
        Part part = part_with(set.kind, set.settings);
        const PartValues plain = resolve(kind, part, warm_k);
        part.tempco = Value{tempco_per_k, "1000ppm"};
        const PartValues moved = resolve(kind, part, warm_k), at_25 = resolve(kind, part, 298.15);
        for (std::size_t k = 0; k < kind.parameters.size(); ++k) {
            const int parameter = static_cast<int>(k);
            INFO(kind.name << "." << kind.parameters[k].name);
            CHECK(moved.has(parameter) == plain.has(parameter));
            if (!plain.has(parameter)) continue;
            const bool moves = parameter == kind.main && kind.tempco_applies;
            CHECK(moved[parameter] == Approx(plain[parameter] * (moves ? 1.04 : 1)).epsilon(1e-14)); // contract §3
            CHECK(at_25[parameter] == plain[parameter]);
        }
    }
}
