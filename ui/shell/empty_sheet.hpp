#pragma once
/// What an empty sheet says: three lines, and three ways to begin.
#include <QWidget>

class QPushButton;

namespace sinewright::ui {

class EmptySheet : public QWidget {
    Q_OBJECT
  public:
    explicit EmptySheet(QWidget* parent = nullptr);

  signals:
    void starter_wanted();
    void sample_wanted(const QString& path);
    void typing_wanted(const QString& text);

  private:
    QPushButton* add_button(const QString& text, const QString& name);
};

} // namespace sinewright::ui
