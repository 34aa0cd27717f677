#include "ui/curves/frequency_plots.hpp"
#include "core/quantity/quantity.hpp"
#include "core/review/verdict.hpp"
#include <cmath>
#include <numbers>

namespace sinewright::ui {

namespace {

constexpr double degrees = 180 / std::numbers::pi;
double decibel(Complex gain) { return 20 * std::log10(std::abs(gain)); }

void fill_gain(QCPGraph* graph, const LoopCurve& curve) {
    QVector<QCPGraphData> data;
    data.reserve(static_cast<int>(curve.gain.size()));
    for (std::size_t k = 0; k < curve.gain.size(); ++k)
        data << QCPGraphData(curve.frequency_hz[k], decibel(curve.gain[k]));
    graph->data()->set(data, true);
}

/// A gap stands where the phase passes ±180°, so that no line runs across the plot.
void fill_phase(QCPGraph* graph, const LoopCurve& curve) {
    QVector<QCPGraphData> data;
    double last = 0;
    for (std::size_t k = 0; k < curve.gain.size(); ++k) {
        const double phase = std::arg(curve.gain[k]) * degrees;
        if (k > 0 && std::abs(phase - last) > 180)
            data << QCPGraphData(std::sqrt(curve.frequency_hz[k - 1] * curve.frequency_hz[k]), NAN);
        data << QCPGraphData(curve.frequency_hz[k], phase);
        last = phase;
    }
    graph->data()->set(data, true);
}

QCPGraph* ring(QCPAxis* x, QCPAxis* y) {
    auto* graph = new QCPGraph(x, y);
    graph->setLineStyle(QCPGraph::lsNone);
    return graph;
}

} // namespace

FrequencyPlots::FrequencyPlots(QWidget* parent) : QCustomPlot(parent) {
    setObjectName("frequency_plots");
    setAccessibleName(tr("Loop gain and phase against frequency"));
    setFocusPolicy(Qt::StrongFocus);
    setMinimumHeight(240);
    build_axes();
    build_items();
    build_lens();
    restyle();
}

void FrequencyPlots::build_axes() {
    plotLayout()->clear();
    gain_rect_ = new QCPAxisRect(this);
    phase_rect_ = new QCPAxisRect(this);
    plotLayout()->addElement(0, 0, gain_rect_);
    plotLayout()->addElement(1, 0, phase_rect_);
    plotLayout()->setRowStretchFactor(0, 1.45);
    plotLayout()->setRowSpacing(24);
    auto* margins = new QCPMarginGroup(this);
    for (QCPAxisRect* rect : {gain_rect_, phase_rect_}) {
        rect->setupFullAxesBox(true);
        rect->setMarginGroup(QCP::msLeft | QCP::msRight, margins);
        rect->setMinimumMargins(QMargins(36, 2, 10, 2));
        for (QCPAxis* axis : {rect->axis(QCPAxis::atBottom), rect->axis(QCPAxis::atTop)}) {
            axis->setScaleType(QCPAxis::stLogarithmic);
            axis->setTicker(QSharedPointer<DecadeTicker>::create());
        }
        rect->axis(QCPAxis::atBottom)->grid()->setLayer("grid");
        rect->axis(QCPAxis::atLeft)->setTicker(QSharedPointer<PlainTicker>::create());
        rect->setRangeDrag(Qt::Horizontal);
        rect->setRangeZoom(Qt::Horizontal);
    }
    gain_rect_->setMinimumMargins(QMargins(36, 18, 10, 4));
    phase_rect_->setMinimumMargins(QMargins(36, 18, 10, 38));
    gain_rect_->axis(QCPAxis::atBottom)->setTickLabels(false);
    phase_rect_->axis(QCPAxis::atLeft)->setTicker(QSharedPointer<PlainTicker>::create(90));
    setInteraction(QCP::iRangeZoom);
    setSelectionRectMode(QCP::srmZoom);
    QCPAxis *gain_x = gain_rect_->axis(QCPAxis::atBottom), *phase_x = phase_rect_->axis(QCPAxis::atBottom);
    connect(gain_x, qOverload<const QCPRange&>(&QCPAxis::rangeChanged), phase_x,
            qOverload<const QCPRange&>(&QCPAxis::setRange));
    connect(phase_x, qOverload<const QCPRange&>(&QCPAxis::rangeChanged), gain_x,
            qOverload<const QCPRange&>(&QCPAxis::setRange));
    gain_x->setRange(100, 10e3);
    gain_rect_->axis(QCPAxis::atLeft)->setRange(-20, 4);
    phase_rect_->axis(QCPAxis::atLeft)->setRange(-90, 90);
}

void FrequencyPlots::build_items() {
    QCPAxis *gx = gain_rect_->axis(QCPAxis::atBottom), *gy = gain_rect_->axis(QCPAxis::atLeft);
    QCPAxis *px = phase_rect_->axis(QCPAxis::atBottom), *py = phase_rect_->axis(QCPAxis::atLeft);
    titles_ << add_title(this, gain_rect_, tr("loop gain, dB"), false)
            << add_title(this, phase_rect_, tr("phase, degrees"), false)
            << add_title(this, phase_rect_, tr("frequency, Hz"), true);
    const auto anchor = [](QCPItemPosition* position, QCPAxisRect* rect, QCPAxis* x, QCPAxis* y) {
        position->setAxes(x, y);
        position->setAxisRect(rect);
    };
    band_ = new QCPItemRect(this);
    for (QCPItemPosition* corner : {band_->topLeft, band_->bottomRight}) {
        anchor(corner, gain_rect_, gx, gy);
        corner->setTypeX(QCPItemPosition::ptAxisRectRatio);
        corner->setTypeY(QCPItemPosition::ptPlotCoords);
    }
    band_->setClipAxisRect(gain_rect_);
    const auto horizontal = [&](QCPAxisRect* rect, QCPAxis* x, QCPAxis* y) {
        auto* line = new QCPItemLine(this);
        for (QCPItemPosition* end : {line->start, line->end}) {
            anchor(end, rect, x, y);
            end->setTypeX(QCPItemPosition::ptAxisRectRatio);
            end->setTypeY(QCPItemPosition::ptPlotCoords);
        }
        line->start->setCoords(0, 0);
        line->end->setCoords(1, 0);
        line->setClipAxisRect(rect);
        return line;
    };
    zero_gain_ = horizontal(gain_rect_, gx, gy);
    zero_phase_ = horizontal(phase_rect_, px, py);
    const auto vertical = [&] { // one line through both plots
        auto* line = new QCPItemLine(this);
        anchor(line->start, gain_rect_, gx, gy);
        anchor(line->end, phase_rect_, px, py);
        for (QCPItemPosition* end : {line->start, line->end}) {
            end->setTypeX(QCPItemPosition::ptPlotCoords);
            end->setTypeY(QCPItemPosition::ptAxisRectRatio);
        }
        line->setClipToAxisRect(false);
        line->setVisible(false);
        return line;
    };
    point_line_ = vertical();
    cursor_line_ = vertical();
    ghost_gain_ = new QCPGraph(gx, gy);
    ghost_phase_ = new QCPGraph(px, py);
    gain_ = new QCPGraph(gx, gy);
    phase_ = new QCPGraph(px, py);
    gain_ring_ = ring(gx, gy);
    phase_ring_ = ring(px, py);
    const auto text_at = [&](QCPAxisRect* rect, QCPAxis* x, QCPAxis* y) {
        auto* text = new QCPItemText(this);
        anchor(text->position, rect, x, y);
        text->setClipToAxisRect(false);
        text->setVisible(false);
        return text;
    };
    point_label_ = text_at(phase_rect_, px, py);
    point_label_->position->setTypeX(QCPItemPosition::ptPlotCoords);
    point_label_->position->setTypeY(QCPItemPosition::ptAxisRectRatio);
    point_label_->setPadding(QMargins(8, 4, 8, 0));
    readout_ = text_at(gain_rect_, gx, gy);
    readout_->position->setTypeX(QCPItemPosition::ptAxisRectRatio);
    readout_->position->setTypeY(QCPItemPosition::ptAxisRectRatio);
    readout_->position->setCoords(1, 0);
    readout_->setPositionAlignment(Qt::AlignRight | Qt::AlignBottom);
    readout_->setPadding(QMargins(0, 0, 0, 4));
}

void FrequencyPlots::build_lens() {
    addLayer("lens", layer("main"), QCustomPlot::limAbove);
    lens_card_ = new QCPItemRect(this);
    for (QCPItemPosition* corner : {lens_card_->topLeft, lens_card_->bottomRight})
        corner->setType(QCPItemPosition::ptAbsolute);
    lens_card_->setClipToAxisRect(false);
    lens_card_->setLayer("lens"); // first in its layer: the texts and curves lie on it
    lens_rect_ = new QCPAxisRect(this, false);
    lens_rect_->addAxis(QCPAxis::atBottom)->setScaleType(QCPAxis::stLogarithmic);
    lens_rect_->addAxis(QCPAxis::atLeft);
    lens_rect_->setAutoMargins(QCP::msNone);
    lens_rect_->setMargins(QMargins(0, 0, 0, 0));
    for (QCPAxis* axis : lens_rect_->axes()) axis->setVisible(false), axis->grid()->setVisible(false);
    gain_rect_->insetLayout()->addElement(lens_rect_, QRectF(0.35, 0.4, 0.3, 0.5));
    QCPAxis *x = lens_rect_->axis(QCPAxis::atBottom), *y = lens_rect_->axis(QCPAxis::atLeft);
    lens_zero_ = new QCPGraph(x, y);
    lens_curve_ = new QCPGraph(x, y);
    lens_curve_->setChannelFillGraph(lens_zero_);
    lens_ring_ = ring(x, y);
    margin_ = new QCPItemText(this);
    lens_zero_label_ = new QCPItemText(this);
    for (QCPItemText* text : {margin_, lens_zero_label_}) {
        text->position->setType(QCPItemPosition::ptAbsolute);
        text->setClipToAxisRect(false);
        text->setLayer("lens");
    }
    for (QCPLayerable* item : {static_cast<QCPLayerable*>(lens_zero_), static_cast<QCPLayerable*>(lens_curve_),
                               static_cast<QCPLayerable*>(lens_ring_)})
        item->setLayer("lens");
    margin_->setPositionAlignment(Qt::AlignLeft | Qt::AlignTop);
    lens_zero_label_->setPositionAlignment(Qt::AlignRight | Qt::AlignTop);
    lens_zero_label_->setText(tr("0 dB"));
}

void FrequencyPlots::restyle() {
    const Theme& t = theme();
    const double strength = stale_ ? 0.4 : 1;
    style_plot(this);
    for (QCPAxisRect* rect : {gain_rect_, phase_rect_}) style_axes(rect);
    for (QCPItemText* title : titles_) style_text(title, t.soft, Theme::axis_px);
    gain_->setPen(curve_pen(faded(t.first_curve, strength), 2.2));
    phase_->setPen(curve_pen(faded(t.second_curve, strength), 2.2));
    QPen dotted(t.ghost, 1.5, Qt::DotLine);
    ghost_gain_->setPen(dotted);
    ghost_phase_->setPen(dotted);
    const QPen zero(t.soft, 1.2);
    zero_gain_->setPen(zero);
    zero_phase_->setPen(zero);
    point_line_->setPen(QPen(faded(t.cut, strength), 1.5, Qt::DashLine));
    cursor_line_->setPen(QPen(t.soft, 1));
    const auto is_negative = shown_ && shown_->findings.loop && shown_->findings.loop->barkhausen &&
                             shown_->findings.loop->barkhausen->startup_margin_db < 0;
    const QColor band = is_negative ? faded(t.misses, 0.35) : t.band;
    band_->setPen(Qt::NoPen);
    band_->setBrush(faded(band, strength));
    for (QCPGraph* mark : {gain_ring_, phase_ring_, lens_ring_})
        mark->setScatterStyle(
            QCPScatterStyle(QCPScatterStyle::ssCircle, QPen(faded(t.cut, strength), 2.2), QBrush(t.raised), 10));
    lens_card_->setPen(QPen(t.line, 1));
    lens_card_->setBrush(t.panel);
    lens_zero_->setPen(QPen(t.ink, 1.2));
    lens_curve_->setPen(gain_->pen());
    lens_curve_->setBrush(faded(band, strength));
    style_text(margin_, t.ink, Theme::note_px, QFont::DemiBold);
    style_text(lens_zero_label_, t.soft, Theme::axis_px);
    style_text(point_label_, t.cut, Theme::note_px, QFont::DemiBold);
    style_text(readout_, t.ink, Theme::axis_px);
    replot(rpQueuedReplot);
}

void FrequencyPlots::set_stale(bool stale) {
    if (stale_ == stale) return;
    stale_ = stale;
    restyle();
}

void FrequencyPlots::show_results(const ShownPtr& shown) {
    const bool first_curve = !shown_ || shown_->curve.gain.empty();
    shown_ = shown;
    fill_graphs();
    if (shown_ && !shown_->curve.gain.empty() && (first_curve || !ranges_chosen_))
        reset_ranges();
    else if (ranges_chosen_)
        choose_ranges();
    place_point();
    place_lens();
    set_cursor(cursor_hz_);
    restyle();
}

void FrequencyPlots::set_baseline(const LoopCurve& baseline) {
    fill_gain(ghost_gain_, baseline);
    fill_phase(ghost_phase_, baseline);
    replot(rpQueuedReplot);
}

void FrequencyPlots::fill_graphs() {
    static const LoopCurve none;
    const LoopCurve& curve = shown_ ? shown_->curve : none;
    fill_gain(gain_, curve);
    fill_phase(phase_, curve);
    fill_gain(lens_curve_, shown_ ? shown_->lens : none);
}

void FrequencyPlots::reset_ranges() {
    ranges_chosen_ = true;
    choose_ranges();
    replot(rpQueuedReplot);
}

/// The whole curve in frequency; in gain the neighbourhood of 0 dB, however far the curve reaches elsewhere.
void FrequencyPlots::choose_ranges() {
    if (!shown_ || shown_->curve.gain.empty()) return;
    const LoopCurve& curve = shown_->curve;
    gain_rect_->axis(QCPAxis::atBottom)->setRange(curve.frequency_hz.front(), curve.frequency_hz.back());
    double low = INFINITY, high = -INFINITY;
    bool wide = false;
    for (const Complex gain : curve.gain) {
        low = std::min(low, decibel(gain)), high = std::max(high, decibel(gain));
        wide = wide || std::abs(std::arg(gain)) * degrees > 92;
    }
    const double centre = shown_->findings.loop && shown_->findings.loop->barkhausen
                              ? decibel(shown_->findings.loop->barkhausen->gain)
                              : 0;
    const double top = std::max(4.0, std::min(high + 2, std::max(centre, 0.0) + 40));
    const double bottom = std::min(-6.0, std::max(low - 2, std::min(centre, 0.0) - 40));
    gain_rect_->axis(QCPAxis::atLeft)->setRange(bottom, top);
    phase_rect_->axis(QCPAxis::atLeft)->setRange(wide ? -180 : -90, wide ? 180 : 90);
}

void FrequencyPlots::place_point() {
    const auto* point = shown_ && shown_->findings.loop && shown_->findings.loop->barkhausen
                            ? &*shown_->findings.loop->barkhausen
                            : nullptr;
    for (QCPLayerable* item : {static_cast<QCPLayerable*>(band_), static_cast<QCPLayerable*>(point_line_),
                               static_cast<QCPLayerable*>(point_label_)})
        item->setVisible(point);
    gain_ring_->data()->clear();
    phase_ring_->data()->clear();
    lens_ring_->data()->clear();
    if (!point) {
        setAccessibleDescription(tr("No Barkhausen point."));
        return;
    }
    const double level_db = decibel(point->gain);
    gain_ring_->addData(point->frequency_hz, level_db);
    phase_ring_->addData(point->frequency_hz, 0);
    lens_ring_->addData(point->frequency_hz, level_db);
    band_->topLeft->setCoords(0, std::max(level_db, 0.0));
    band_->bottomRight->setCoords(1, std::min(level_db, 0.0));
    point_line_->start->setCoords(point->frequency_hz, 0);
    point_line_->end->setCoords(point->frequency_hz, 1);
    const QCPRange range = gain_rect_->axis(QCPAxis::atBottom)->range();
    const bool room_right = std::log(point->frequency_hz / range.lower) < 0.55 * std::log(range.upper / range.lower);
    point_label_->position->setCoords(point->frequency_hz, 0);
    point_label_->setPositionAlignment((room_right ? Qt::AlignLeft : Qt::AlignRight) | Qt::AlignTop);
    point_label_->setText(
        tr("Barkhausen point %1").arg(QString::fromStdString(result_text("frequency_hz", point->frequency_hz))));
    const QString margin = QString::fromStdString(result_text("startup_margin_db", point->startup_margin_db));
    margin_->setText(point->falls ? tr("start-up margin %1").arg(margin)
                                  : tr("start-up margin %1, phase rises").arg(margin));
    setAccessibleDescription(point_label_->text() + ", " + margin_->text());
}

/// The card goes where it hides least of the curve; it leaves when there is no room.
void FrequencyPlots::place_lens() {
    const QRect inside = gain_rect_->rect();
    const QSize size(
        std::max(172,
                 QFontMetrics(theme().font(Theme::note_px, QFont::DemiBold)).horizontalAdvance(margin_->text()) + 20),
        92);
    const bool shows = shown_ && !shown_->lens.gain.empty() && inside.width() > size.width() + 60 &&
                       inside.height() > size.height() + 30;
    for (QCPLayerable* item : std::initializer_list<QCPLayerable*>{lens_card_, lens_zero_, lens_curve_, lens_ring_,
                                                                   margin_, lens_zero_label_})
        item->setVisible(shows);
    if (!shows) return;
    QCPAxis *x = gain_rect_->axis(QCPAxis::atBottom), *y = gain_rect_->axis(QCPAxis::atLeft);
    QRect best;
    int least = std::numeric_limits<int>::max();
    for (const double across : {0.5, 0.0, 1.0, 0.25, 0.75})
        for (const double down : {1.0, 0.0}) {
            const QRect card(
                QPoint(inside.left() + 10 + static_cast<int>(across * (inside.width() - size.width() - 20)),
                       inside.top() + 8 + static_cast<int>(down * (inside.height() - size.height() - 16))),
                size);
            int hidden = 0;
            for (std::size_t k = 0; k < shown_->curve.gain.size(); k += 3)
                hidden += card.contains(QPoint(static_cast<int>(x->coordToPixel(shown_->curve.frequency_hz[k])),
                                               static_cast<int>(y->coordToPixel(decibel(shown_->curve.gain[k])))));
            if (card.top() < y->coordToPixel(0) && card.bottom() > y->coordToPixel(0))
                hidden += 20; // the 0 dB line and the band
            if (hidden < least) least = hidden, best = card;
        }
    lens_card_->topLeft->setPixelPosition(best.topLeft());
    lens_card_->bottomRight->setPixelPosition(best.bottomRight());
    margin_->position->setPixelPosition(best.topLeft() + QPoint(9, 7));
    const QRectF plot(best.left() + 1, best.top() + 28, best.width() - 2, best.height() - 30);
    const QRectF outer = inside;
    gain_rect_->insetLayout()->setInsetRect(0, QRectF((plot.left() - outer.left()) / outer.width(),
                                                      (plot.top() - outer.top()) / outer.height(),
                                                      plot.width() / outer.width(), plot.height() / outer.height()));
    double low = 0, high = 0;
    for (const Complex gain : shown_->lens.gain)
        low = std::min(low, decibel(gain)), high = std::max(high, decibel(gain));
    const double level_db = decibel(shown_->findings.loop->barkhausen->gain),
                 size_db = std::max(std::abs(level_db), 1e-4);
    low = std::max(low, std::min(level_db, 0.0) - 0.6 * size_db),
    high = std::min(high, std::max(level_db, 0.0) + 0.6 * size_db);
    const double room = 0.2 * (high - low);
    lens_rect_->axis(QCPAxis::atLeft)->setRange(low - 2.2 * room, high + room);
    lens_rect_->axis(QCPAxis::atBottom)->setRange(shown_->lens.frequency_hz.front(), shown_->lens.frequency_hz.back());
    lens_zero_->setData({shown_->lens.frequency_hz.front(), shown_->lens.frequency_hz.back()}, {0, 0}, true);
    const double zero_share = (0 - (low - 2.2 * room)) / (high + room - (low - 2.2 * room));
    lens_zero_label_->position->setPixelPosition(
        QPointF(best.right() - 8, plot.bottom() - zero_share * plot.height() + 1));
}

void FrequencyPlots::set_cursor(double frequency_hz) {
    cursor_hz_ = frequency_hz;
    const bool shows = frequency_hz > 0 && shown_ && shown_->curve.gain.size() > 1;
    cursor_line_->setVisible(shows);
    readout_->setVisible(shows);
    if (shows) {
        const auto& f = shown_->curve.frequency_hz;
        const auto nearest = std::lower_bound(f.begin(), f.end(), frequency_hz);
        const auto k = std::min<std::size_t>(static_cast<std::size_t>(nearest - f.begin()), f.size() - 1);
        const Complex gain = shown_->curve.gain[k];
        cursor_line_->start->setCoords(f[k], 0);
        cursor_line_->end->setCoords(f[k], 1);
        readout_->setText(QString::fromStdString(si_text(f[k], "Hz", 5) + "   " + plain_text(decibel(gain), 2) +
                                                 " dB   " + plain_text(std::arg(gain) * degrees, 1) + "°"));
    } else {
        readout_->setText({});
    }
    replot(rpQueuedReplot);
}

void FrequencyPlots::mouseMoveEvent(QMouseEvent* event) {
    QCustomPlot::mouseMoveEvent(event);
    if (event->buttons() != Qt::NoButton) return;
    const QRect inside = gain_rect_->rect().united(phase_rect_->rect());
    const double hz =
        inside.contains(event->pos()) ? gain_rect_->axis(QCPAxis::atBottom)->pixelToCoord(event->pos().x()) : 0;
    set_cursor(hz);
    emit cursor_moved(hz);
}

void FrequencyPlots::mouseDoubleClickEvent(QMouseEvent* event) {
    reset_ranges();
    place_lens();
    event->accept();
}

void FrequencyPlots::leaveEvent(QEvent* event) {
    QCustomPlot::leaveEvent(event);
    set_cursor(0);
    emit cursor_moved(0);
}

void FrequencyPlots::zoom(double factor, double centre_hz) {
    gain_rect_->axis(QCPAxis::atBottom)->scaleRange(factor, centre_hz);
    place_lens();
    replot(rpQueuedReplot);
}

void FrequencyPlots::keyPressEvent(QKeyEvent* event) {
    const QCPRange range = gain_rect_->axis(QCPAxis::atBottom)->range();
    const double middle = std::sqrt(range.lower * range.upper), from = cursor_hz_ > 0 ? cursor_hz_ : middle;
    const double step = std::pow(range.upper / range.lower, event->modifiers() & Qt::ShiftModifier ? 0.002 : 0.01);
    switch (event->key()) {
    case Qt::Key_Right:
        set_cursor(from * step);
        break;
    case Qt::Key_Left:
        set_cursor(from / step);
        break;
    case Qt::Key_Plus:
        zoom(0.7, from);
        return;
    case Qt::Key_Minus:
        zoom(1 / 0.7, from);
        return;
    case Qt::Key_Home:
        reset_ranges();
        place_lens();
        return;
    case Qt::Key_Escape:
        set_cursor(0);
        break;
    default:
        QCustomPlot::keyPressEvent(event);
        return;
    }
    emit cursor_moved(cursor_hz_);
}

void FrequencyPlots::resizeEvent(QResizeEvent* event) {
    QCustomPlot::resizeEvent(event);
    replot(rpImmediateRefresh); // the layout must stand before the card can be placed in it
    place_point();
    place_lens();
    replot(rpQueuedReplot);
}

} // namespace sinewright::ui
