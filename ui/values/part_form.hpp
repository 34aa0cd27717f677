#pragma once
/// All values of one part, in a form made from its kind's description: units, ranges, help, faults in words.
#include "core/parts/part_kind.hpp"
#include <QWidget>
#include <vector>

class QLabel;
class QLineEdit;
class QToolButton;
class QVBoxLayout;

namespace sinewright {
struct Part;
struct Value;
} // namespace sinewright

namespace sinewright::ui {

class ChoiceBox;
class Document;
class QuantityField;

class PartForm : public QWidget {
    Q_OBJECT
  public:
    PartForm(Document& document, const QString& ref, QWidget* parent = nullptr);
    void show_part(); ///< takes over the document's state
    const QString& ref() const { return ref_; }

  signals:
    void renamed(const QString& to);

  private:
    struct Row {
        std::string name; ///< parameter, "tolerance" or "tempco"
        QuantityField* field = nullptr;
        ChoiceBox* words = nullptr;
        QToolButton* dial = nullptr;
        QWidget* whole = nullptr;
        bool rare = false; ///< shown on demand while not given
    };
    void add_head();
    void add_parameter(const ParameterInfo& info, bool rare);
    void add_part_value(const char* name, const QString& title, const QString& unit, const QString& help);
    Row& add_row(const std::string& name, const QString& title, const QString& help);
    void add_field(Row& row, const QString& unit, const QString& placeholder);
    void set_value(const std::string& name, const Value* value, bool go_on, QuantityField* field);
    void set_word(const std::string& name, const QString& word);
    void toggle_dial(const std::string& name);
    void show_rare(bool all);
    void rename();
    const Part* part() const;

    Document& document_;
    QString ref_;
    const PartKind* kind_;
    QVBoxLayout* column_;
    QLineEdit* name_;
    QLabel* name_fault_;
    QToolButton* more_ = nullptr;
    std::vector<Row> rows_;
};

} // namespace sinewright::ui
