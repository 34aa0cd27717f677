#pragma once
/// What the results lay over the drawing: the ribbon of the loop, the cut with its margin, marks at faults.
#include "core/review/findings.hpp"
#include "ui/sheet/drawing.hpp"
#include <set>

namespace sinewright::ui {

struct CutMark {
    TerminalRef terminal;
    bool chosen = false; ///< by the program, the design names none
    QPointF at;
    QPointF along; ///< unit vector of the join there
    QRectF chip;
    QString words;  ///< in the chip
    QString detail; ///< a sentence for the pointer and the screen reader
    bool stale = false;
};

struct RibbonArrow {
    QPointF at;
    double degrees = 0;
};

struct FaultMark {
    QPointF badge;
    QString sentence;
    bool open_end = false; ///< an end not joined yet: a ring, no alarm while a drawing grows
};

struct Overlay {
    QPainterPath ribbon;
    std::vector<RibbonArrow> arrows;
    std::optional<CutMark> cut;
    std::vector<FaultMark> faults;
    std::set<int> faulty_parts; ///< indices into Drawing::parts
    std::set<std::string> faulty_nets;
};

/// @param findings  null before the first results
/// @param stale     the findings belong to an older drawing
Overlay overlay_of(const Design& design, const Drawing& drawing, const Findings* findings, bool stale,
                   const Theme& theme);

/// The point and direction of a cut at a terminal.
std::pair<QPointF, QPointF> cut_point(const Drawing& drawing, int part, int port);

} // namespace sinewright::ui
