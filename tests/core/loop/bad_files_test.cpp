// Every file of tests/data/bad draws exactly the remarks that stand beside it in expected.csv.

#include <algorithm>
#include <filesystem>
#include <fstream>
#include <map>
#include <set>
#include <sstream>

#include <gtest/gtest.h>

#include "core/loop/file.h"

namespace ebbline::loop {
namespace {

const std::filesystem::path kFolder = std::filesystem::path(EBBLINE_SOURCE_DIR) / "tests/data/bad";

struct Expected {
  std::string code;
  std::string pointer;
  int line = 0;
  bool operator==(const Expected&) const = default;
};

std::ostream& operator<<(std::ostream& out, const Expected& expected) {
  return out << expected.code << " " << expected.pointer << " line " << expected.line;
}

std::map<std::string, std::vector<Expected>> expectations() {
  std::map<std::string, std::vector<Expected>> all;
  std::ifstream table(kFolder / "expected.csv");
  std::string row;
  while (std::getline(table, row)) {
    if (row.starts_with('#') || row == "file,code,pointer,line") continue;
    std::istringstream cells(row);
    std::string file;
    std::string line;
    Expected expected;
    std::getline(cells, file, ',');
    std::getline(cells, expected.code, ',');
    std::getline(cells, expected.pointer, ',');
    std::getline(cells, line, ',');
    expected.line = std::stoi(line);
    all[file].push_back(expected);
  }
  return all;
}

std::vector<Expected> drawn(const Reading& reading) {
  std::vector<Expected> all;
  for (const text::Remark& remark : reading.remarks)
    all.push_back({text::codeName(remark.code), remark.place.pointer, remark.place.line});
  return all;
}

TEST(BadFiles, EachNamesItsPointerAndLine) {
  const auto all = expectations();
  ASSERT_GE(all.size(), 80U);
  for (const auto& [file, expected] : all) {
    const Reading reading = readLoopFile(kFolder / (file + ".ebbline"));
    EXPECT_EQ(drawn(reading), expected) << file;
    for (const text::Remark& remark : reading.remarks) {
      EXPECT_EQ(text::sentence(remark).find('{'), std::string::npos) << file << ": " << text::oneLine(remark);
      EXPECT_EQ(text::remedy(remark).find('{'), std::string::npos) << file << ": " << text::oneLine(remark);
    }
  }
}

TEST(BadFiles, EveryFileOfTheFolderStandsInTheTable) {
  const auto all = expectations();
  for (const auto& entry : std::filesystem::directory_iterator(kFolder))
    if (entry.path().extension() == ".ebbline") {
      EXPECT_TRUE(all.contains(entry.path().stem().string())) << entry.path();
    }
}

TEST(BadFiles, EveryCodeOfReaderAndContentIsDrawnByAFile) {
  // Codes that no small file can draw, and the test that draws them.
  const std::set<std::string> elsewhere = {
      "file-cannot-open",        // LoopFile.WhatCannotBeOpenedSaysWhy
      "file-cannot-write",       // LoopFile.FailedSaveSaysWhyAndLeavesTheOldFile
      "file-number-not-finite",  // the same
      "file-too-large",          // HostileFiles.TwoHundredMegabytesAreRefusedUnread
      "file-too-many-values",    // HostileFiles.MoreValuesThanAllowedAreRefusedInBoundedMemory
      "file-more-faults",        // HostileFiles.FaultsWithoutNumberAreCutWithAWord
      "loop-empty",              // drawn by compile: tests/core/network
  };
  std::set<std::string> covered = elsewhere;
  std::set<std::string> by_files;
  for (const auto& [file, expected] : expectations())
    for (const Expected& one : expected) by_files.insert(one.code);
  covered.insert(by_files.begin(), by_files.end());
  EXPECT_GE(by_files.size(), 40U);
  for (int i = 0; i < text::codeCount(); ++i) {
    const std::string name = text::codeName(text::codeAt(i));
    if (name.starts_with("file-") || name.starts_with("loop-")) {
      EXPECT_TRUE(covered.contains(name)) << name;
    }
  }
}

TEST(BadFiles, TheFileTheyAreMadeFromIsSound) {
  const Reading reading = readLoopFile(kFolder.parent_path() / "small.ebbline");
  EXPECT_TRUE(drawn(reading).empty());
  const Reading again = readLoop(writeLoop(reading.loop));
  EXPECT_TRUE(again.loop == reading.loop);
}

TEST(BadFiles, SentencesSayWhatWhereAndWhatToDo) {
  const auto first = [](const char* file) {
    return text::oneLine(readLoopFile(kFolder / (std::string(file) + ".ebbline")).remarks.at(0));
  };
  EXPECT_EQ(first("unknown-key"),
            "line 20, /paired_runs/0/pipe/lenght_m: The key lenght_m is not known in a pipe; it was left out. "
            "If length_m is meant, rename it; otherwise nothing is to be done.");
  EXPECT_EQ(first("missing-colon"),
            "line 3: At column 13 stands an opening brace where a colon should be. Mend this place in a text editor.");
  EXPECT_EQ(first("unknown-choice"),
            "line 5, /control/strategy: strategy has no choice constant_dp. Write one of constant_speed, "
            "constant_dp_pump, constant_dp_headers, field_sensor.");
  EXPECT_EQ(first("below-limit"),
            "line 20, /paired_runs/0/pipe/length_m: length_m must be at least 0; it is -6. Write 0 or more.");
  EXPECT_EQ(first("version-newer"),
            "line 3, /schema_version: The file has schema version 7; this program reads up to 1. Open it with a "
            "version of Ebbline that reads schema version 7.");
}

}  // namespace
}  // namespace ebbline::loop
