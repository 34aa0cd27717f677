#pragma once
/// A window with one design: header, sheet, shelf, views, verdict strip; opening, saving and what to do with edits.
#include "ui/document/analyst.hpp"
#include "ui/document/document.hpp"
#include <QMainWindow>
#include <functional>

class QSplitter;

namespace sinewright::ui {

class Actions;
class MessageBar;
class SheetArea;
class Shelf;
class VerdictStrip;
class Views;

class MainWindow : public QMainWindow {
    Q_OBJECT
  public:
    /// @param remembers  takes and keeps place, size and split of the last window
    explicit MainWindow(bool remembers = true, QWidget* parent = nullptr);
    ~MainWindow() override;

    Document& document() { return document_; }
    Analyst& analyst() { return analyst_; }
    SheetArea& sheet_area() { return *sheet_area_; }
    Shelf& shelf() { return *shelf_; }
    Views& views() { return *views_; }
    VerdictStrip& verdict() { return *verdict_; }
    MessageBar& messages() { return *messages_; }

    /// Opens at once, whatever was edited: ask first with open_path(). False: the bar says why, the design stays.
    bool open_now(const QString& path);
    void open_path(const QString& path); ///< after the question what to do with edits
    bool save_to(const QString& path);

    using Chosen = std::function<void(const QString& path)>;
    /// How a path is asked for; file dialogs unless replaced. `saving` decides which; `start` is where to look.
    std::function<void(bool saving, const QString& start, Chosen then)> ask_path;

  protected:
    void closeEvent(QCloseEvent* event) override;
    void dragEnterEvent(QDragEnterEvent* event) override;
    void dropEvent(QDropEvent* event) override;

  private:
    void build();
    void make_actions();
    void connect_parts();
    void restore_place();
    void keep_place() const;
    void when_safe(const QString& doing, std::function<void()> go_on); ///< asks what to do with edits, if any
    void save_then(std::function<void()> go_on);
    void name_window();
    void drop_starter();
    void begin_typing(const QString& text);

    Document document_;
    Analyst analyst_;
    Actions* actions_;
    MessageBar* messages_;
    QSplitter* splitter_;
    SheetArea* sheet_area_;
    Shelf* shelf_;
    Views* views_;
    VerdictStrip* verdict_;
    bool remembers_, leaving_ = false;
};

} // namespace sinewright::ui
