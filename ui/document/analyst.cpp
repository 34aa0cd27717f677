#include "ui/document/analyst.hpp"
#include "ui/document/document.hpp"
#include <QEventLoop>
#include <cmath>
#include <condition_variable>
#include <mutex>
#include <thread>

namespace sinewright::ui {
namespace {

constexpr int stale_after_ms = 100; // a value this much out of date is greyed
constexpr int curve_points = 600;   // finer than a pixel column of the widest view
constexpr double half_span = 20;    // the curve runs from f/20 to 20 f: 2.6 decades round the point of interest
constexpr double default_from_hz = 10, default_to_hz = 100e3;

LoopCurve curve_of(const Findings& findings) {
    if (!findings.loop_gain) return {};
    std::optional<double> centre_hz;
    if (findings.small_signal) centre_hz = findings.small_signal->frequency_hz;
    if (findings.loop && findings.loop->barkhausen) centre_hz = findings.loop->barkhausen->frequency_hz;
    if (!centre_hz || !std::isfinite(*centre_hz) || *centre_hz <= 0)
        return findings.loop_gain->sweep(default_from_hz, default_to_hz, curve_points);
    return findings.loop_gain->sweep(*centre_hz / half_span, *centre_hz * half_span, curve_points);
}

constexpr double lens_reach = 1.35; // the lens shows this factor either side of the crossing
constexpr int lens_points = 81;

LoopCurve lens_of(const Findings& findings) {
    if (!findings.loop_gain || !findings.loop || !findings.loop->barkhausen) return {};
    const double centre_hz = findings.loop->barkhausen->frequency_hz;
    return findings.loop_gain->sweep(centre_hz / lens_reach, centre_hz * lens_reach, lens_points);
}

struct Job {
    quint64 revision = 0;
    std::shared_ptr<const Design> design;
};

} // namespace

/// The thread that computes. It sees immutable snapshots only; a newer job cancels the one in hand.
class Analyst::Worker {
  public:
    explicit Worker(Analyst& analyst) : analyst_(analyst), thread_([this](std::stop_token stop) { run(stop); }) {}

    ~Worker() {
        thread_.request_stop();
        {
            std::lock_guard lock(mutex_);
            in_hand_.request_stop();
        }
        thread_.join();
    }

    void take_on(Job job) {
        {
            std::lock_guard lock(mutex_);
            next_ = std::move(job);
            in_hand_.request_stop();
        }
        wake_.notify_one();
    }

    ShownPtr take_result() {
        std::lock_guard lock(mutex_);
        return std::move(result_);
    }

  private:
    void run(std::stop_token stop) {
        while (true) {
            std::unique_lock lock(mutex_);
            if (!wake_.wait(lock, stop, [this] { return next_.has_value(); })) return;
            const Job job = std::move(*next_);
            next_.reset();
            in_hand_ = std::stop_source();
            const std::stop_token superseded = in_hand_.get_token();
            if (stop.stop_requested()) return;
            lock.unlock();

            auto shown = std::make_shared<Shown>();
            shown->revision = job.revision;
            shown->design = job.design;
            shown->findings = check(*job.design, superseded);
            if (!superseded.stop_requested()) shown->curve = curve_of(shown->findings), shown->lens = lens_of(shown->findings);

            lock.lock();
            if (superseded.stop_requested()) continue;
            result_ = std::move(shown);
            lock.unlock();
            QMetaObject::invokeMethod(&analyst_, "take_results", Qt::QueuedConnection);
        }
    }

    Analyst& analyst_;
    std::mutex mutex_;
    std::condition_variable_any wake_;
    std::optional<Job> next_;
    std::stop_source in_hand_;
    ShownPtr result_;
    std::jthread thread_; // last: it uses all of the above
};

Analyst::Analyst(Document& document, QObject* parent)
    : QObject(parent), document_(document), worker_(std::make_unique<Worker>(*this)) {
    stale_timer_.setSingleShot(true);
    stale_timer_.setInterval(stale_after_ms);
    connect(&stale_timer_, &QTimer::timeout, this, [this] {
        stale_too_long_ = true;
        emit stale_for_long();
    });
    connect(&document_, &Document::changed, this, &Analyst::start_over);
    start_over();
}

Analyst::~Analyst() = default;

bool Analyst::current() const { return latest_ && latest_->revision == document_.revision(); }

void Analyst::start_over() {
    worker_->take_on({document_.revision(), document_.snapshot()});
    if (!stale_timer_.isActive() && !stale_too_long_) stale_timer_.start();
    emit became_stale();
}

void Analyst::take_results() {
    ShownPtr result = worker_->take_result();
    if (!result || result->revision != document_.revision()) return; // the newest edit wins
    latest_ = std::move(result);
    stale_timer_.stop();
    stale_too_long_ = false;
    emit shown();
}

bool Analyst::wait_until_current(int limit_ms) {
    if (current()) return true;
    QEventLoop loop;
    connect(this, &Analyst::shown, &loop, &QEventLoop::quit);
    QTimer::singleShot(limit_ms, &loop, [&loop] { loop.exit(1); });
    while (!current())
        if (loop.exec() == 1) return current();
    return true;
}

} // namespace sinewright::ui
