#include "ui/sheet/drawing.hpp"
#include "ui/sheet/obstacles.hpp"
#include "ui/sheet/reading.hpp"
#include <algorithm>

namespace sinewright::ui {

namespace {

constexpr double ref_px = 12, value_px = 14, gap_px = 6, between_px = 4, line_px = 17;

enum class Side { above, below, right, left };

std::vector<Side> sides_to_try(const PartShape& part) {
    if (part.symbol->has_face) return {Side::below, Side::above, Side::right, Side::left};
    const bool upright = std::any_of(part.ports.begin(), part.ports.end(),
                                     [](const PlacedPort& p) { return p.out == Way::up || p.out == Way::down; }) &&
                         part.ports.size() < 3;
    if (upright) return {Side::right, Side::left, Side::above, Side::below};
    return {Side::above, Side::below, Side::right, Side::left};
}

/// The text set at one side: in one line above and below, in two beside. Empty texts take no room.
PartText set_at(PartText text, const QRectF& body, Side side, double shift, const QFontMetricsF& ref_font,
                const QFontMetricsF& value_font) {
    const double ref_width = ref_font.horizontalAdvance(text.ref);
    const double value_width = text.value.isEmpty() ? 0 : value_font.horizontalAdvance(text.value);
    const bool beside = side == Side::right || side == Side::left;
    if (beside) {
        const double height = text.value.isEmpty() ? line_px : 2 * line_px;
        const double top = body.center().y() - height / 2;
        const double left = body.right() + gap_px;
        const auto x = [&](double width) { return side == Side::right ? left : body.left() - gap_px - width; };
        text.ref_at = {x(ref_width), top + 12};
        text.value_at = {x(value_width), top + line_px + 13};
    } else {
        const double width = ref_width + (text.value.isEmpty() ? 0 : between_px + value_width);
        const double left = body.center().x() - width / 2 + shift;
        const double base = side == Side::above ? body.top() - gap_px - 3 : body.bottom() + gap_px + 12;
        text.ref_at = {left, base};
        text.value_at = {left + ref_width + between_px, base};
    }
    text.ref_box = {text.ref_at.x(), text.ref_at.y() - 11, ref_width, 14};
    text.value_box =
        text.value.isEmpty() ? QRectF() : QRectF(text.value_at.x(), text.value_at.y() - 12, value_width, 16);
    return text;
}

} // namespace

std::vector<PartText> place_texts(const Design& design, const Drawing& drawing, const Theme& theme) {
    const QFontMetricsF ref_font(theme.font(ref_px)), value_font(theme.font(value_px, QFont::DemiBold));
    Obstacles obstacles(drawing);
    std::vector<PartText> texts;
    for (std::size_t p = 0; p < design.parts.size(); ++p) {
        const PartShape& part = drawing.parts()[p];
        PartText blank;
        blank.ref = QString::fromStdString(design.parts[p].ref);
        blank.value = value_text(design.parts[p]);
        std::optional<PartText> best;
        double least = 0;
        for (const double shift : {0.0, -26.0, 26.0})
            for (const Side side : sides_to_try(part)) {
                if (shift != 0 && (side == Side::left || side == Side::right)) continue;
                if (best && least == 0) break;
                const PartText text = set_at(blank, part.body, side, shift, ref_font, value_font);
                const double crossed = obstacles.overlap(text.ref_box) + obstacles.overlap(text.value_box);
                if (!best || crossed < least) best = text, least = crossed;
            }
        obstacles.add(best->ref_box);
        if (!best->value.isEmpty()) obstacles.add(best->value_box);
        texts.push_back(*best);
    }
    return texts;
}

} // namespace sinewright::ui
