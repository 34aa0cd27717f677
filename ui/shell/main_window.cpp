#include "ui/shell/main_window.hpp"
#include "ui/curves/start_view.hpp"
#include "ui/sheet/sheet.hpp"
#include "ui/shell/about.hpp"
#include "ui/shell/actions.hpp"
#include "ui/shell/empty_sheet.hpp"
#include "ui/shell/header.hpp"
#include "ui/shell/message_bar.hpp"
#include "ui/shell/samples.hpp"
#include "ui/shell/sheet_area.hpp"
#include "ui/shell/shelf.hpp"
#include "ui/shell/starter.hpp"
#include "ui/shell/views.hpp"
#include "ui/verdict/verdict_strip.hpp"
#include <QApplication>
#include <QCloseEvent>
#include <QFileDialog>
#include <QFileInfo>
#include <QLineEdit>
#include <QMimeData>
#include <QSettings>
#include <QSplitter>
#include <QVBoxLayout>

namespace sinewright::ui {
namespace {

constexpr int sheet_share = 58, views_share = 42; // per cent of the width
constexpr const char* geometry_key = "window/geometry";
constexpr const char* split_key = "window/split";
constexpr const char* file_suffix = ".sinewright";

void ask_with_dialog(QWidget* window, bool saving, const QString& start, MainWindow::Chosen then) {
    auto* dialog = new QFileDialog(window, saving ? MainWindow::tr("Save the design") : MainWindow::tr("Open a design"),
                                   start, MainWindow::tr("Designs (*%1);;All files (*)").arg(file_suffix));
    dialog->setAttribute(Qt::WA_DeleteOnClose);
    dialog->setAcceptMode(saving ? QFileDialog::AcceptSave : QFileDialog::AcceptOpen);
    dialog->setFileMode(saving ? QFileDialog::AnyFile : QFileDialog::ExistingFile);
    dialog->setDefaultSuffix(file_suffix);
    QObject::connect(dialog, &QFileDialog::fileSelected, window, then);
    dialog->open();
}

} // namespace

MainWindow::MainWindow(bool remembers, QWidget* parent)
    : QMainWindow(parent), document_(), analyst_(document_), remembers_(remembers) {
    setObjectName("main_window");
    setAcceptDrops(true);
    ask_path = [this](bool saving, const QString& start, Chosen then) {
        ask_with_dialog(this, saving, start, std::move(then));
    };
    make_actions();
    build();
    connect_parts();
    name_window();
    if (remembers_) restore_place();
    sheet_area_->sheet().setFocus();
}

MainWindow::~MainWindow() { delete takeCentralWidget(); } // while what the widgets refer to is still there

void MainWindow::make_actions() {
    Deeds deeds;
    deeds.make_new = [this] { when_safe(tr("a new design"), [this] { document_.set_new(); }); };
    deeds.new_window = [] {
        auto* window = new MainWindow;
        window->setAttribute(Qt::WA_DeleteOnClose);
        window->show();
    };
    deeds.open = [this] {
        ask_path(false, QFileInfo(document_.path()).absolutePath(), [this](const QString& path) { open_path(path); });
    };
    deeds.open_path = [this](const QString& path) { open_path(path); };
    deeds.save = [this] { save_then({}); };
    deeds.save_as = [this] { ask_path(true, document_.path(), [this](const QString& path) { save_to(path); }); };
    deeds.close = [this] { close(); };
    deeds.quit = [] { QApplication::closeAllWindows(); };
    deeds.zoom_to_fit = [this] { sheet_area_->sheet().zoom_to_fit(); };
    deeds.about = [this] { (new About(this))->show(); };
    actions_ = new Actions(document_, std::move(deeds), this);
}

void MainWindow::build() {
    auto* whole = new QWidget(this);
    whole->setObjectName("whole");
    auto* column = new QVBoxLayout(whole);
    column->setContentsMargins(0, 0, 0, 0);
    column->setSpacing(0);
    // Made in the order in which Tab walks them.
    column->addWidget(new Header(document_, actions_->undo, actions_->redo, actions_->menu(), whole));
    messages_ = new MessageBar(whole);
    column->addWidget(messages_);
    splitter_ = new QSplitter(Qt::Horizontal, whole);
    splitter_->setObjectName("split");
    splitter_->setChildrenCollapsible(false);
    splitter_->setHandleWidth(1);
    auto* left = new QWidget(splitter_);
    auto* left_column = new QVBoxLayout(left);
    left_column->setContentsMargins(0, 0, 0, 0);
    left_column->setSpacing(0);
    sheet_area_ = new SheetArea(document_, analyst_, left);
    shelf_ = new Shelf(left);
    left_column->addWidget(sheet_area_, 1);
    left_column->addWidget(shelf_);
    views_ = new Views(splitter_);
    views_->add(tr("Start"), tr("Will it start?"), new StartView(document_, analyst_, views_));
    splitter_->setStretchFactor(0, sheet_share);
    splitter_->setStretchFactor(1, views_share);
    splitter_->setSizes({sheet_share * 100, views_share * 100});
    column->addWidget(splitter_, 1);
    verdict_ = new VerdictStrip(document_, analyst_, whole);
    column->addWidget(verdict_);
    setCentralWidget(whole);
    setMinimumSize(960, 620);
    resize(1440, 900);
}

void MainWindow::connect_parts() {
    SheetView& sheet = sheet_area_->sheet();
    connect(shelf_, &Shelf::kind_armed, &sheet, &SheetView::arm_kind);
    connect(shelf_, &Shelf::value_typed, &sheet, &SheetView::drop_typed);
    connect(&sheet, &SheetView::armed_changed, shelf_, &Shelf::show_armed);
    connect(verdict_, &VerdictStrip::view_wanted, views_, &Views::show_view);
    connect(verdict_, &VerdictStrip::part_wanted, &sheet, &SheetView::focus_part);
    EmptySheet& empty = sheet_area_->empty();
    connect(&empty, &EmptySheet::starter_wanted, this, &MainWindow::drop_starter);
    connect(&empty, &EmptySheet::sample_wanted, this, &MainWindow::open_path);
    connect(&empty, &EmptySheet::typing_wanted, this, &MainWindow::begin_typing);
    connect(&document_, &Document::file_changed, this, &MainWindow::name_window);
    connect(&document_, &Document::changed, this, &MainWindow::name_window);
}

void MainWindow::drop_starter() {
    document_.edit(tr("Drop an amplifier and a network"), [](Design& design) {
        Design starter = starter_design();
        if (!design.title.empty()) starter.title = design.title;
        starter.notes = design.notes, starter.temperature_c = design.temperature_c, starter.targets = design.targets;
        starter.unknown = design.unknown;
        design = std::move(starter);
    });
    sheet_area_->sheet().zoom_to_fit();
    sheet_area_->sheet().setFocus();
}

void MainWindow::begin_typing(const QString& text) {
    shelf_->field().setText(text);
    shelf_->field().setFocus();
    shelf_->field().selectAll();
}

bool MainWindow::open_now(const QString& path) {
    QString message;
    if (!document_.open(path, &message)) {
        messages_->say_fault(message);
        return false;
    }
    if (message.isEmpty())
        messages_->put_away();
    else
        messages_->say_note(message);
    if (remembers_) remember_recent(path);
    sheet_area_->sheet().zoom_to_fit();
    return true;
}

void MainWindow::open_path(const QString& path) {
    when_safe(tr("opening %1").arg(QFileInfo(path).fileName()), [this, path] { open_now(path); });
}

bool MainWindow::save_to(const QString& path) {
    QString message;
    const bool saved = document_.save(path, &message);
    if (!saved)
        messages_->say_fault(message);
    else if (remembers_)
        remember_recent(path);
    return saved;
}

void MainWindow::save_then(std::function<void()> go_on) {
    const auto save = [this, go_on = std::move(go_on)](const QString& path) {
        if (save_to(path) && go_on) go_on();
    };
    if (!document_.path().isEmpty()) return save(document_.path());
    QString name = QString::fromStdString(document_.design().title).simplified();
    name.replace('/', '-');
    ask_path(true, (name.isEmpty() ? tr("loop") : name) + file_suffix, save);
}

void MainWindow::when_safe(const QString& doing, std::function<void()> go_on) {
    if (!document_.modified()) return go_on();
    const QString title = QString::fromStdString(document_.design().title);
    const QString question = title.isEmpty() ? tr("Save the edits before %1?").arg(doing)
                                             : tr("Save the edits of “%1” before %2?").arg(title, doing);
    messages_->ask(question, {{tr("Save"), "guard_save", [this, go_on] { save_then(go_on); }, true},
                              {tr("Discard the edits"), "guard_discard", go_on, false},
                              {tr("Go on editing"), "guard_stay", {}, false}});
}

void MainWindow::closeEvent(QCloseEvent* event) {
    if (document_.modified() && !leaving_) {
        event->ignore();
        when_safe(tr("closing"), [this] {
            leaving_ = true;
            close();
        });
        return;
    }
    if (remembers_) keep_place();
    event->accept();
}

void MainWindow::dragEnterEvent(QDragEnterEvent* event) {
    if (event->mimeData()->hasUrls() && event->mimeData()->urls().front().isLocalFile()) event->acceptProposedAction();
}

void MainWindow::dropEvent(QDropEvent* event) {
    open_path(event->mimeData()->urls().front().toLocalFile());
    event->acceptProposedAction();
}

void MainWindow::restore_place() {
    restoreGeometry(QSettings().value(geometry_key).toByteArray());
    splitter_->restoreState(QSettings().value(split_key).toByteArray());
}

void MainWindow::keep_place() const {
    QSettings().setValue(geometry_key, saveGeometry());
    QSettings().setValue(split_key, splitter_->saveState());
}

void MainWindow::name_window() {
    QString name = QString::fromStdString(document_.design().title);
    if (name.isEmpty()) name = tr("Untitled loop");
    if (!document_.path().isEmpty()) name += " (" + QFileInfo(document_.path()).fileName() + ")";
    if (document_.modified()) name += tr(", edited");
    setWindowTitle(name);
}

} // namespace sinewright::ui
