#pragma once
// Starts the one application of the process before the first test and ends it after the last, while Qt still stands:
// an application that lives until exit() outlives parts of Qt and crashes there. Include it once per executable.

#include <gtest/gtest.h>

#include <QApplication>
#include <memory>

namespace ebbline::test {

class QtApplication : public testing::Environment {
 public:
  void SetUp() override {
    if (qEnvironmentVariableIsEmpty("DISPLAY") && qEnvironmentVariableIsEmpty("QT_QPA_PLATFORM"))
      qputenv("QT_QPA_PLATFORM", "offscreen");
    application_ = std::make_unique<QApplication>(argc_, argv_);
  }
  void TearDown() override { application_.reset(); }

 private:
  int argc_ = 1;
  char name_[13] = "ebbline-test";
  char* argv_[2] = {name_, nullptr};
  std::unique_ptr<QApplication> application_;
};

inline testing::Environment* const kQtApplication = testing::AddGlobalTestEnvironment(new QtApplication);

}  // namespace ebbline::test
