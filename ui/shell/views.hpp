#pragma once
/// The column of results at the right, arranged by the questions people ask. Only views that exist are shown.
#include <QWidget>

class QLabel;
class QStackedWidget;
class QTabBar;

namespace sinewright::ui {

class Views : public QWidget {
    Q_OBJECT
  public:
    explicit Views(QWidget* parent = nullptr);
    void add(const QString& name, const QString& question, QWidget* view);
    bool show_view(const QString& name); ///< false: no view of that name
    QString shown() const;

  protected:
    void paintEvent(QPaintEvent*) override;

  private:
    void show_question();
    QTabBar* tabs_;
    QLabel* question_;
    QStackedWidget* stack_;
    QStringList questions_;
};

} // namespace sinewright::ui
