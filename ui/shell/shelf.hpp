#pragma once
/// Under the sheet: a field to type a value, and one tile per part kind to click or drag.
#include <QAbstractButton>
#include <vector>

class QLineEdit;

namespace sinewright::ui {

/// A part kind's symbol with its short word. A click arms the kind, a drag carries it to the sheet.
class ShelfTile : public QAbstractButton {
    Q_OBJECT
  public:
    ShelfTile(const QString& kind, const QString& word, const QString& title, QWidget* parent);
    const QString& kind() const { return kind_; }
    QSize sizeHint() const override;
    QSize minimumSizeHint() const override;

  protected:
    void paintEvent(QPaintEvent*) override;
    void mousePressEvent(QMouseEvent* event) override;
    void mouseMoveEvent(QMouseEvent* event) override;

  private:
    double word_width() const;
    QString kind_, word_;
    QPoint pressed_at_;
};

class Shelf : public QWidget {
    Q_OBJECT
  public:
    static constexpr int height_px = 72;
    explicit Shelf(QWidget* parent = nullptr);
    void show_armed(const QString& kind); ///< empty: none
    QLineEdit& field() { return *field_; }
    const std::vector<ShelfTile*>& tiles() const { return tiles_; }

  signals:
    void kind_armed(const QString& kind); ///< empty: put back
    void value_typed(const QString& text);

  protected:
    void paintEvent(QPaintEvent*) override;
    void resizeEvent(QResizeEvent*) override; ///< a narrow shelf has a shorter hint in its field

  private:
    QLineEdit* field_;
    std::vector<ShelfTile*> tiles_;
};

} // namespace sinewright::ui
