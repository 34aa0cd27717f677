#pragma once
/// A box to choose one of a few words, with an arrow in the theme's ink.
#include <QComboBox>

namespace sinewright::ui {

class ChoiceBox : public QComboBox {
    Q_OBJECT
  public:
    using QComboBox::QComboBox;

  protected:
    void paintEvent(QPaintEvent* event) override;
    void wheelEvent(QWheelEvent* event) override; ///< scrolls the panel, never changes a choice unseen
};

} // namespace sinewright::ui
