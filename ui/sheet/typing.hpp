#pragma once
/// What letters typed over the sheet can mean: a part of some kind, with or without its value.
#include "core/design/design.hpp"
#include <QString>
#include <vector>

namespace sinewright::ui {

struct Meaning {
    std::string kind;
    std::optional<Value> value; ///< of the parameter shown beside the part
    QString words;              ///< "resistor 4k7"
};

/// Likeliest first; empty: nothing can be meant (yet).
std::vector<Meaning> meanings_of(const QString& typed);

} // namespace sinewright::ui
