#include "ui/document/document.hpp"
#include "core/design/file.hpp"
#include "ui/document/design_difference.hpp"
#include <QUndoCommand>

namespace sinewright::ui {
namespace {

/// "Move R3" inside a sentence: "move R3"; a name that starts with a reference or an abbreviation stays.
QString inside_sentence(QString name) {
    if (name.size() > 1 && name[1].isLower()) name[0] = name[0].toLower();
    return name;
}

} // namespace

QString sentences(const Faults& faults) {
    QStringList lines;
    for (const Fault& fault : faults) {
        QString line = QString::fromStdString(fault.sentence);
        if (!fault.remedy.empty()) line += " " + QString::fromStdString(fault.remedy);
        lines << line;
    }
    return lines.join("\n");
}

/// One undo step. Undo and redo are the same exchange of old and new, selection included.
class DesignStep : public QUndoCommand {
  public:
    DesignStep(Document& document, const QString& name, DesignDifference difference, QString merge_key, int round)
        : QUndoCommand(name),
          document_(document),
          difference_(std::move(difference)),
          merge_key_(std::move(merge_key)),
          round_(round),
          selection_(document.selection()) {}

    void redo() override { exchange(); }
    void undo() override { exchange(); }
    int id() const override { return merge_key_.isEmpty() ? -1 : 1; }

    bool mergeWith(const QUndoCommand* later_command) override {
        const auto& later = *static_cast<const DesignStep*>(later_command);
        if (later.merge_key_ != merge_key_ || later.round_ != round_) return false;
        Design before = document_.design();
        DesignDifference(later.difference_).exchange(before);
        difference_.exchange(before);
        difference_ = DesignDifference::between(document_.design(), before);
        setObsolete(difference_.empty());
        return true;
    }

  private:
    void exchange() {
        auto design = std::make_shared<Design>(document_.design());
        difference_.exchange(*design);
        const QStringList selected_now = document_.selection();
        document_.replace(std::move(design));
        if (done_once_) document_.select(selection_), selection_ = selected_now;
        done_once_ = true;
    }

    Document& document_;
    DesignDifference difference_;
    QString merge_key_;
    int round_;
    QStringList selection_;
    bool done_once_ = false;
};

Document::Document(QObject* parent) : QObject(parent), design_(std::make_shared<Design>()), history_(this) {
    connect(&history_, &QUndoStack::cleanChanged, this, &Document::file_changed);
}

Document::~Document() { history_.disconnect(this); } // it reports its end, when half of this is gone

void Document::edit(const QString& name, const std::function<void(Design&)>& change, const QString& merge_key) {
    Design after = *design_;
    change(after);
    auto difference = DesignDifference::between(*design_, after);
    if (difference.empty()) return;
    history_.push(new DesignStep(*this, name, std::move(difference), merge_key, merge_round_));
}

void Document::end_merge() { ++merge_round_; }

void Document::undo() {
    end_merge();
    history_.undo();
}

void Document::redo() {
    end_merge();
    history_.redo();
}

QString Document::undo_text() const {
    return history_.canUndo() ? tr("Undo %1").arg(inside_sentence(history_.undoText())) : tr("Undo");
}

QString Document::redo_text() const {
    return history_.canRedo() ? tr("Redo %1").arg(inside_sentence(history_.redoText())) : tr("Redo");
}

void Document::replace(std::shared_ptr<const Design> design) {
    design_ = std::move(design);
    ++revision_;
    select(selection_); // a selected part may be gone
    emit changed();
}

void Document::select(const QStringList& refs) {
    QStringList existing;
    for (const QString& ref : refs)
        if (design_->find(ref.toStdString()) && !existing.contains(ref)) existing << ref;
    if (existing == selection_) return;
    selection_ = existing;
    emit selection_changed();
}

void Document::start_over(Design design, const QString& path) {
    path_ = path;
    end_merge();
    history_.clear();
    select({});
    replace(std::make_shared<Design>(std::move(design)));
    emit replaced();
    emit file_changed();
}

void Document::set_new(Design design) { start_over(std::move(design), {}); }

bool Document::open(const QString& path, QString* message) {
    auto read = read_design(path.toStdString());
    if (message) *message = read ? sentences(read->notes) : sentences(read.faults());
    if (!read) return false;
    start_over(std::move(read->design), path);
    return true;
}

bool Document::save(const QString& path, QString* message) {
    const auto written = write_design(*design_, path.toStdString());
    if (message) *message = written ? QString() : sentences(written.faults());
    if (!written) return false;
    path_ = path;
    end_merge();
    history_.setClean();
    emit file_changed();
    return true;
}

} // namespace sinewright::ui
