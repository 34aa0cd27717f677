#include "ui/shell/actions.hpp"
#include "ui/document/document.hpp"
#include "ui/shell/samples.hpp"
#include "ui/theme/theme.hpp"
#include <QActionGroup>
#include <QFileInfo>

namespace sinewright::ui {

Actions::Actions(Document& document, Deeds deeds, QWidget* window)
    : QObject(window), document_(document), deeds_(std::move(deeds)), window_(window), menu_(new QMenu(window)) {
    menu_->setObjectName("window_menu");
    menu_->setAccessibleName(tr("Menu"));
    add(tr("New"), "new", QKeySequence::New, deeds_.make_new);
    add(tr("New window"), "new_window", QKeySequence("Ctrl+Shift+N"), deeds_.new_window);
    add(tr("Open…"), "open", QKeySequence::Open, deeds_.open);
    add_file_menus();
    add(tr("Save"), "save", QKeySequence::Save, deeds_.save);
    add(tr("Save as…"), "save_as", QKeySequence("Ctrl+Shift+S"), deeds_.save_as);
    menu_->addSeparator();
    add_history();
    add(tr("Zoom to fit"), "zoom_to_fit", QKeySequence("Ctrl+0"), deeds_.zoom_to_fit);
    add_theme_menu();
    menu_->addSeparator();
    add(tr("Cautions and about"), "about", QKeySequence::HelpContents, deeds_.about);
    add(tr("Close window"), "close", QKeySequence("Ctrl+W"), deeds_.close);
    add(tr("Quit"), "quit", QKeySequence("Ctrl+Q"), deeds_.quit);
}

QAction* Actions::add(const QString& text, const QString& name, const QKeySequence& keys, std::function<void()> deed) {
    auto* action = new QAction(text, this);
    action->setObjectName(name);
    action->setShortcut(keys);
    connect(action, &QAction::triggered, this, [deed = std::move(deed)] { deed(); });
    menu_->addAction(action);
    window_->addAction(action);
    return action;
}

void Actions::add_history() {
    undo = add(tr("Undo"), "undo", QKeySequence::Undo, [this] { document_.undo(); });
    redo = add(tr("Redo"), "redo", QKeySequence::Redo, [this] { document_.redo(); });
    redo->setShortcuts({QKeySequence("Ctrl+Shift+Z"), QKeySequence("Ctrl+Y")});
    const auto follow = [this] {
        undo->setText(document_.undo_text());
        redo->setText(document_.redo_text());
        undo->setEnabled(document_.history().canUndo());
        redo->setEnabled(document_.history().canRedo());
    };
    connect(&document_.history(), &QUndoStack::indexChanged, this, follow);
    connect(&document_, &Document::changed, this, follow);
    follow();
}

void Actions::add_file_menus() {
    auto* recent = menu_->addMenu(tr("Open recent"));
    recent->setObjectName("recent");
    connect(recent, &QMenu::aboutToShow, this, [this, recent] { fill_recent(*recent); });
    auto* samples = menu_->addMenu(tr("Samples"));
    samples->setObjectName("samples");
    connect(samples, &QMenu::aboutToShow, this, [this, samples] {
        samples->clear();
        for (const Sample& sample : find_samples())
            samples->addAction(sample.title, this, [this, path = sample.path] { deeds_.open_path(path); });
        if (samples->isEmpty()) samples->addAction(tr("No samples found"))->setEnabled(false);
    });
}

void Actions::fill_recent(QMenu& menu) {
    menu.clear();
    for (const QString& path : recent_files())
        menu.addAction(QFileInfo(path).fileName(), this, [this, path] { deeds_.open_path(path); })->setToolTip(path);
    if (menu.isEmpty()) menu.addAction(tr("Nothing opened yet"))->setEnabled(false);
}

void Actions::add_theme_menu() {
    auto* themes = menu_->addMenu(tr("Colours"));
    themes->setObjectName("themes");
    auto* group = new QActionGroup(this);
    const std::pair<QString, ThemeChoice> choices[] = {{tr("As the system"), ThemeChoice::follow_system},
                                                       {tr("Light"), ThemeChoice::light},
                                                       {tr("Dark"), ThemeChoice::dark}};
    for (const auto& [text, choice] : choices) {
        QAction* action = themes->addAction(text, this, [choice = choice] { ThemeKeeper::instance().choose(choice); });
        action->setCheckable(true);
        action->setData(static_cast<int>(choice));
        group->addAction(action);
    }
    connect(themes, &QMenu::aboutToShow, this, [group] {
        const int now = static_cast<int>(ThemeKeeper::instance().choice());
        for (QAction* action : group->actions()) action->setChecked(action->data().toInt() == now);
    });
}

} // namespace sinewright::ui
