#pragma once
/// What the program is, and the cautions that go with building what it computes.
#include <QDialog>

namespace sinewright::ui {

class About : public QDialog {
    Q_OBJECT
  public:
    explicit About(QWidget* parent);
};

} // namespace sinewright::ui
