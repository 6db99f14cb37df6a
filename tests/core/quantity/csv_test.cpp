#include <stdexcept>

#include <gtest/gtest.h>

#include "core/quantity/csv.h"

namespace ebbline::quantity {
namespace {

TEST(CsvTable, KeepsTheSourceLinesAndTheCells) {
  const CsvTable table("# Title.\n# [published: x]\na,b,mark\n1.5,,one; two\r\n+2,3,\n");
  EXPECT_EQ(table.source(), "Title. [published: x]");
  ASSERT_EQ(table.numRows(), 2);
  EXPECT_DOUBLE_EQ(table.number(0, "a"), 1.5);
  EXPECT_DOUBLE_EQ(table.number(1, "a"), 2);
  EXPECT_TRUE(table.isEmpty(0, "b"));
  EXPECT_EQ(table.text(0, "mark"), "one; two");
  EXPECT_TRUE(table.hasColumn("b"));
  EXPECT_FALSE(table.hasColumn("c"));
}

TEST(CsvTable, NamesWhatIsBroken) {
  EXPECT_THROW(CsvTable("# only words\n"), std::logic_error);
  EXPECT_THROW(CsvTable("a,b\n1\n"), std::logic_error);
  const CsvTable table("a,b\n1,x\n");
  EXPECT_THROW(table.number(0, "b"), std::logic_error);
  EXPECT_THROW(table.number(0, "c"), std::logic_error);
}

}  // namespace
}  // namespace ebbline::quantity
