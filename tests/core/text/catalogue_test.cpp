#include <set>

#include <gtest/gtest.h>

#include "core/text/remark.h"

namespace ebbline::text {
namespace {

TEST(TextCatalogue, EveryCodeHasItsOwnPrintedName) {
  std::set<std::string> names;
  for (int i = 0; i < codeCount(); ++i) names.insert(codeName(codeAt(i)));
  EXPECT_EQ(static_cast<int>(names.size()), codeCount());
}

TEST(TextCatalogue, EveryFaultSaysWhatToDo) {
  for (int i = 0; i < codeCount(); ++i)
    if (severityOf(codeAt(i)) == Severity::kFault) {
      EXPECT_FALSE(remedy({codeAt(i), {}, {"a", "b", "c", "d"}}).empty()) << codeName(codeAt(i));
    }
}

TEST(TextCatalogue, EverySentenceEndsInAFullStopAndFillsItsMarks) {
  for (int i = 0; i < codeCount(); ++i) {
    const Remark remark{codeAt(i), {}, {"a", "b", "c", "d"}};
    EXPECT_EQ(sentence(remark).back(), '.') << codeName(codeAt(i));
    EXPECT_EQ(sentence(remark).find('{'), std::string::npos) << codeName(codeAt(i));
  }
}

TEST(TextCatalogue, MissingArgumentShowsTheTemplateInsteadOfThrowing) {
  EXPECT_NE(sentence({Code::kFileCannotOpen, {}, {}}).find("{0}"), std::string::npos);
}

TEST(TextCatalogue, TranslationReplacesTheTemplateBeforeFilling) {
  const Remark remark{Code::kLoopEmpty, {}, {"pump"}};
  EXPECT_EQ(sentence(remark, [](const char*) { return std::string("Es fehlt: {0}."); }), "Es fehlt: pump.");
}

TEST(TextCatalogue, PlaceNamesLinePointerAndTag) {
  EXPECT_EQ(placeInWords({"/pumps/0", 12, 7, "P1"}), "line 12, /pumps/0, P1");
  EXPECT_EQ(placeInWords({}), "");
}

}  // namespace
}  // namespace ebbline::text
