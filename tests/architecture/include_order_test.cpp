#include <fstream>

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "tests/architecture/source_rules.h"

namespace ebbline::test {
namespace {

namespace fs = std::filesystem;
using testing::HasSubstr;

// A small tree with one file, in a place of its own.
class SeededTree {
 public:
  SeededTree(const std::string& file, const std::string& text)
      : root_(fs::temp_directory_path() /
              ("ebbline_rules_" + std::string(testing::UnitTest::GetInstance()->current_test_info()->name()))) {
    fs::remove_all(root_);
    fs::create_directories((root_ / file).parent_path());
    std::ofstream(root_ / file) << text;
  }
  ~SeededTree() { fs::remove_all(root_); }
  std::vector<std::string> breaches() const { return breachesIn(root_); }

 private:
  fs::path root_;
};

void expectOneBreach(const std::string& file, const std::string& text, const std::string& words) {
  const std::vector<std::string> breaches = SeededTree(file, text).breaches();
  ASSERT_EQ(breaches.size(), 1U) << file << "\n" << text;
  EXPECT_THAT(breaches[0], HasSubstr(words));
  EXPECT_THAT(breaches[0], HasSubstr(file + ":"));
}

TEST(SourceRules, TheRepositoryKeepsThem) {
  for (const std::string& breach : breachesIn(EBBLINE_SOURCE_DIR)) ADD_FAILURE() << breach;
}

TEST(SourceRules, ACleanTreeHasNoBreach) {
  EXPECT_TRUE(SeededTree("core/loop/a.cpp", "#include \"core/part/pump.h\"\n#include <vector>\n").breaches().empty());
}

TEST(SourceRules, AnEarlierCoreModuleUsingALaterOneIsCaught) {
  expectOneBreach("core/part/a.cpp", "\n#include \"core/network/solver.h\"\n", "later module core/network");
  expectOneBreach("core/study/sweep/a.h", "#include \"core/study/year/year.h\"\n", "later module core/study/year");
}

TEST(SourceRules, AnEarlierUiModuleUsingALaterOneIsCaught) {
  expectOneBreach("ui/canvas/a.h", "#include \"ui/shell/window.h\"\n", "later module ui/shell");
}

TEST(SourceRules, CoreUsingTheWindowOrQtIsCaught) {
  expectOneBreach("core/loop/a.cpp", "#include \"ui/theme/theme.h\"\n", "core must not use ui/theme/theme.h");
  expectOneBreach("core/loop/a.cpp", "#include <QString>\n", "core must not use Qt");
}

TEST(SourceRules, UnorderedSumsAreCaught) {
  expectOneBreach("core/network/a.cpp", "double s = std::reduce(a, b);\n", "std::reduce");
  expectOneBreach("core/network/a.cpp", "#include <execution>\n", "<execution>");
  expectOneBreach("core/network/a.cpp", "sort(std::execution::par, a, b);\n", "std::execution");
}

TEST(SourceRules, HeavyHeadersInModuleHeadersAreCaught) {
  expectOneBreach("core/network/a.h", "#include <nlohmann/json.hpp>\n", "nlohmann/json.hpp");
  expectOneBreach("core/network/a.h", "#include <Eigen/SparseCholesky>\n", "Eigen/SparseCholesky");
  expectOneBreach("ui/page/a.h", "#include <QtCharts/QChart>\n", "Qt Charts");
}

TEST(SourceRules, AModuleOutsideTheListIsCaught) {
  expectOneBreach("core/misc/a.cpp", "#include \"core/text/remark.h\"\n", "no module of the list");
}

TEST(SourceRules, APlaceOutsideTheRepositoryIsCaught) {
  expectOneBreach("resources/note.md", std::string("see ..") + "/shared/design\n", "outside the repository");
  expectOneBreach("resources/note.md", std::string("see /wo") + "rk/design\n", "outside the repository");
}

TEST(SourceRules, AFolderThatEndsLikeSuchAPlaceIsNone) {
  EXPECT_TRUE(SeededTree("ui/page/a.h", std::string("#include \"ui/wo") + "rk/worker.h\"\n").breaches().empty());
  expectOneBreach("ui/page/a.h", std::string("// see /wo") + "rk/notes\n", "outside the repository");
}

TEST(SourceRules, AnIncludeNotWrittenFromTheRootIsCaught) {
  expectOneBreach("core/loop/a.cpp", "#include \"loop.h\"\n", "repository root");
}

}  // namespace
}  // namespace ebbline::test
