#include "ui/work/worker.h"

#include <QCoreApplication>
#include <QEvent>

namespace ebbline::work {

namespace {

// The event carries nothing: what is handed over stands in the queue behind the mutex, where both threads and the
// thread sanitizer see the hand-over.
QEvent::Type wakeType() {
  static const int kType = QEvent::registerEventType();
  return static_cast<QEvent::Type>(kType);
}

QString wordsOf(const std::exception_ptr& error) {
  try {
    std::rethrow_exception(error);
  } catch (const std::exception& fault) {
    return QString::fromUtf8(fault.what());
  } catch (...) {
    return QStringLiteral("unknown fault");
  }
}

}  // namespace

Worker::Worker(QObject* parent) : QObject(parent) {
  wakeType();
  thread_ = std::jthread([this](const std::stop_token& end) { loop(end); });
}

Worker::~Worker() {
  {
    const std::lock_guard hold(guard_);
    waiting_.reset();
    if (is_running_) running_.request_stop();
  }
  thread_.request_stop();
  thread_.join();
}

void Worker::start(Work work, IfBusy if_busy) {
  const std::lock_guard hold(guard_);
  waiting_ = Waiting{std::move(work), {}, ++last_number_};
  if (if_busy == IfBusy::kCancelRunning) {
    first_wanted_ = last_number_;
    if (is_running_) running_.request_stop();
  }
  wake_.notify_one();
}

void Worker::cancel() {
  const std::lock_guard hold(guard_);
  waiting_.reset();
  first_wanted_ = last_number_ + 1;
  if (is_running_) running_.request_stop();
}

bool Worker::busy() const {
  const std::lock_guard hold(guard_);
  return is_running_ || waiting_ || !ended_.empty();
}

void Worker::loop(const std::stop_token& end) {
  for (;;) {
    Waiting next;
    {
      std::unique_lock hold(guard_);
      if (!wake_.wait(hold, end, [this] { return waiting_.has_value(); })) return;
      next = std::move(*waiting_);
      waiting_.reset();
      running_ = next.stop;
      is_running_ = true;
    }
    Ended ended{{}, {}, next.number};
    const Job job(next.stop.get_token(), [this](int done, int total) {
      const std::lock_guard hold(guard_);
      progress_ = {done, total};
      wakeUi();
    });
    try {
      ended.then = next.work(job);
    } catch (...) {
      ended.error = std::current_exception();
    }
    next.work = {};  // what the job took along ends on this thread
    const std::lock_guard hold(guard_);
    is_running_ = false;
    ended_.push_back(std::move(ended));
    wakeUi();
  }
}

// REQUIRES: guard_ is held.
void Worker::wakeUi() {
  if (woken_) return;
  woken_ = true;
  QCoreApplication::postEvent(this, new QEvent(wakeType()));
}

void Worker::deliver(Ended ended) {
  {
    const std::lock_guard hold(guard_);
    if (ended.number < first_wanted_) return;
  }
  if (ended.error) {
    emit failed(wordsOf(ended.error));
    return;
  }
  if (!ended.then) return;
  try {
    ended.then();
  } catch (...) {
    emit failed(wordsOf(std::current_exception()));
  }
}

bool Worker::event(QEvent* event) {
  if (event->type() != wakeType()) return QObject::event(event);
  std::deque<Ended> ended;
  std::optional<std::pair<int, int>> progress;
  {
    const std::lock_guard hold(guard_);
    woken_ = false;
    ended.swap(ended_);
    progress.swap(progress_);
  }
  if (progress) emit progressed(progress->first, progress->second);
  for (Ended& one : ended) deliver(std::move(one));
  if (!busy()) emit idle();
  return true;
}

}  // namespace ebbline::work
