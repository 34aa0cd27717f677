#pragma once
/// The bar at the top: mark, title, saved state, undo and redo, the menu.
#include <QWidget>

class QAction;
class QLabel;
class QLineEdit;
class QMenu;
class QPushButton;
class QToolButton;

namespace sinewright::ui {

class Document;

class Header : public QWidget {
    Q_OBJECT
  public:
    static constexpr int height_px = 52;
    Header(Document& document, QAction* undo, QAction* redo, QMenu* menu, QWidget* parent = nullptr);
    QLineEdit& title() { return *title_; }
    QString state() const;

  protected:
    void paintEvent(QPaintEvent*) override;

  private:
    void take_over();
    void fit_title();
    QPushButton* button_for(QAction* action, const QString& text, const QString& name);
    Document& document_;
    QLineEdit* title_;
    QLabel* state_;
};

} // namespace sinewright::ui
