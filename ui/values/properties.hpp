#pragma once
/// The card at the sheet's upper right: the values of the selected part, or of the design when none is selected.
#include "ui/values/floating_card.hpp"

namespace sinewright::ui {

class DesignForm;
class Document;
class PartForm;

class Properties : public FloatingCard {
    Q_OBJECT
  public:
    Properties(Document& document, QWidget* parent);
    PartForm* part_form() const { return part_form_; }
    DesignForm* design_form() const { return design_form_; }

  signals:
    void built(); ///< shows another subject now

  private:
    void take_over();
    void build();
    void show_several();
    QString subject() const; ///< what the card ought to show
    void put(QWidget* form, const QString& title);
    Document& document_;
    QString built_for_;
    PartForm* part_form_ = nullptr;
    DesignForm* design_form_ = nullptr;
    bool part_folded_ = false, design_folded_ = true; ///< as the user left them
    bool build_waits_ = false;
};

} // namespace sinewright::ui
