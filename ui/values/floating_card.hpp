#pragma once
/// A card that lies over the sheet in one of its corners; it can be dragged by its head, and folded.
#include <QFrame>

class QLabel;
class QToolButton;
class QVBoxLayout;

namespace sinewright::ui {

class FloatingCard : public QFrame {
    Q_OBJECT
  public:
    /// @param corner  of the parent that the card keeps its distance to when the parent is resized
    FloatingCard(const QString& name, Qt::Corner corner, QWidget* parent);
    void set_title(const QString& title);
    QString title() const;
    /// Shows `content` under the head, in place of what was there; takes it over.
    void set_content(QWidget* content);
    bool folded() const { return folded_; }
    void set_folded(bool folded);
    /// Goes to another corner, unless it was put somewhere by hand.
    void move_to(Qt::Corner corner);
    void settle(); ///< takes the size its content wants and its place in the corner

  signals:
    void folded_by_hand(bool folded);

  protected:
    bool eventFilter(QObject* watched, QEvent* event) override;
    bool event(QEvent* event) override;

  private:
    bool drag_head(QEvent* event);
    QRect allowed() const;
    QPoint corner_point(const QRect& of) const;
    Qt::Corner corner_;
    QWidget* head_;
    QLabel* title_;
    QToolButton* fold_;
    QVBoxLayout* column_;
    QWidget* content_ = nullptr;
    QPoint offset_; ///< of the card's corner from the parent's, as dragged by hand
    QPoint grip_;   ///< where the head was taken hold of
    bool dragging_ = false, folded_ = false, settling_ = false;
};

} // namespace sinewright::ui
