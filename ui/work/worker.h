#pragma once
// Runs work away from the UI thread: one thread, one job at a time, the latest wins. What a job found is handed to the
// UI thread as a closure; an exception becomes a message.

#include <condition_variable>
#include <deque>
#include <exception>
#include <functional>
#include <mutex>
#include <optional>
#include <stop_token>
#include <thread>

#include <QObject>
#include <QString>

namespace ebbline::work {

/// What a running job may ask and tell. Lives on the worker's thread while the job runs.
class Job {
 public:
  /// Stop is asked for when a newer job cancels this one and when the worker ends.
  std::stop_token stop() const { return stop_; }
  /// "done of total" for the progress line; cheap, only the last figure reaches the UI thread.
  void progress(int done, int total) const { tell_(done, total); }

 private:
  friend class Worker;
  Job(std::stop_token stop, std::function<void(int, int)> tell) : stop_(std::move(stop)), tell_(std::move(tell)) {}
  std::stop_token stop_;
  std::function<void(int, int)> tell_;
};

/// What is done on the UI thread once the job has ended; empty = nothing.
using Then = std::function<void()>;
/// Runs on the worker's thread. REQUIRES: shares nothing that changes with the UI thread; takes what it needs along.
using Work = std::function<Then(const Job&)>;

enum class IfBusy {
  kFinishRunning,  ///< The running job ends in its own time and is shown; the new one is next. For sliders.
  kCancelRunning,  ///< The running job is asked to stop and its result is dropped.
};

/// Owned by the object that is to hear the results; lives on the UI thread. A job that was waiting when a newer one
/// came is dropped.
class Worker : public QObject {
  Q_OBJECT
 public:
  explicit Worker(QObject* parent = nullptr);
  /// Asks the running job to stop and waits for it. No closure runs after this.
  ~Worker() override;

  void start(Work work, IfBusy if_busy = IfBusy::kFinishRunning);
  /// Asks the running job to stop and drops it and the waiting one.
  void cancel();
  /// True from start() until the last closure has run.
  bool busy() const;

 signals:
  void progressed(int done, int total);
  /// A job ended with an exception: a fault of the program, told in words.
  void failed(const QString& message);
  /// Nothing is running or waiting any more.
  void idle();

 protected:
  bool event(QEvent* event) override;

 private:
  struct Waiting {
    Work work;
    std::stop_source stop;
    unsigned long number = 0;
  };
  struct Ended {
    Then then;
    std::exception_ptr error;
    unsigned long number = 0;
  };
  void loop(const std::stop_token& end);
  void wakeUi();
  void deliver(Ended ended);

  mutable std::mutex guard_;
  std::condition_variable_any wake_;
  std::optional<Waiting> waiting_;
  std::stop_source running_;
  bool is_running_ = false;
  unsigned long last_number_ = 0;
  unsigned long first_wanted_ = 1;  // results of older jobs are dropped
  std::deque<Ended> ended_;
  std::optional<std::pair<int, int>> progress_;
  bool woken_ = false;
  std::jthread thread_;  // last: ends before the members it uses
};

}  // namespace ebbline::work
