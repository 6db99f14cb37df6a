#include "ui/document/document.h"

#include <QFile>
#include <QTemporaryDir>

#include <gtest/gtest.h>

#include "resources/samples.h"
#include "tests/ui/ui_support.h"

namespace ebbline::document {
namespace {

class DocumentTest : public testing::Test {
 protected:
  void SetUp() override {
    test::application();
    ASSERT_TRUE(document_.openText(resources::sampleText("office")).empty());
  }
  static loop::Change rename(const loop::Loop& loop, const std::string& title) {
    loop::Project project = loop.project;
    project.title = title;
    return {"Rename", {loop::PutProject{project}}};
  }
  Document document_;
};

TEST_F(DocumentTest, EachChangeIsToldOnceWithWhatWasDone) {
  int told = 0;
  std::string name;
  QObject::connect(&document_, &Document::changed, &document_, [&](const loop::Change& change) {
    ++told;
    name = change.name;
  });
  EXPECT_TRUE(document_.push(rename(document_.loop(), "Harbour Row")).empty());
  EXPECT_EQ(told, 1);
  EXPECT_EQ(name, "Rename");
  EXPECT_EQ(document_.loop().project.title, "Harbour Row");
  EXPECT_TRUE(document_.isDirty());
}

TEST_F(DocumentTest, AChangeThatChangesNothingIsDropped) {
  EXPECT_TRUE(document_.push(rename(document_.loop(), document_.loop().project.title)).empty());
  EXPECT_FALSE(document_.undoStack().canUndo());
}

TEST_F(DocumentTest, ARefusedChangeLeavesTheLoopAndSaysWhy) {
  const loop::Loop before = document_.loop();
  const auto remarks = document_.push({"Remove", {loop::Remove{4'000'000'000U}}});
  ASSERT_EQ(remarks.size(), 1U);
  EXPECT_FALSE(text::sentence(remarks.front()).empty());
  EXPECT_EQ(document_.loop(), before);
  EXPECT_FALSE(document_.undoStack().canUndo());
}

TEST_F(DocumentTest, UndoAllThenRedoAllGivesTheSameFile) {
  for (const char* title : {"A", "B", "C"}) ASSERT_TRUE(document_.push(rename(document_.loop(), title)).empty());
  loop::Terminal moved = document_.loop().terminals.at(3);
  moved.design_flow_l_s *= 1.25;
  ASSERT_TRUE(document_.push({"Set design flow", {loop::Put{moved}}}).empty());
  const std::string start(resources::sampleText("office"));
  const std::string end = loop::writeLoop(document_.loop());
  while (document_.undoStack().canUndo()) document_.undoStack().undo();
  EXPECT_EQ(document_.loop(), loop::readLoop(start).loop);
  EXPECT_FALSE(document_.isDirty());
  while (document_.undoStack().canRedo()) document_.undoStack().redo();
  EXPECT_EQ(loop::writeLoop(document_.loop()), end);
}

TEST_F(DocumentTest, ABadFileKeepsTheLoopThatWasOpen) {
  QTemporaryDir folder;
  QFile bad(folder.filePath("bad.ebbline"));
  ASSERT_TRUE(bad.open(QIODevice::WriteOnly));
  bad.write("{ \"schema_version\": 1, \"terminals\": [ {] }");
  bad.close();
  const loop::Loop before = document_.loop();
  const auto remarks = document_.open(bad.fileName());
  EXPECT_TRUE(text::anyFault(remarks));
  EXPECT_EQ(document_.loop(), before);
}

TEST_F(DocumentTest, SavedAndOpenedAgainIsTheSameLoop) {
  QTemporaryDir folder;
  const QString path = folder.filePath("loop.ebbline");
  ASSERT_TRUE(document_.push(rename(document_.loop(), "Saved")).empty());
  EXPECT_TRUE(document_.save(path).empty());
  EXPECT_FALSE(document_.isDirty());
  EXPECT_EQ(document_.path(), path);
  Document other;
  EXPECT_TRUE(other.open(path).empty());
  EXPECT_EQ(other.loop(), document_.loop());
}

TEST_F(DocumentTest, SavingWhereNothingCanBeWrittenSaysSo) {
  const auto remarks = document_.save("/no such folder/loop.ebbline");
  ASSERT_FALSE(remarks.empty());
  EXPECT_TRUE(text::anyFault(remarks));
  EXPECT_TRUE(document_.path().isEmpty());
}

}  // namespace
}  // namespace ebbline::document
