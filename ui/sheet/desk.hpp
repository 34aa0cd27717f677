#pragma once
/// The sheet's state between document and screen: what is drawn, what is under the pointer, what a gesture previews.
#include "ui/document/analyst.hpp"
#include "ui/document/document.hpp"
#include "ui/sheet/paint.hpp"
#include <functional>

namespace sinewright::ui {

/// What lies at a point of the sheet.
struct Hit {
    enum class On { nothing, cut, terminal, flag, value, ref, part, run };
    On on = On::nothing;
    int part = -1, port = -1; ///< terminal, value, ref, part
    int join = -1, run = -1;  ///< run
    int flag = -1;            ///< flag
    bool operator==(const Hit&) const = default;
};

class Desk {
  public:
    using Change = std::function<void(Design&)>;
    Desk(Document& of, Analyst& with) : document(of), analyst(with) {}

    Document& document;
    Analyst& analyst;
    std::function<void()> repaint;
    std::function<void(const QString&)> say; ///< a short sentence for the user

    const Design& design() const { return preview_ ? *preview_ : document.design(); } ///< as drawn
    const Drawing& drawing() const { return drawing_; }
    const Overlay& overlay() const { return overlay_; }

    /// The one function that takes over the document's state: places, routes, texts, ribbon.
    void take_over();
    void take_over_findings(); ///< margin, faults
    void forget_places() { worked_out_.clear(); }

    /// Draws the document as it would be after `change`, without changing it.
    void preview(const Change& change);
    void end_preview();

    /// One undoable step. lay_out() also writes down the places worked out for parts that had none.
    void edit(const QString& name, const Change& change, const QString& merge_key = {});
    void lay_out(const QString& name, const Change& change, const QString& merge_key = {});
    /// The same for a change that may refuse: then nothing happens and the reason comes back; empty: done.
    QString attempt(const QString& name, const std::function<QString(Design&)>& change, bool lays_out = false);
    bool try_edit(const QString& name, const std::function<QString(Design&)>& change); ///< says the reason; true: done

    Hit hit(QPointF at, double reach_px) const;
    TerminalRef terminal(const Hit& hit) const;
    const PartShape& part(int index) const { return drawing_.parts()[static_cast<std::size_t>(index)]; }
    std::vector<std::string> selected() const; ///< part references
    int selected_part() const;                 ///< index of the only selected part, −1

    Emphasis emphasis;

  private:
    void work_out_places();
    Drawing drawing_;
    Overlay overlay_;
    Places worked_out_;
    std::optional<Design> preview_;
};

QString text_of(const std::string& s);
QString named(const std::vector<std::string>& refs); ///< "R3", "4 parts": in the names of steps

} // namespace sinewright::ui
