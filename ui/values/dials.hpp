#pragma once
/// The dials card: the design's named adjustments with sliders. Turning one is a single undo step, and live.
#include "ui/values/floating_card.hpp"
#include <QTimer>
#include <vector>

class QLabel;
class QLineEdit;
class QSlider;
class QToolButton;

namespace sinewright {
struct Dial;
struct Value;
} // namespace sinewright

namespace sinewright::ui {

class Document;
class QuantityField;

/// One dial: name and what it sets, value, slider, its ends and law; everything can be changed in place.
class DialRow : public QWidget {
    Q_OBJECT
  public:
    DialRow(Document& document, const Dial& dial, QWidget* parent);
    void show_dial(const Dial& dial); ///< same name, same things set
    QSlider& slider() { return *slider_; }
    QuantityField& value() { return *value_; }

  private:
    void lay_out();
    void add_actions();
    void turn_to(const Value& value, bool go_on);
    void rename();
    void change_end(bool upper, const Value& value);
    void change_law();
    void edit_dial(const QString& step, const std::function<void(Dial&)>& change, const QString& merge = {});
    Document& document_;
    std::string name_, unit_;
    QLineEdit* title_;
    QLabel *sets_, *fault_;
    QuantityField *value_, *from_, *to_;
    QSlider* slider_;
    QToolButton* law_;
    QTimer pause_; ///< between key presses on the slider: ends the undo step
    bool showing_ = false;
};

class Dials : public FloatingCard {
    Q_OBJECT
  public:
    Dials(Document& document, QWidget* parent);
    const std::vector<DialRow*>& rows() const { return rows_; }

  private:
    void take_over();
    void build();
    Document& document_;
    std::vector<DialRow*> rows_;
    std::vector<std::pair<std::string, std::vector<std::string>>> built_for_; ///< names and what each sets
};

} // namespace sinewright::ui
