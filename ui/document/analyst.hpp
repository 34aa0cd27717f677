#pragma once
/// Runs the analyses of a document off the UI thread; the newest edit wins; results arrive by queued signal.
#include "core/review/findings.hpp"
#include <QObject>
#include <QTimer>
#include <memory>

namespace sinewright::ui {

class Document;

/// One set of results as shown: the findings and the curves drawn from them.
struct Shown {
    quint64 revision = 0;                 ///< of the document they belong to
    std::shared_ptr<const Design> design; ///< the snapshot they were computed from
    Findings findings;
    LoopCurve curve; ///< empty when there is no loop gain; about 600 points
    LoopCurve lens;  ///< finely round the Barkhausen point; empty without one
};
using ShownPtr = std::shared_ptr<const Shown>;

class Analyst : public QObject {
    Q_OBJECT
  public:
    explicit Analyst(Document& document, QObject* parent = nullptr);
    ~Analyst() override; ///< stops and joins the worker

    ShownPtr latest() const { return latest_; } ///< may be of an older revision; null before the first
    bool current() const;                       ///< latest() belongs to the document's present revision
    bool working() const { return !current(); }
    bool stale_too_long() const { return stale_too_long_; } ///< 100 ms without new results: values are greyed
    /// Waits (spinning the event loop) until current(), at most `limit_ms`; for pictures and tests.
    bool wait_until_current(int limit_ms);

  signals:
    void shown();          ///< latest() is new
    void became_stale();   ///< the document changed; latest() is older than it
    void stale_for_long(); ///< 100 ms have passed without new results: grey the values

  private:
    class Worker;
    void start_over();
    Q_INVOKABLE void take_results();
    Document& document_;
    ShownPtr latest_;
    QTimer stale_timer_;
    bool stale_too_long_ = false;
    std::unique_ptr<Worker> worker_; ///< last, so that it stops before anything it reports to goes
};

} // namespace sinewright::ui
