#pragma once
/// What belongs to the design as a whole: output net, temperature, notes, targets.
#include <QWidget>

class QLabel;
class QPlainTextEdit;

namespace sinewright::ui {

class ChoiceBox;
class Document;
class QuantityField;
class TargetRows;

class DesignForm : public QWidget {
    Q_OBJECT
  public:
    explicit DesignForm(Document& document, QWidget* parent = nullptr);
    void take_over();

  protected:
    bool eventFilter(QObject* watched, QEvent* event) override; ///< leaving the notes ends their undo step

  private:
    void set_temperature(double celsius, bool go_on);
    Document& document_;
    ChoiceBox* output_;
    QuantityField* temperature_;
    QLabel* temperature_fault_;
    QPlainTextEdit* notes_;
    TargetRows* targets_;
    bool showing_ = false;
};

} // namespace sinewright::ui
