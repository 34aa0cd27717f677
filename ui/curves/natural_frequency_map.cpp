#include "ui/curves/natural_frequency_map.hpp"
#include "core/quantity/quantity.hpp"
#include <cmath>
#include <numbers>

namespace sinewright::ui {

namespace {

constexpr double two_pi = 2 * std::numbers::pi;
constexpr int longest_trail = 200;

/// The right-most complex root, else the right-most real one; null without roots.
const Complex* root_of_interest(const Findings& findings) {
    if (!findings.small_signal || findings.small_signal->natural_frequencies.empty()) return nullptr;
    const auto& roots = findings.small_signal->natural_frequencies;
    if (findings.small_signal->outcome == Outcome::latches) return &roots.front();
    for (const Complex& s : roots)
        if (s.imag() > 0) return &s;
    return &roots.front();
}

} // namespace

NaturalFrequencyMap::NaturalFrequencyMap(QWidget* parent) : QCustomPlot(parent) {
    setObjectName("natural_frequency_map");
    setAccessibleName(tr("Map of natural frequencies"));
    setFocusPolicy(Qt::StrongFocus);
    setMinimumSize(150, 150);
    axisRect()->setupFullAxesBox(true);
    axisRect()->setMinimumMargins(QMargins(36, 18, 10, 38));
    for (QCPAxis* axis : {xAxis, yAxis})
        axis->setTicker(QSharedPointer<PlainTicker>::create()), axis->ticker()->setTickCount(3);
    titles_ << add_title(this, axisRect(), tr("natural frequencies, Hz"), false)
            << add_title(this, axisRect(), tr("growth, 1/s"), true);
    right_half_ = new QCPItemRect(this);
    right_half_->topLeft->setTypeY(QCPItemPosition::ptAxisRectRatio);
    right_half_->topLeft->setCoords(0, 0);
    right_half_->bottomRight->setType(QCPItemPosition::ptAxisRectRatio);
    right_half_->bottomRight->setCoords(1, 1);
    right_half_->setLayer("background");
    axis_ = new QCPItemLine(this);
    for (QCPItemPosition* end : {axis_->start, axis_->end}) end->setTypeY(QCPItemPosition::ptAxisRectRatio);
    axis_->start->setCoords(0, 0);
    axis_->end->setCoords(0, 1);
    real_ = new QCPItemLine(this);
    for (QCPItemPosition* end : {real_->start, real_->end}) end->setTypeX(QCPItemPosition::ptAxisRectRatio);
    real_->start->setCoords(0, 0);
    real_->end->setCoords(1, 0);
    trail_ = new QCPCurve(xAxis, yAxis);
    distance_ = new QCPItemLine(this);
    roots_ = new QCPGraph(xAxis, yAxis);
    roots_->setLineStyle(QCPGraph::lsNone);
    const auto corner = [&](double x, double y, Qt::Alignment alignment, const QString& text) {
        auto* item = new QCPItemText(this);
        item->position->setType(QCPItemPosition::ptAxisRectRatio);
        item->position->setCoords(x, y);
        item->setPositionAlignment(alignment);
        item->setPadding(QMargins(7, 5, 7, 5));
        item->setText(text);
        return item;
    };
    growth_ = corner(1, 0, Qt::AlignRight | Qt::AlignTop, {});
    grows_ = corner(1, 1, Qt::AlignRight | Qt::AlignBottom, tr("grows"));
    dies_ = corner(0, 1, Qt::AlignLeft | Qt::AlignBottom, tr("dies away"));
    outside_ = corner(0, 0, Qt::AlignLeft | Qt::AlignTop, {});
    setInteraction(QCP::iRangeZoom);
    setSelectionRectMode(QCP::srmZoom);
    xAxis->setRange(-1000, 700);
    yAxis->setRange(-1350, 1350);
    restyle();
}

void NaturalFrequencyMap::restyle() {
    const Theme& t = theme();
    const double strength = stale_ ? 0.4 : 1;
    style_plot(this);
    style_axes(axisRect());
    for (QCPItemText* title : titles_) style_text(title, t.soft, Theme::axis_px);
    right_half_->setPen(Qt::NoPen);
    right_half_->setBrush(t.grows_ground);
    axis_->setPen(QPen(t.soft, 1.2));
    real_->setPen(QPen(t.grid, 1));
    trail_->setPen(QPen(t.soft, 1.5, Qt::DotLine));
    QPen thick(QColor(t.band.red(), t.band.green(), t.band.blue(), static_cast<int>(255 * strength)), 5);
    thick.setCapStyle(Qt::FlatCap);
    distance_->setPen(thick);
    roots_->setScatterStyle(
        QCPScatterStyle(QCPScatterStyle::ssCross, QPen(faded(t.cut, strength), 2.6), Qt::NoBrush, 11));
    style_text(growth_, t.cut, Theme::note_px, QFont::DemiBold);
    style_text(grows_, t.soft, Theme::axis_px);
    style_text(dies_, t.soft, Theme::axis_px);
    style_text(outside_, t.soft, Theme::axis_px);
    replot(rpQueuedReplot);
}

void NaturalFrequencyMap::set_stale(bool stale) {
    if (stale_ == stale) return;
    stale_ = stale;
    restyle();
}

/// The way the pair of interest has come, while values of one circuit change; another circuit starts a new one.
void NaturalFrequencyMap::extend_trail() {
    QStringList parts;
    if (shown_ && shown_->design)
        for (const Part& part : shown_->design->parts) parts << QString::fromStdString(part.ref);
    if (parts != trail_of_) trail_->data()->clear(), trail_of_ = parts;
    const Complex* root = shown_ ? root_of_interest(shown_->findings) : nullptr;
    if (!root || root->imag() == 0) return;
    std::vector<QCPCurveData> upper;
    for (const QCPCurveData& point : *trail_->data())
        if (point.t >= 0) upper.push_back(point);
    if (!upper.empty() && upper.back().key == root->real() && upper.back().value == root->imag() / two_pi) return;
    upper.emplace_back(0, root->real(), root->imag() / two_pi);
    if (upper.size() > longest_trail) upper.erase(upper.begin());
    QVector<QCPCurveData> both;
    for (std::size_t k = upper.size(); k-- > 0;)
        both << QCPCurveData(-2.0 - static_cast<double>(k), upper[k].key, -upper[k].value);
    both << QCPCurveData(-1, NAN, NAN);
    for (std::size_t k = 0; k < upper.size(); ++k)
        both << QCPCurveData(static_cast<double>(k), upper[k].key, upper[k].value);
    trail_->data()->set(both, false);
}

void NaturalFrequencyMap::show_results(const ShownPtr& shown) {
    shown_ = shown;
    roots_->data()->clear();
    if (shown_ && shown_->findings.small_signal)
        for (const Complex s : shown_->findings.small_signal->natural_frequencies)
            roots_->addData(s.real(), s.imag() / two_pi);
    const Complex* root = shown_ ? root_of_interest(shown_->findings) : nullptr;
    distance_->setVisible(root);
    if (root) {
        distance_->start->setCoords(0, root->imag() / two_pi);
        distance_->end->setCoords(root->real(), root->imag() / two_pi);
        growth_->setText((root->real() > 0 ? "+" : "") +
                         QString::fromStdString(plain_text(root->real(), std::abs(root->real()) < 10 ? 2 : 0)) +
                         " 1/s");
    } else {
        growth_->setText({});
    }
    setAccessibleDescription(root ? tr("Right-most natural frequency: growth %1.").arg(growth_->text())
                                  : tr("No natural frequencies."));
    extend_trail();
    reset_ranges();
    restyle();
}

void NaturalFrequencyMap::reset_ranges() {
    const Complex* root = shown_ ? root_of_interest(shown_->findings) : nullptr;
    if (!root) return;
    const double f = std::abs(root->imag()) / two_pi;
    double reach = std::max(2.4 * std::abs(root->real()), 0.05 * std::abs(root->imag()));
    for (const QCPCurveData& point : *trail_->data())
        if (std::isfinite(point.key)) reach = std::max(reach, 1.2 * std::abs(point.key));
    if (reach == 0) reach = 1;
    xAxis->setRange(-reach * 1.25, reach);
    const double tall = f > 0 ? 1.4 * f : reach / two_pi;
    yAxis->setRange(-tall, tall);
    int left = 0;
    for (const Complex s : shown_->findings.small_signal->natural_frequencies) left += s.real() < xAxis->range().lower;
    outside_->setText(left > 0 ? tr("← %1 more").arg(left) : QString());
    replot(rpQueuedReplot);
}

void NaturalFrequencyMap::mouseDoubleClickEvent(QMouseEvent* event) {
    reset_ranges();
    event->accept();
}

void NaturalFrequencyMap::keyPressEvent(QKeyEvent* event) {
    const auto zoom = [&](double factor) {
        xAxis->scaleRange(factor, 0);
        yAxis->scaleRange(factor, 0);
        replot(rpQueuedReplot);
    };
    switch (event->key()) {
    case Qt::Key_Plus:
        zoom(0.7);
        break;
    case Qt::Key_Minus:
        zoom(1 / 0.7);
        break;
    case Qt::Key_Home:
        reset_ranges();
        break;
    default:
        QCustomPlot::keyPressEvent(event);
    }
}

} // namespace sinewright::ui
