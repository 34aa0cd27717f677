#pragma once
/// Whether bytes are UTF-8.
#include <optional>
#include <string_view>

namespace sinewright {

/// The line (from 1) of the first byte that is not UTF-8; nothing when all are. Source: RFC 3629: no surrogates,
/// nothing overlong, nothing beyond U+10FFFF.
std::optional<long> line_not_utf8(std::string_view text);

} // namespace sinewright
