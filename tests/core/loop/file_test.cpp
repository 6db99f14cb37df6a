#include "core/loop/file.h"

#include <sys/resource.h>
#include <sys/stat.h>
#include <unistd.h>

#include <chrono>
#include <fstream>
#include <limits>
#include <random>

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "tests/core/loop/random_loop.h"
#include "tests/support/seed.h"

namespace ebbline::loop {
namespace {

using test::fullLoop;
using testing::HasSubstr;

std::string told(const Reading& reading) {
  std::string lines;
  for (const text::Remark& remark : reading.remarks) lines += text::oneLine(remark) + "\n";
  return lines;
}

std::filesystem::path scratch(const std::string& name) {
  const auto folder = std::filesystem::temp_directory_path() / ("ebbline-file-test-" + std::to_string(::getpid()));
  std::filesystem::create_directories(folder);
  return folder / name;
}

TEST(LoopFile, EmptyLoopIsReadBackAsWritten) {
  const Reading reading = readLoop(writeLoop(Loop{}));
  EXPECT_TRUE(reading.usable()) << told(reading);
  EXPECT_EQ(reading.loop, Loop{});
}

TEST(LoopFile, LoopWithEveryFieldSetIsReadBackEqualAndSavedByteIdentical) {
  const Loop loop = fullLoop();
  const std::string text = writeLoop(loop);
  const Reading reading = readLoop(text);
  ASSERT_TRUE(reading.usable()) << told(reading);
  EXPECT_TRUE(reading.loop == loop);
  EXPECT_EQ(writeLoop(reading.loop), text);
}

TEST(LoopFile, RandomLoopsAreReadBackEqual) {
  std::mt19937_64 random(ebbline::test::seed());
  for (int i = 0; i < 200; ++i) {
    const Loop loop = test::randomLoop(random);
    const std::string text = writeLoop(loop);
    const Reading reading = readLoop(text);
    ASSERT_TRUE(reading.loop == loop) << told(reading) << text;
    ASSERT_EQ(writeLoop(reading.loop), text);
  }
}

TEST(LoopFile, DefaultsOfEveryThingLieWithinTheLimits) {
  Loop loop;
  Id id = 1;
  loop.levels.resize(1);
  loop.zones.resize(1);
  loop.joints.resize(1);
  loop.paired_runs.resize(1);
  loop.pipe_runs.resize(1);
  loop.terminals.resize(1);
  loop.plants.resize(1);
  loop.pumps.resize(1);
  loop.valves.resize(1);
  loop.sensors.resize(1);
  loop.vessels.resize(1);
  loop.load_states.resize(1);
  loop.notes.resize(1);
  loop.underlays.resize(1);
  for (Id* of :
       {&loop.levels[0].id, &loop.zones[0].id, &loop.joints[0].id, &loop.paired_runs[0].id, &loop.pipe_runs[0].id,
        &loop.terminals[0].id, &loop.plants[0].id, &loop.pumps[0].id, &loop.valves[0].id, &loop.sensors[0].id,
        &loop.vessels[0].id, &loop.load_states[0].id, &loop.notes[0].id, &loop.underlays[0].id})
    *of = id++;
  const Reading reading = readLoop(writeLoop(loop));
  EXPECT_TRUE(reading.usable()) << told(reading);  // an unfinished drawing can be kept in a file
  EXPECT_TRUE(reading.loop == loop);
}

TEST(LoopFile, NumbersKeepEveryBit) {
  std::mt19937_64 random(ebbline::test::seed());
  std::uniform_real_distribution<double> mantissa(-1, 1);
  Loop loop;
  for (Id i = 1; i <= 2000; ++i) {
    Note note{i, "", {}};
    note.at.x_m = std::ldexp(mantissa(random), static_cast<int>(random() % 60) - 40);
    note.at.y_m = std::nextafter(static_cast<double>(i) / 10, 1e9);
    loop.notes.push_back(note);
  }
  const Reading reading = readLoop(writeLoop(loop));
  ASSERT_TRUE(reading.usable()) << told(reading);
  EXPECT_TRUE(reading.loop == loop);
}

TEST(LoopFile, TextsKeepQuotesBreaksAndForeignLetters) {
  Loop loop;
  loop.project.title = "Spröde \"Ecke\" \\ Nord\n\tzweite Zeile \x01 \x7f 水 🜄";
  loop.terminals.push_back({});
  loop.terminals[0].id = 1;
  loop.terminals[0].typed = {{"a/b~c", "40 ft"}, {"", "x"}};
  const Reading reading = readLoop(writeLoop(loop));
  ASSERT_TRUE(reading.usable()) << told(reading);
  EXPECT_TRUE(reading.loop == loop);
}

TEST(LoopFile, BytesThatAreNotUtf8InATextAreReplacedSoThatTheFileStaysReadable) {
  Loop loop;
  loop.project.title = "a\xFFz \xC0\x80 \xED\xA0\x80";
  const std::string text = writeLoop(loop);
  const Reading reading = readLoop(text);
  EXPECT_TRUE(reading.usable()) << told(reading);
  EXPECT_THAT(reading.loop.project.title, HasSubstr("a\xEF\xBF\xBDz"));
  EXPECT_EQ(writeLoop(reading.loop), text);
}

TEST(LoopFile, SmallObjectsStandOnOneLineEach) {
  const std::string text = writeLoop(fullLoop());
  EXPECT_THAT(text, HasSubstr("\n  \"schema_version\": 1,\n"));
  EXPECT_THAT(text, HasSubstr("      \"at\": {\"x_m\": "));
  EXPECT_THAT(text, HasSubstr("\n    {\"id\": 10, \"tag\": \"J1\", \"at\": {\"x_m\": 0, \"y_m\": 0}"));
}

TEST(LoopFile, LinesOfPointersAreThoseOfTheText) {
  const Reading reading =
      readLoop("{\"schema_version\": 1,\n\"notes\": [\n{\"id\": 1,\n\"at\": {\"x_m\": 1\n,\"y_m\": 2\n}}]}");
  ASSERT_TRUE(reading.usable()) << told(reading);
  EXPECT_EQ(reading.lines.of("/schema_version"), 1);
  EXPECT_EQ(reading.lines.of("/notes"), 2);
  EXPECT_EQ(reading.lines.of("/notes/0"), 3);
  EXPECT_EQ(reading.lines.of("/notes/0/at"), 4);
  EXPECT_EQ(reading.lines.of("/notes/0/at/x_m"), 4);
  EXPECT_EQ(reading.lines.of("/notes/0/at/y_m"), 5);
  EXPECT_EQ(reading.lines.of("/notes/0/text"), 3);  // not there: its nearest ancestor
  EXPECT_EQ(Lines{}.of("/notes"), 0);
}

TEST(LoopFile, PointerOfNamesListAndPosition) {
  const Loop loop = fullLoop();
  EXPECT_EQ(pointerOf(loop, loop.joints[1].id), "/joints/1");
  EXPECT_EQ(pointerOf(loop, 999999), "");
}

TEST(LoopFile, IsWrittenWholeAndReadBackFromDisk) {
  const auto path = scratch("whole.ebbline");
  const Loop loop = fullLoop();
  ASSERT_TRUE(writeLoopFile(Loop{}, path).empty());
  ::chmod(path.c_str(), 0640);
  ASSERT_TRUE(writeLoopFile(loop, path).empty());
  const Reading reading = readLoopFile(path);
  EXPECT_TRUE(reading.usable()) << told(reading);
  EXPECT_TRUE(reading.loop == loop);
  struct stat about {};
  ASSERT_EQ(::stat(path.c_str(), &about), 0);
  EXPECT_EQ(about.st_mode & 0777U, 0640U);  // permissions survive
  int left = 0;
  for (const auto& entry : std::filesystem::directory_iterator(path.parent_path()))
    left += entry.path().filename().string().starts_with(".whole");
  EXPECT_EQ(left, 0);  // no temporary neighbour stays behind
}

TEST(LoopFile, SavingThroughALinkKeepsTheLink) {
  const auto target = scratch("target.ebbline");
  const auto link = scratch("link.ebbline");
  ASSERT_TRUE(writeLoopFile(Loop{}, target).empty());
  std::filesystem::remove(link);
  std::filesystem::create_symlink(target, link);
  ASSERT_TRUE(writeLoopFile(fullLoop(), link).empty());
  EXPECT_TRUE(std::filesystem::is_symlink(link));
  EXPECT_TRUE(readLoopFile(target).loop == fullLoop());
}

TEST(LoopFile, FailedSaveSaysWhyAndLeavesTheOldFile) {
  const auto remarks = writeLoopFile(Loop{}, scratch("no-such-folder") / "a.ebbline");
  ASSERT_EQ(remarks.size(), 1U);
  EXPECT_EQ(remarks[0].code, text::Code::kFileCannotWrite);
  const auto path = scratch("kept.ebbline");
  ASSERT_TRUE(writeLoopFile(fullLoop(), path).empty());
  Loop bad = fullLoop();
  bad.terminals[0].coil.loss_kpa = std::numeric_limits<double>::quiet_NaN();
  const auto refused = writeLoopFile(bad, path);
  ASSERT_EQ(refused.size(), 1U);
  EXPECT_EQ(refused[0].code, text::Code::kFileNumberNotFinite);
  EXPECT_EQ(refused[0].place.pointer, "/terminals/0/coil/loss_kpa");
  EXPECT_TRUE(readLoopFile(path).loop == fullLoop());
}

TEST(LoopFile, WhatCannotBeOpenedSaysWhy) {
  for (const std::filesystem::path& path : {scratch("missing.ebbline"), scratch("x").parent_path(),
                                            std::filesystem::path("/dev/zero"), std::filesystem::path("")}) {
    const Reading reading = readLoopFile(path);
    ASSERT_EQ(reading.remarks.size(), 1U) << path;
    EXPECT_EQ(reading.remarks[0].code, text::Code::kFileCannotOpen) << path;
    EXPECT_FALSE(reading.remarks[0].arguments[1].empty());
  }
  const auto pipe = scratch("pipe.ebbline");
  ::unlink(pipe.c_str());
  ASSERT_EQ(::mkfifo(pipe.c_str(), 0600), 0);
  EXPECT_FALSE(readLoopFile(pipe).usable());  // and does not hang
}

}  // namespace
}  // namespace ebbline::loop
