#pragma once
/// The sheet with what lies over it: dials, properties, the beginner's lines on an empty sheet, a passing note.
#include <QTimer>
#include <QWidget>

class QLabel;

namespace sinewright::ui {

class Analyst;
class Dials;
class Document;
class EmptySheet;
class Properties;
class SheetView;

class SheetArea : public QWidget {
    Q_OBJECT
  public:
    SheetArea(Document& document, Analyst& analyst, QWidget* parent = nullptr);
    SheetView& sheet() { return *sheet_; }
    Dials& dials() { return *dials_; }
    Properties& properties() { return *properties_; }
    EmptySheet& empty() { return *empty_; }
    void say(const QString& note); ///< shown for some seconds at the sheet's foot

  protected:
    bool eventFilter(QObject* watched, QEvent* event) override;
    void resizeEvent(QResizeEvent*) override;

  private:
    void take_over();
    void place_note();
    void keep_clear_of_selection();
    Document& document_;
    SheetView* sheet_;
    Dials* dials_;
    Properties* properties_;
    EmptySheet* empty_;
    QLabel* note_;
    QTimer note_time_;
};

} // namespace sinewright::ui
