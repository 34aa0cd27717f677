#pragma once
/// Everything the window can be told to do, with its keys, and the menu that lists it.
#include <QAction>
#include <QMenu>
#include <functional>

namespace sinewright::ui {

class Document;

/// What the actions call; the window fills it in.
struct Deeds {
    std::function<void()> make_new, new_window, open, save, save_as, close, quit, zoom_to_fit, about;
    std::function<void(const QString& path)> open_path;
};

class Actions : public QObject {
    Q_OBJECT
  public:
    Actions(Document& document, Deeds deeds, QWidget* window);
    QMenu* menu() const { return menu_; }
    QAction *undo, *redo;

  private:
    QAction* add(const QString& text, const QString& name, const QKeySequence& keys, std::function<void()> deed);
    void add_history();
    void add_file_menus();
    void add_theme_menu();
    void fill_recent(QMenu& menu);
    Document& document_;
    Deeds deeds_;
    QWidget* window_;
    QMenu* menu_;
};

} // namespace sinewright::ui
