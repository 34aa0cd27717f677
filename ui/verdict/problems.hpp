#pragma once
/// Everything the checks found wrong, as a list: severity, sentence, part. A click goes to the part.
#include "core/review/findings.hpp"
#include <QAbstractListModel>
#include <QListView>

namespace sinewright::ui {

struct Problem {
    enum class Severity { stops, hinders } severity = Severity::stops; ///< nothing computed; one result not computed
    QString sentence, remedy;
    QString part; ///< reference of the part it concerns; empty: none
    int count = 1;
};

/// The problems in findings, repeats counted, in the order found.
std::vector<Problem> problems_in(const Findings& findings, const Design& design);

class ProblemModel : public QAbstractListModel {
    Q_OBJECT
  public:
    using QAbstractListModel::QAbstractListModel;
    void set(std::vector<Problem> problems);
    const std::vector<Problem>& problems() const { return problems_; }
    int rowCount(const QModelIndex& parent = {}) const override;
    QVariant data(const QModelIndex& index, int role) const override;

  private:
    std::vector<Problem> problems_;
};

/// Rows in as many columns as fit.
class ProblemList : public QListView {
    Q_OBJECT
  public:
    explicit ProblemList(QWidget* parent = nullptr);
    void set(std::vector<Problem> problems);
    const std::vector<Problem>& problems() const { return model_.problems(); }

  signals:
    void part_wanted(const QString& ref);

  protected:
    void resizeEvent(QResizeEvent* event) override;

  private:
    void settle_row_size();
    ProblemModel model_;
};

} // namespace sinewright::ui
