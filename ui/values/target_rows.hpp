#pragma once
/// The targets of a design, each with its limits, editable; one can be added for every result the checks know.
#include "core/design/design.hpp"
#include <QWidget>

class QToolButton;
class QVBoxLayout;

namespace sinewright::ui {

class Document;
class QuantityField;

class TargetRows : public QWidget {
    Q_OBJECT
  public:
    explicit TargetRows(Document& document, QWidget* parent = nullptr);
    void take_over();

  private:
    struct Row {
        std::string name;
        bool nominal = false; ///< nominal and within; else min and max
        QuantityField *first, *second;
    };
    void build();
    void add_row(const Target& target);
    void set_limit(const Row& row, bool second, const std::optional<Value>& value);
    void fill_add_menu();
    Document& document_;
    QVBoxLayout* column_;
    QWidget* list_ = nullptr;
    QToolButton* add_;
    std::vector<Row> rows_;
};

} // namespace sinewright::ui
