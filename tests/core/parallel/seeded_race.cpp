// A deliberate data race: several bodies of one eachIndex write the same variable. Only built for the sanitizer to find.
#include <cstdio>

#include "core/parallel/each_index.h"

int main() {
  long shared_total = 0;
  ebbline::parallel::eachIndex(200'000, [&](std::size_t i) { shared_total += static_cast<long>(i % 7); });
  std::printf("total %ld\n", shared_total);
  return 0;
}
