#pragma once
/// A bar under the header for what the user must know or decide. It never blocks the rest of the window.
#include <QFrame>
#include <functional>
#include <vector>

class QHBoxLayout;
class QLabel;
class QPushButton;

namespace sinewright::ui {

class MessageBar : public QFrame {
    Q_OBJECT
  public:
    struct Answer {
        QString text, name;
        std::function<void()> act; ///< may be empty: just closes the bar
        bool primary = false;
    };
    explicit MessageBar(QWidget* parent = nullptr);
    void say_fault(const QString& text);
    void say_note(const QString& text);
    void ask(const QString& text, std::vector<Answer> answers);
    void put_away();
    QString text() const;

  private:
    void show_text(const char* role, const QString& text);
    QLabel* text_;
    QHBoxLayout* row_;
    std::vector<QPushButton*> buttons_;
    QPushButton* close_;
};

} // namespace sinewright::ui
