#include "ui/work/worker.h"

#include <atomic>
#include <stdexcept>
#include <thread>

#include <gtest/gtest.h>

#include "tests/ui/ui_support.h"

namespace ebbline::work {
namespace {

class WorkerTest : public testing::Test {
 protected:
  void SetUp() override { test::application(); }
};

/// Holds a job until the test lets it go.
struct Gate {
  std::atomic<bool> entered{false};
  std::atomic<bool> open{false};
  void pass() {
    entered = true;
    while (!open) std::this_thread::yield();
  }
};

TEST_F(WorkerTest, ResultReachesTheThreadThatOwnsTheWorker) {
  Worker worker;
  std::thread::id worked;
  std::thread::id delivered;
  worker.start([&](const Job&) -> Then {
    const auto on = std::this_thread::get_id();
    return [&, on] {
      worked = on;
      delivered = std::this_thread::get_id();
    };
  });
  ASSERT_TRUE(test::waitFor([&] { return delivered != std::thread::id(); }));
  EXPECT_EQ(delivered, std::this_thread::get_id());
  EXPECT_NE(worked, delivered);
}

TEST_F(WorkerTest, OfManyWaitingJobsOnlyTheLatestRuns) {
  Worker worker;
  Gate gate;
  std::vector<int> ran;
  worker.start([&](const Job&) -> Then {
    gate.pass();
    return [&] { ran.push_back(0); };
  });
  ASSERT_TRUE(test::waitFor([&] { return gate.entered.load(); }));
  for (int i = 1; i <= 50; ++i) worker.start([&, i](const Job&) -> Then { return [&, i] { ran.push_back(i); }; });
  gate.open = true;
  ASSERT_TRUE(test::waitFor([&] { return !worker.busy(); }));
  EXPECT_EQ(ran, (std::vector<int>{0, 50}));
}

TEST_F(WorkerTest, CancellingStopsTheRunningJobAndDropsItsResult) {
  Worker worker;
  std::atomic<bool> entered{false};
  bool stale_result = false;
  bool fresh_result = false;
  worker.start([&](const Job& job) -> Then {
    entered = true;
    while (!job.stop().stop_requested()) std::this_thread::yield();
    return [&] { stale_result = true; };
  });
  ASSERT_TRUE(test::waitFor([&] { return entered.load(); }));
  worker.start([&](const Job&) -> Then { return [&] { fresh_result = true; }; }, IfBusy::kCancelRunning);
  ASSERT_TRUE(test::waitFor([&] { return fresh_result; }));
  EXPECT_FALSE(stale_result);
}

TEST_F(WorkerTest, AnExceptionBecomesAMessageAndTheNextJobRuns) {
  Worker worker;
  QString message;
  bool next_ran = false;
  QObject::connect(&worker, &Worker::failed, &worker, [&](const QString& words) { message = words; });
  worker.start([](const Job&) -> Then { throw std::runtime_error("seeded fault"); });
  ASSERT_TRUE(test::waitFor([&] { return !message.isEmpty(); }));
  EXPECT_EQ(message, "seeded fault");
  worker.start([&](const Job&) -> Then { return [&] { next_ran = true; }; });
  EXPECT_TRUE(test::waitFor([&] { return next_ran; }));
}

TEST_F(WorkerTest, NothingIsDeliveredAfterTheWorkerIsGone) {
  bool delivered = false;
  bool stopped = false;
  {
    Worker worker;
    std::atomic<bool> entered{false};
    worker.start([&](const Job& job) -> Then {
      entered = true;
      while (!job.stop().stop_requested()) std::this_thread::yield();
      stopped = true;
      return [&] { delivered = true; };
    });
    while (!entered) std::this_thread::yield();
  }
  QCoreApplication::processEvents();
  EXPECT_TRUE(stopped);
  EXPECT_FALSE(delivered);
}

TEST_F(WorkerTest, ProgressArrivesAndEndsWithTheLastFigure) {
  Worker worker;
  int last = 0;
  int total = 0;
  bool done = false;
  QObject::connect(&worker, &Worker::progressed, &worker, [&](int d, int t) {
    EXPECT_GE(d, last);
    last = d;
    total = t;
  });
  worker.start([&](const Job& job) -> Then {
    for (int i = 1; i <= 29; ++i) job.progress(i, 29);
    return [&] { done = true; };
  });
  ASSERT_TRUE(test::waitFor([&] { return done; }));
  EXPECT_EQ(last, 29);
  EXPECT_EQ(total, 29);
}

}  // namespace
}  // namespace ebbline::work
