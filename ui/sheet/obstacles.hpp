#pragma once
/// What a text must not lie on, found fast by where it lies.
#include <QRectF>
#include <map>
#include <vector>

namespace sinewright::ui {

class Drawing;

class Obstacles {
  public:
    /// Bodies, leads, ground symbols, names and joins of a drawing.
    explicit Obstacles(const Drawing& drawing);
    void add(const QRectF& rect);
    /// Area of `box` that lies on something.
    double overlap(const QRectF& box) const;

  private:
    std::map<std::pair<int, int>, std::vector<QRectF>> tiles_;
};

} // namespace sinewright::ui
