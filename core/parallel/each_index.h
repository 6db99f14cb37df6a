#pragma once
// The one helper for parallel loops. Results go into slots by index, sums are taken in index order afterwards, so
// answers are bit-identical for any number of threads.

#include <cstddef>

#ifdef EBBLINE_THREAD_SANITIZER
#include <algorithm>
#include <atomic>
#include <exception>
#include <mutex>
#include <thread>
#include <vector>
#else
#include <tbb/blocked_range.h>
#include <tbb/parallel_for.h>
#endif

namespace ebbline::parallel {

/// Calls `body(i)` once for each i in [0, count), on several threads, in no particular order, and returns when all
/// are done. The first exception thrown by a body is rethrown here; bodies not yet started may then be left out.
/// REQUIRES: bodies touch disjoint data (each its own slot), or guard what they share.
template <class Body>
void eachIndex(std::size_t count, const Body& body) {
#ifdef EBBLINE_THREAD_SANITIZER
  // TBB's own hand-over is invisible to ThreadSanitizer and gives false reports; plain threads are not.
  const std::size_t threads = std::min<std::size_t>(count, std::max(2U, std::thread::hardware_concurrency()));
  std::atomic<std::size_t> next{0};
  std::exception_ptr first_error;
  std::mutex error_guard;
  {
    std::vector<std::jthread> crew;
    for (std::size_t t = 0; t < threads; ++t)
      crew.emplace_back([&] {
        for (std::size_t i = next++; i < count; i = next++) {
          try {
            body(i);
          } catch (...) {
            const std::lock_guard hold(error_guard);
            if (!first_error) first_error = std::current_exception();
            next = count;
          }
        }
      });
  }
  if (first_error) std::rethrow_exception(first_error);
#else
  tbb::parallel_for(tbb::blocked_range<std::size_t>(0, count), [&](const tbb::blocked_range<std::size_t>& range) {
    for (std::size_t i = range.begin(); i != range.end(); ++i) body(i);
  });
#endif
}

}  // namespace ebbline::parallel
