#pragma once
/// Everything the sheet shows of a design, worked out once when the design changes; painting only paints.
#include "ui/sheet/part_shape.hpp"
#include <QFontMetricsF>

namespace sinewright::ui {

/// A part's reference and value, set where nothing is crossed.
struct PartText {
    QString ref, value;
    QPointF ref_at, value_at; ///< baselines, left ends
    QRectF ref_box, value_box;
};

/// What a join's pin stands for: a part's terminal or a name set on the sheet.
struct JoinEnd {
    int part = -1, port = -1;
    int flag = -1;
};

/// A drawn tree: a net's, or the short run to a named stub.
struct Join {
    std::string net;
    std::vector<JoinEnd> ends; ///< in the order of the route's pins
    Route route;
    std::vector<QPainterPath> runs; ///< one a run, corners rounded
    std::vector<QPointF> dots;
};

/// A net's name on the sheet; the output's has a ring.
struct Flag {
    std::string net;
    Cell at;
    bool output = false;
    int label = -1; ///< index into Design::labels; −1: set where there is room
    std::optional<TerminalRef> stub_of;
    QPointF text_at;
    QRectF text_box;
};

/// A terminal on gnd.
struct Earth {
    int part = -1, port = -1;
    Cell at;
    Way way = Way::down;
    QRectF box() const;
};

class Drawing {
  public:
    void take_over(const Design& design, const Places& worked_out, const Theme& theme);

    const std::vector<PartShape>& parts() const { return parts_; } ///< in the design's order
    const std::vector<PartText>& texts() const { return texts_; }
    const std::vector<Join>& joins() const { return joins_; }
    const std::vector<Flag>& flags() const { return flags_; }
    const std::vector<Earth>& earths() const { return earths_; }
    QRectF extent() const { return extent_; }
    int part_index(std::string_view ref) const;
    /// The join that ends at a terminal, and which of its pins that is; (−1, −1): none is drawn there.
    std::pair<int, int> join_at(int part, int port) const;
    const Router& router() const { return router_; }

  private:
    void set_flags(const Design& design, const Theme& theme);
    Cell room_for_output(const std::string& net) const;
    void set_joins();
    void draw_joins();
    void set_texts(const Design& design, const Theme& theme);

    std::vector<PartShape> parts_;
    std::vector<PartText> texts_;
    std::vector<Join> joins_;
    std::vector<Flag> flags_;
    std::vector<Earth> earths_;
    QRectF extent_;
    Router router_;
};

/// A run of horizontal and vertical pieces with rounded corners.
QPainterPath rounded(const std::vector<QPointF>& corners, double radius);
std::vector<QPointF> sheet_points(const std::vector<Cell>& cells);

/// Sets every part's reference and value in the first of four places that is free.
std::vector<PartText> place_texts(const Design& design, const Drawing& drawing, const Theme& theme);

} // namespace sinewright::ui
