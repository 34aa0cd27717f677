#pragma once
/// The sheet: the drawing of the loop, and everything done on it. The document stays the only truth; what is drawn is
/// derived from it.
#include "ui/sheet/gestures.hpp"
#include "ui/sheet/inline_field.hpp"
#include <QTimer>
#include <QWidget>

class QMenu;

namespace sinewright::ui {

inline constexpr char kind_mime[] = "application/x-sinewright-kind";   ///< a part kind's name, dragged from the shelf
inline constexpr char parts_mime[] = "application/x-sinewright-parts"; ///< parts as a design file, on the clipboard

class SheetView : public QWidget {
    Q_OBJECT
  public:
    SheetView(Document& document, Analyst& analyst, QWidget* parent = nullptr);
    ~SheetView() override;

    void zoom_to_fit();
    /// A card that lies over the sheet: a fitted drawing keeps out from under it.
    void keep_clear(const QRect& card);
    void zoom_by(double factor, QPointF about); ///< `about` in widget coordinates
    double zoom() const { return zoom_; }
    void set_line_px(double px) { line_px_ = px, update(); } ///< 3 for presentation

    void arm_kind(const QString& kind); ///< the next click drops such a part; empty: none
    QString armed_kind() const { return armed_; }
    void drop_typed(const QString& text); ///< drops what the text most likely means at a free place in view
    void focus_part(const QString& ref);  ///< selects it and brings it into view

    QString part_in_words(int part) const; ///< "R3, resistor, 18 kilo-ohm, between out and n2"
    bool is_selected(int part) const;
    const Drawing& drawing() const { return desk_.drawing(); }
    const Overlay& overlay() const { return desk_.overlay(); }
    QPointF to_view(QPointF sheet) const { return (sheet - origin_) * zoom_; }
    QPointF to_sheet(QPointF view) const { return view / zoom_ + origin_; }

    // What menus and keys do; each is one undo step and does nothing where it does not apply.
    void edit_value(int part);
    void rename_part_at(int part);
    void rename_net_at(const std::string& net, QPointF at);
    void turn_selection(int quarters);
    void flip_selection(bool upside_down);
    void delete_selection();
    void duplicate_selection();
    void copy_selection();
    void cut_selection();
    void paste();
    void select_all();

  signals:
    void armed_changed(const QString& kind);
    void message(const QString& text);

  protected:
    void paintEvent(QPaintEvent*) override;
    void resizeEvent(QResizeEvent*) override;
    void mousePressEvent(QMouseEvent*) override;
    void mouseMoveEvent(QMouseEvent*) override;
    void mouseReleaseEvent(QMouseEvent*) override;
    void mouseDoubleClickEvent(QMouseEvent*) override;
    void leaveEvent(QEvent*) override;
    void focusInEvent(QFocusEvent*) override;
    void wheelEvent(QWheelEvent*) override;
    void keyPressEvent(QKeyEvent*) override;
    void contextMenuEvent(QContextMenuEvent*) override;
    void dragEnterEvent(QDragEnterEvent*) override;
    void dragMoveEvent(QDragMoveEvent*) override;
    void dragLeaveEvent(QDragLeaveEvent*) override;
    void dropEvent(QDropEvent*) override;
    bool event(QEvent*) override;

  private:
    void fit_into(const QRectF& room);
    bool covers_drawing(const QRectF& card) const;
    QRect card_;
    void begin(GesturePtr gesture);
    void end_gesture(bool abandon);
    bool finish_gesture(QPointF at, Qt::KeyboardModifiers modifiers);
    bool back_to_rest();
    void take_over_document();
    void press_on(const Hit& hit, QPointF at, Qt::KeyboardModifiers modifiers);
    void click_on(const Hit& hit, Qt::KeyboardModifiers modifiers);
    void drag_from(const Hit& hit);
    void offer_at_terminal(const Hit& hit);
    void open_typed(const QString& first);
    QPoint typing_place() const;
    void drop_meaning(const std::string& kind, const std::optional<Value>& value, QPointF at);
    bool gesture_key(QKeyEvent& event);
    bool alt_key(int key);
    bool control_key(QKeyEvent& event);
    bool plain_key(QKeyEvent& event);
    void walk(Way way);
    void step_values(int part, int steps, bool fine);
    void split_at(int join, int run);
    void hover(QPointF at);
    void describe();
    Cell free_cell_near(QPointF at, std::string_view kind) const;
    void fill_menu(QMenu& menu, const Hit& hit, QPointF at);
    void fill_part_menu(QMenu& menu, const Hit& hit);
    void fill_terminal_menu(QMenu& menu, const Hit& hit);
    void fill_join_menu(QMenu& menu, const Hit& hit, QPointF at);
    void fill_empty_menu(QMenu& menu, QPointF at);

    Desk desk_;
    GesturePtr gesture_;
    bool gesture_acts_ = false; ///< the change that comes is its own
    InlineField* field_;
    QTimer wheel_rest_; ///< closes the undo step of a wheel turn
    QString armed_;
    Hit hovered_, pressed_;
    QPointF pressed_at_, last_view_;
    bool focus_by_key_ = false, panning_ = false, pressed_was_selected_ = false, fitted_ = false;
    int wheel_left_ = 0; ///< eighths of a degree not yet stepped
    double zoom_ = 1, line_px_ = 2;
    QPointF origin_;
};

} // namespace sinewright::ui
