#include "core/parts/resolve.hpp"
#include <algorithm>

namespace sinewright {

PartValues resolve(const PartKind& kind, const Part& part, double temperature_k) {
    PartValues values;
    values.temperature_k = temperature_k;
    const std::size_t count = kind.parameters.size();
    values.numbers.resize(count);
    values.words.assign(count, -1);
    values.given.assign(count, false);
    for (std::size_t k = 0; k < count; ++k) {
        values.numbers[k] = kind.parameters[k].fallback;
        if (!kind.parameters[k].choices.empty()) values.words[k] = 0;
    }
    for (const Parameter& given : part.parameters) {
        const int k = kind.parameter(given.name);
        if (k < 0) continue;
        values.given[k] = true;
        if (const auto* number = std::get_if<Value>(&given.value)) {
            values.numbers[k] = number->si;
        } else {
            const auto& choices = kind.parameters[k].choices;
            const auto found = std::find(choices.begin(), choices.end(), std::get<std::string>(given.value));
            values.words[k] = static_cast<int>(found - choices.begin());
        }
    }
    if (part.tempco && kind.tempco_applies && kind.main >= 0)
        values.numbers[kind.main] *= 1 + part.tempco->si * (temperature_k - 298.15);
    return values;
}

} // namespace sinewright
