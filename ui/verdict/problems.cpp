#include "ui/verdict/problems.hpp"
#include "ui/theme/theme.hpp"
#include <QPainter>
#include <QStyledItemDelegate>

namespace sinewright::ui {
namespace {

constexpr int row_height = 46;
constexpr int widest_column = 400;

/// Two lines: the sentence with its sign, the remedy below.
class ProblemDelegate : public QStyledItemDelegate {
  public:
    using QStyledItemDelegate::QStyledItemDelegate;

    void paint(QPainter* painter, const QStyleOptionViewItem& option, const QModelIndex& index) const override {
        const Theme& t = theme();
        painter->save();
        painter->setRenderHint(QPainter::Antialiasing);
        const QRectF row = QRectF(option.rect).adjusted(0.5, 2.5, -8.5, -2.5);
        if (option.state & (QStyle::State_Selected | QStyle::State_MouseOver)) {
            painter->setPen(option.state & QStyle::State_HasFocus ? QPen(t.accent) : QPen(Qt::NoPen));
            painter->setBrush(t.grid);
            painter->drawRoundedRect(row, 6, 6);
        }
        const bool stops = index.data(Qt::UserRole).toBool();
        painter->setFont(t.font(Theme::note_px, QFont::DemiBold));
        painter->setPen(stops ? t.misses : t.warn);
        painter->drawText(row.topLeft() + QPointF(8, 17), QString(QChar(0x25B2)));
        painter->setFont(t.font(Theme::note_px, QFont::Medium));
        painter->setPen(t.ink);
        const double room = row.width() - 32;
        painter->drawText(
            row.topLeft() + QPointF(26, 17),
            painter->fontMetrics().elidedText(index.data(Qt::DisplayRole).toString(), Qt::ElideRight, int(room)));
        painter->setFont(t.font(Theme::axis_px));
        painter->setPen(t.soft);
        painter->drawText(
            row.topLeft() + QPointF(26, 33),
            painter->fontMetrics().elidedText(index.data(Qt::UserRole + 1).toString(), Qt::ElideRight, int(room)));
        painter->restore();
    }
};

/// The part a fault concerns: `where` is "R3", "R3.resistance" or names no part.
QString part_of(const Fault& fault, const Design& design) {
    const std::string ref = fault.where.substr(0, fault.where.find_first_of(". "));
    return design.find(ref) ? QString::fromStdString(ref) : QString();
}

void add(std::vector<Problem>& problems, const Faults& faults, Problem::Severity severity, const Design& design) {
    for (const Fault& fault : faults) {
        const QString sentence = QString::fromStdString(fault.sentence);
        const auto same = std::find_if(problems.begin(), problems.end(),
                                       [&](const Problem& known) { return known.sentence == sentence; });
        if (same != problems.end())
            ++same->count;
        else
            problems.push_back({severity, sentence, QString::fromStdString(fault.remedy), part_of(fault, design), 1});
    }
}

} // namespace

std::vector<Problem> problems_in(const Findings& findings, const Design& design) {
    std::vector<Problem> problems;
    add(problems, findings.faults, Problem::Severity::stops, design);
    add(problems, findings.operating_point.faults, Problem::Severity::stops, design);
    add(problems, findings.small_signal.faults, Problem::Severity::stops, design);
    add(problems, findings.loop.faults, Problem::Severity::hinders, design);
    return problems;
}

void ProblemModel::set(std::vector<Problem> problems) {
    beginResetModel();
    problems_ = std::move(problems);
    endResetModel();
}

int ProblemModel::rowCount(const QModelIndex& parent) const { return parent.isValid() ? 0 : int(problems_.size()); }

QVariant ProblemModel::data(const QModelIndex& index, int role) const {
    const Problem& problem = problems_.at(static_cast<std::size_t>(index.row()));
    const QString repeats = problem.count > 1 ? tr(" (%1 times)").arg(problem.count) : QString();
    switch (role) {
    case Qt::DisplayRole:
        return problem.sentence + repeats;
    case Qt::ToolTipRole:
    case Qt::AccessibleTextRole:
        return problem.sentence + repeats + " " + problem.remedy;
    case Qt::UserRole:
        return problem.severity == Problem::Severity::stops;
    case Qt::UserRole + 1:
        return problem.remedy;
    default:
        return {};
    }
}

ProblemList::ProblemList(QWidget* parent) : QListView(parent), model_(this) {
    setObjectName("problems");
    setAccessibleName(tr("Problems"));
    setModel(&model_);
    setItemDelegate(new ProblemDelegate(this));
    setFlow(QListView::TopToBottom);
    setWrapping(true);
    setResizeMode(QListView::Adjust);
    setUniformItemSizes(true);
    setMouseTracking(true);
    setFrameShape(QFrame::NoFrame);
    setVerticalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
    const auto go = [this](const QModelIndex& index) {
        const QString part = model_.problems().at(static_cast<std::size_t>(index.row())).part;
        if (!part.isEmpty()) emit part_wanted(part);
    };
    connect(this, &QListView::clicked, this, go);
    connect(this, &QListView::activated, this, go);
}

void ProblemList::set(std::vector<Problem> problems) {
    model_.set(std::move(problems));
    settle_row_size();
}

void ProblemList::resizeEvent(QResizeEvent* event) {
    settle_row_size();
    QListView::resizeEvent(event);
}

void ProblemList::settle_row_size() {
    const int rows = std::max(1, height() / row_height);
    const int columns = (model_.rowCount() + rows - 1) / rows;
    const int width_each = std::min(widest_column, (viewport()->width() - 4) / std::clamp(columns, 1, 3));
    setGridSize({width_each, row_height});
}

} // namespace sinewright::ui
