#include "ui/curves/plane_plot.hpp"
#include <cmath>

namespace sinewright::ui {

namespace {

/// Points far outside only cost drawing time; they are pulled in to where nothing of them shows.
constexpr double far_away = 1e4;

void fill(QCPCurve* target, const LoopCurve& curve, double sign) {
    QVector<QCPCurveData> data;
    data.reserve(static_cast<int>(curve.gain.size()));
    for (std::size_t k = 0; k < curve.gain.size(); ++k) {
        Complex gain = curve.gain[k];
        if (const double size = std::abs(gain); size > far_away) gain *= far_away / size;
        data << QCPCurveData(static_cast<double>(k), gain.real(), sign * gain.imag());
    }
    target->data()->set(data, true);
}

QString encirclement_words(const Findings& findings) {
    if (!findings.small_signal || !findings.loop || !findings.loop->encirclements) return {};
    const int turns = *findings.loop->encirclements;
    const QString outcome = findings.small_signal->outcome == Outcome::starts    ? QObject::tr("starts")
                            : findings.small_signal->outcome == Outcome::latches ? QObject::tr("latches")
                                                                                 : QObject::tr("dies away");
    QString times = turns == 0 ? QObject::tr("not encircled") : QObject::tr("encircled %1 times").arg(std::abs(turns));
    // Both halves of the curve count; a pair of natural frequencies is one turn of each half.
    if (turns == 2) times = QObject::tr("encircled once by each half");
    if (turns == 1) times = QObject::tr("encircled once");
    return times + ": " + outcome;
}

} // namespace

PlanePlot::PlanePlot(QWidget* parent) : QCustomPlot(parent) {
    setObjectName("plane_plot");
    setAccessibleName(tr("Loop gain in the complex plane"));
    setFocusPolicy(Qt::StrongFocus);
    setMinimumSize(150, 150);
    axisRect()->setupFullAxesBox(true);
    // Fixed margins: were they to follow the labels, the scales would lose their equality with every new label.
    axisRect()->setAutoMargins(QCP::msNone);
    axisRect()->setMargins(QMargins(42, 18, 8, 38));
    for (QCPAxis* axis : {xAxis, yAxis})
        axis->setTicker(QSharedPointer<PlainTicker>::create()), axis->ticker()->setTickCount(4);
    titles_ << add_title(this, axisRect(), tr("loop gain in the complex plane"), false)
            << add_title(this, axisRect(), tr("real"), true);
    const auto axis_line = [&](bool horizontal) {
        auto* line = new QCPItemLine(this);
        for (QCPItemPosition* end : {line->start, line->end}) {
            end->setTypeX(horizontal ? QCPItemPosition::ptAxisRectRatio : QCPItemPosition::ptPlotCoords);
            end->setTypeY(horizontal ? QCPItemPosition::ptPlotCoords : QCPItemPosition::ptAxisRectRatio);
        }
        line->start->setCoords(0, 0);
        line->end->setCoords(horizontal ? 1 : 0, horizontal ? 0 : 1);
        return line;
    };
    real_axis_ = axis_line(true);
    imaginary_axis_ = axis_line(false);
    ghost_ = new QCPCurve(xAxis, yAxis);
    mirrored_ = new QCPCurve(xAxis, yAxis);
    curve_ = new QCPCurve(xAxis, yAxis);
    margin_ = new QCPItemLine(this);
    arrow_ = new QCPItemLine(this);
    arrow_->setHead(QCPLineEnding(QCPLineEnding::esSpikeArrow, 9, 9));
    critical_ = new QCPGraph(xAxis, yAxis);
    critical_->setLineStyle(QCPGraph::lsNone);
    critical_->addData(1, 0);
    dot_ = new QCPGraph(xAxis, yAxis);
    dot_->setLineStyle(QCPGraph::lsNone);
    critical_label_ = new QCPItemText(this);
    critical_label_->position->setCoords(1, 0);
    critical_label_->setPositionAlignment(Qt::AlignRight | Qt::AlignBottom);
    critical_label_->setPadding(QMargins(0, 0, 6, 8));
    critical_label_->setText(tr("critical +1"));
    words_ = new QCPItemText(this);
    words_->position->setType(QCPItemPosition::ptAxisRectRatio);
    words_->position->setCoords(0.5, 0.97);
    words_->setPositionAlignment(Qt::AlignHCenter | Qt::AlignBottom);
    setSelectionRectMode(QCP::srmZoom);
    connect(xAxis, qOverload<const QCPRange&>(&QCPAxis::rangeChanged), this, [this] {
        if (selectionRect() && selectionRect()->isActive()) chosen_by_hand_ = true;
    });
    restyle();
}

void PlanePlot::restyle() {
    const Theme& t = theme();
    const double strength = stale_ ? 0.4 : 1;
    style_plot(this);
    style_axes(axisRect());
    for (QCPItemText* title : titles_) style_text(title, t.soft, Theme::axis_px);
    for (QCPItemLine* line : {real_axis_, imaginary_axis_}) line->setPen(QPen(t.soft, 1.2));
    curve_->setPen(curve_pen(faded(t.first_curve, strength), 2.2));
    mirrored_->setPen(curve_pen(faded(t.first_curve, 0.45 * strength), 1.2));
    ghost_->setPen(QPen(t.ghost, 1.5, Qt::DotLine));
    arrow_->setPen(curve_pen(faded(t.first_curve, strength), 2));
    QPen thick = curve_pen(faded(t.band, strength), 7);
    thick.setColor(QColor(t.band.red(), t.band.green(), t.band.blue(), static_cast<int>(255 * strength)));
    margin_->setPen(thick);
    critical_->setScatterStyle(
        QCPScatterStyle(QCPScatterStyle::ssCircle, QPen(faded(t.cut, strength), 2.2), Qt::NoBrush, 13));
    dot_->setScatterStyle(QCPScatterStyle(QCPScatterStyle::ssDisc, QPen(t.ink), QBrush(t.ink), 7));
    style_text(critical_label_, t.cut, Theme::note_px, QFont::DemiBold);
    const bool starts =
        shown_ && shown_->findings.small_signal && shown_->findings.small_signal->outcome == Outcome::starts;
    style_text(words_, starts ? t.meets : t.misses, Theme::note_px, QFont::DemiBold);
    replot(rpQueuedReplot);
}

void PlanePlot::set_stale(bool stale) {
    if (stale_ == stale) return;
    stale_ = stale;
    restyle();
}

void PlanePlot::set_baseline(const LoopCurve& baseline) {
    fill(ghost_, baseline, 1);
    replot(rpQueuedReplot);
}

void PlanePlot::show_results(const ShownPtr& shown) {
    shown_ = shown;
    static const LoopCurve none;
    const LoopCurve& curve = shown_ ? shown_->curve : none;
    fill(curve_, curve, 1);
    fill(mirrored_, curve, -1);
    words_->setText(shown_ ? encirclement_words(shown_->findings) : QString());
    setAccessibleDescription(words_->text().isEmpty() ? tr("No curve.")
                                                      : tr("The critical point is %1.").arg(words_->text()));
    const bool has_point = shown_ && shown_->findings.loop && shown_->findings.loop->barkhausen;
    margin_->setVisible(has_point);
    if (has_point) {
        margin_->start->setCoords(1, 0);
        margin_->end->setCoords(std::min(shown_->findings.loop->barkhausen->gain, far_away), 0);
    }
    place_arrow();
    if (!chosen_by_hand_) reset_ranges();
    set_cursor(cursor_hz_);
    restyle();
}

/// Rising frequency, at the point of the curve a quarter on.
void PlanePlot::place_arrow() {
    const bool shows = shown_ && shown_->curve.gain.size() > 8;
    arrow_->setVisible(shows);
    if (!shows) return;
    const auto& gain = shown_->curve.gain;
    std::size_t best = gain.size() / 2;
    for (std::size_t k = 1; k + 1 < gain.size();
         ++k) // where the curve is furthest from the real axis, so the arrow shows
        if (std::abs(gain[k]) < 3 &&
            std::abs(gain[k].imag()) > std::abs(gain[best].imag()) * (std::abs(gain[best]) < 3 ? 1 : 0))
            best = k;
    if (best == 0 || best + 1 >= gain.size()) best = gain.size() / 2;
    const Complex along = gain[best + 1] - gain[best - 1],
                  tip = gain[best] + along * (0.01 / std::max(std::abs(along), 1e-12));
    arrow_->start->setCoords(gain[best].real(), gain[best].imag());
    arrow_->end->setCoords(tip.real(), tip.imag());
}

void PlanePlot::equal_scales(QPointF centre, double half_height) {
    const QSize size = axisRect()->size();
    const double aspect = size.height() > 0 ? static_cast<double>(size.width()) / size.height() : 1;
    xAxis->setRange(centre.x() - half_height * aspect, centre.x() + half_height * aspect);
    yAxis->setRange(centre.y() - half_height, centre.y() + half_height);
}

/// Zero, +1 and the curve round them; what lies further than a few units is left outside.
void PlanePlot::reset_ranges() {
    chosen_by_hand_ = false;
    double left = -0.15, right = 1.2, tall = 0.45;
    double reach = 2.5;
    if (shown_ && shown_->findings.loop && shown_->findings.loop->barkhausen)
        reach = std::max(reach, std::min(1.4 * shown_->findings.loop->barkhausen->gain, far_away));
    if (shown_)
        for (const Complex gain : shown_->curve.gain) {
            if (std::abs(gain) > reach) continue;
            left = std::min(left, gain.real() - 0.1), right = std::max(right, gain.real() + 0.1),
            tall = std::max(tall, std::abs(gain.imag()) + 0.1);
        }
    const QSize size = axisRect()->size();
    const double aspect = size.height() > 0 ? static_cast<double>(size.width()) / size.height() : 1;
    equal_scales({(left + right) / 2, 0}, std::max(tall * 1.12, (right - left) / 2 / aspect));
    replot(rpQueuedReplot);
}

void PlanePlot::set_cursor(double frequency_hz) {
    cursor_hz_ = frequency_hz;
    dot_->data()->clear();
    if (frequency_hz > 0 && shown_ && !shown_->curve.gain.empty()) {
        const auto& f = shown_->curve.frequency_hz;
        const auto k = std::min<std::size_t>(
            static_cast<std::size_t>(std::lower_bound(f.begin(), f.end(), frequency_hz) - f.begin()), f.size() - 1);
        dot_->addData(shown_->curve.gain[k].real(), shown_->curve.gain[k].imag());
    }
    replot(rpQueuedReplot);
}

void PlanePlot::zoom(double factor, QPointF at) {
    chosen_by_hand_ = true;
    xAxis->scaleRange(factor, at.x());
    yAxis->scaleRange(factor, at.y());
    replot(rpQueuedReplot);
}

void PlanePlot::resizeEvent(QResizeEvent* event) {
    QCustomPlot::resizeEvent(event);
    replot(rpImmediateRefresh);
    if (chosen_by_hand_)
        equal_scales({xAxis->range().center(), yAxis->range().center()}, yAxis->range().size() / 2);
    else
        reset_ranges();
}

void PlanePlot::mouseDoubleClickEvent(QMouseEvent* event) {
    reset_ranges();
    event->accept();
}

void PlanePlot::wheelEvent(QWheelEvent* event) {
    zoom(std::pow(0.8, event->angleDelta().y() / 120.0),
         {xAxis->pixelToCoord(event->position().x()), yAxis->pixelToCoord(event->position().y())});
    event->accept();
}

void PlanePlot::keyPressEvent(QKeyEvent* event) {
    switch (event->key()) {
    case Qt::Key_Plus:
        zoom(0.7, {1, 0});
        break;
    case Qt::Key_Minus:
        zoom(1 / 0.7, {1, 0});
        break;
    case Qt::Key_Home:
        reset_ranges();
        break;
    default:
        QCustomPlot::keyPressEvent(event);
    }
}

} // namespace sinewright::ui
