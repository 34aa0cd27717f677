#include "core/design/utf8.hpp"

namespace sinewright {

std::optional<long> line_not_utf8(std::string_view text) {
    long line = 1;
    for (std::size_t k = 0; k < text.size();) {
        const auto byte = [&](std::size_t place) { return static_cast<unsigned char>(text[place]); };
        const unsigned first = byte(k);
        line += first == '\n';
        if (first < 0x80) {
            ++k;
            continue;
        }
        const std::size_t length = first >= 0xf0 ? 4 : first >= 0xe0 ? 3 : 2;
        if (first < 0xc2 || first > 0xf4 || k + length > text.size()) return line;
        for (std::size_t j = 1; j < length; ++j)
            if ((byte(k + j) & 0xc0) != 0x80) return line;
        const unsigned second = byte(k + 1);
        if ((first == 0xe0 && second < 0xa0) || (first == 0xed && second > 0x9f) || (first == 0xf0 && second < 0x90) ||
            (first == 0xf4 && second > 0x8f))
            return line;
        k += length;
    }
    return std::nullopt;
}

} // namespace sinewright
