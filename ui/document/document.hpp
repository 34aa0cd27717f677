#pragma once
/// The one open design of a window: its truth, its history, its file. Views observe it and never keep a second truth.
#include "core/design/design.hpp"
#include <QObject>
#include <QString>
#include <QUndoStack>
#include <functional>
#include <memory>

namespace sinewright::ui {

/// Faults as people read them: one sentence with its remedy a line.
QString sentences(const Faults& faults);

class Document : public QObject {
    Q_OBJECT
  public:
    explicit Document(QObject* parent = nullptr);
    ~Document() override; ///< without a last signal

    const Design& design() const { return *design_; }
    /// The same as an immutable snapshot that another thread may keep.
    std::shared_ptr<const Design> snapshot() const { return design_; }
    quint64 revision() const { return revision_; } ///< rises with every change, undo and redo included

    /// Changes the design as one undoable step called `name` ("Move R3", "Value of R3": shown as "Undo move R3").
    /// Steps with the same non-empty merge_key in a row become one (a drag, a wheel turn); end_merge() closes that.
    /// A change that leaves the design as it was adds no step. Undo and redo exchange old and new, selection included.
    void edit(const QString& name, const std::function<void(Design&)>& change, const QString& merge_key = {});
    void end_merge();
    QUndoStack& history() { return history_; }
    void undo();
    void redo();
    QString undo_text() const; ///< "Undo move R3"; "Undo" when there is nothing to undo
    QString redo_text() const;

    const QStringList& selection() const { return selection_; } ///< part references
    void select(const QStringList& refs);                       ///< references that exist not are dropped

    QString path() const { return path_; } ///< empty: never saved
    bool modified() const { return !history_.isClean(); }
    void set_new(Design design = {}); ///< a new unsaved design; clears the history
    /// False: `message` says why and the present design stays. True: `message` holds what was mended on reading, if
    /// any.
    bool open(const QString& path, QString* message);
    bool save(const QString& path, QString* message); ///< atomic; false: message says why, nothing is lost

  signals:
    void changed(); ///< the design changed (any cause)
    void selection_changed();
    void file_changed(); ///< path or modified state
    void replaced();     ///< another design altogether: new or opened

  private:
    friend class DesignStep;
    void replace(std::shared_ptr<const Design> design);
    void start_over(Design design, const QString& path);
    std::shared_ptr<const Design> design_;
    QUndoStack history_;
    QStringList selection_;
    QString path_;
    quint64 revision_ = 0;
    int merge_round_ = 0;
};

} // namespace sinewright::ui
