#pragma once
// Starts the one application of the process before the first test, for suites whose fixtures hold widgets. Include it
// once per executable.

#include <gtest/gtest.h>

#include "tests/ui/ui_support.h"

namespace ebbline::test {

class QtApplication : public testing::Environment {
 public:
  void SetUp() override { application(); }
};

inline testing::Environment* const kQtApplication = testing::AddGlobalTestEnvironment(new QtApplication);

}  // namespace ebbline::test
