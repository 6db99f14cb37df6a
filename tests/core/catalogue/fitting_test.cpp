#include <cmath>
#include <set>
#include <string>

#include <gtest/gtest.h>

#include "core/catalogue/fitting.h"
#include "core/catalogue/pipe.h"

namespace ebbline::catalogue {
namespace {

double kOf(const char* name, double bore_m) {
  const auto k = fittingK(name, bore_m);
  EXPECT_TRUE(k) << text::oneLine(k.error());
  return k.value_or(-1);
}

TEST(Fitting, EveryKindHasItsOwnNameASourceAndAPositiveK) {
  std::set<std::string> names;
  for (const FittingKind& kind : fittingKinds()) {
    names.insert(kind.name);
    EXPECT_NE(kind.source.find('['), std::string::npos) << kind.name;
    EXPECT_GT(kOf(kind.name.c_str(), 0.0525), 0) << kind.name;
  }
  EXPECT_EQ(names.size(), fittingKinds().size());
  EXPECT_EQ(fittingKinds().size(), 19U + 4U + 4U);
}

TEST(Fitting, MultiplesOfTheTurbulentFactorKeepTheirRatio) {
  const double bore = 0.0525018;
  EXPECT_NEAR(kOf("elbow 90 standard", bore), 30 * turbulentFactor(bore), 1e-15);
  EXPECT_NEAR(kOf("gate valve", bore) / kOf("globe valve straight", bore), 8.0 / 340.0, 1e-14);
}

TEST(Fitting, FixedKDoesNotDependOnTheBore) {
  EXPECT_DOUBLE_EQ(kOf("exit", 0.01), 1.0);
  EXPECT_DOUBLE_EQ(kOf("exit", 1.0), 1.0);
  EXPECT_DOUBLE_EQ(kOf("sharp entrance", 0.1), 0.5);
  EXPECT_DOUBLE_EQ(kOf("bell-mouth entrance", 0.1), 0.05);
}

TEST(Fitting, ElbowTableIsMetAtItsSizesAndStraightBetween) {
  const double two = pipeSize("steel-b36-sch40", "NPS 2")->bore_m;
  const double three = pipeSize("steel-b36-sch40", "NPS 3")->bore_m;
  const double two_and_a_half = pipeSize("steel-b36-sch40", "NPS 2-1/2")->bore_m;
  EXPECT_NEAR(kOf("elbow 90 regular screwed", two), 1.0, 1e-12);
  EXPECT_NEAR(kOf("elbow 90 long radius flanged", three), 0.25, 1e-12);
  EXPECT_NEAR(kOf("elbow 90 regular screwed", (two + two_and_a_half) / 2), 0.925, 1e-12);
}

TEST(Fitting, AByTableFittingRefusesBoresOutsideItsTable) {
  const auto k = fittingK("elbow 90 long radius flanged", 0.0158);
  ASSERT_FALSE(k);
  EXPECT_EQ(k.error().code, text::Code::kCatalogueFittingSize);
  EXPECT_EQ(text::oneLine(k.error()).find('{'), std::string::npos);
  EXPECT_FALSE(fittingK("elbow 90 regular screwed", 0.3));
  // 54 mm copper is a 2 in pipe by trade though its bore is a little smaller than schedule 40.
  EXPECT_TRUE(fittingK("elbow 90 regular screwed", 0.05));
}

TEST(Fitting, UnknownNamesAreRefusedWithTheList) {
  const auto k = fittingK("elbow 91", 0.05);
  ASSERT_FALSE(k);
  EXPECT_EQ(k.error().code, text::Code::kCatalogueUnknownFitting);
  EXPECT_NE(text::remedy(k.error()).find("elbow 90 standard"), std::string::npos);
  EXPECT_EQ(findFitting("elbow 91"), nullptr);
}

}  // namespace
}  // namespace ebbline::catalogue
