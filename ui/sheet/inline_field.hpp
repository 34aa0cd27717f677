#pragma once
/// A small field on the sheet for typing a value, a name or a part, with an offer list under it.
#include <QFrame>
#include <QLineEdit>
#include <QListWidget>
#include <functional>

namespace sinewright::ui {

class InlineField : public QFrame {
    Q_OBJECT
  public:
    explicit InlineField(QWidget* parent);

    struct Job {
        QString label;                                          ///< for screen readers: "Value of R3"
        QString text;                                           ///< what stands in the field at first
        bool select_all = true;                                 ///< typing replaces it
        bool take_on_leaving = true;                            ///< else leaving drops it
        std::function<QStringList(const QString&)> offers = {}; ///< lines under the field
        /// Enter, or a click on a line; `line` −1: none. Returns why not; empty: done.
        std::function<QString(const QString& text, int line)> take;
    };
    /// Opens with its left end at a point of the parent.
    void open(const QPoint& at, Job job);
    bool is_open() const { return isVisible(); }
    void drop();
    QLineEdit* edit() { return edit_; }
    QListWidget* list() { return list_; }

  signals:
    void closed();

  protected:
    bool eventFilter(QObject* watched, QEvent* event) override;

  private:
    void refresh_offers();
    void take();
    void fit();
    QLineEdit* edit_;
    QListWidget* list_;
    QPoint at_;
    Job job_;
    bool closing_ = false;
};

} // namespace sinewright::ui
