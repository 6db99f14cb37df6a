// Files made to hurt: too large, too deep, cut off, random. Each must end in a sentence, quickly and in bounded memory.

#include <malloc.h>
#include <sys/resource.h>
#include <unistd.h>

#include <filesystem>
#include <fstream>
#include <random>
#include <sstream>

#include <gtest/gtest.h>

#include "core/loop/file.h"
#include "core/loop/json_tree.h"
#include "tests/support/seed.h"

namespace ebbline::loop {
namespace {

using text::Code;

std::string small() {
  std::ostringstream text;
  text << std::ifstream(std::string(EBBLINE_SOURCE_DIR) + "/tests/data/small.ebbline", std::ios::binary).rdbuf();
  return text.str();
}

std::size_t peakBytes() {
  struct rusage usage {};
  ::getrusage(RUSAGE_SELF, &usage);
  return static_cast<std::size_t>(usage.ru_maxrss) * 1024;
}

// Whatever it is, it must be judged: sound, or with remarks that all have words.
void expectJudged(const Reading& reading) {
  for (const text::Remark& remark : reading.remarks) {
    ASSERT_FALSE(text::sentence(remark).empty());
    ASSERT_GE(remark.place.line, 0);
  }
  if (reading.usable()) {
    ASSERT_TRUE(readLoop(writeLoop(reading.loop)).loop == reading.loop);
  } else {
    ASSERT_FALSE(reading.remarks.empty());
  }
}

TEST(HostileFiles, TwoHundredMegabytesAreRefusedUnread) {
  const auto path = std::filesystem::temp_directory_path() / ("ebbline-large-" + std::to_string(::getpid()));
  std::ofstream(path) << "{";
  std::filesystem::resize_file(path, 200'000'000);  // sparse: takes no room on disk
  const std::size_t before = peakBytes();
  const Reading reading = readLoopFile(path);
  std::filesystem::remove(path);
  ASSERT_EQ(reading.remarks.size(), 1U);
  EXPECT_EQ(reading.remarks[0].code, Code::kFileTooLarge);
  EXPECT_NE(text::sentence(reading.remarks[0]).find("200000000"), std::string::npos);
  EXPECT_LT(peakBytes() - before, 10U << 20U);
}

TEST(HostileFiles, TwoMillionNestedListsAreRefusedInBoundedMemory) {
  const std::string text = "{\"schema_version\": 1, \"notes\": " + std::string(2'000'000, '[');
  const std::size_t before = peakBytes();
  const Reading reading = readLoop(text);
  ASSERT_EQ(reading.remarks.size(), 1U);
  EXPECT_EQ(reading.remarks[0].code, Code::kFileTooDeep);
  EXPECT_EQ(readLoop(std::string(2'000'000, '[')).remarks.at(0).code, Code::kFileTooDeep);
  std::string objects;
  for (int i = 0; i < 400'000; ++i) objects += "{\"a\":";
  EXPECT_EQ(readLoop(objects).remarks.at(0).code, Code::kFileTooDeep);
  EXPECT_LT(peakBytes() - before, 40U << 20U);
}

TEST(HostileFiles, MoreValuesThanAllowedAreRefusedInBoundedMemory) {
  std::string text = "{\"schema_version\": 1, \"notes\": [0";
  for (std::size_t i = 0; i < kMostValues; ++i) text += ",0";
  text += "]}";
  const std::size_t before = peakBytes();
  const Reading reading = readLoop(text);
  ASSERT_EQ(reading.remarks.size(), 1U);
  EXPECT_EQ(reading.remarks[0].code, Code::kFileTooManyValues);
  EXPECT_LT(peakBytes() - before, std::size_t{1000} << 20U);
}

TEST(HostileFiles, FaultsWithoutNumberAreCutWithAWord) {
  std::string text = "{\"schema_version\": 1, \"notes\": [0";
  for (int i = 0; i < 100'000; ++i) text += ",\n0";
  const Reading reading = readLoop(text + "]}");
  ASSERT_EQ(reading.remarks.size(), kMostRemarks + 1);
  EXPECT_EQ(reading.remarks[7].code, Code::kFileWrongType);
  EXPECT_EQ(reading.remarks[7].place.line, 8);
  EXPECT_EQ(reading.remarks.back().code, Code::kFileMoreFaults);
}

TEST(HostileFiles, ManyDuplicateAndUnknownKeysTakeNoQuadraticTime) {
  std::string text = "{\"schema_version\": 1, \"project\": {\"title\": \"\"";
  for (int i = 0; i < 200'000; ++i) text += ",\"k" + std::to_string(i % 190'000) + "\":1";
  const Reading reading = readLoop(text + "}}");
  EXPECT_FALSE(reading.usable());
  EXPECT_EQ(reading.remarks[0].code, Code::kFileDuplicateKey);
}

TEST(HostileFiles, VeryLongKeysAndTextsAreCutInMessages) {
  const std::string longest(3'000'000, 'x');
  const Reading key = readLoop("{\"schema_version\": 1, \"" + longest + "\": 1}");
  ASSERT_EQ(key.remarks.size(), 1U);
  EXPECT_LT(text::oneLine(key.remarks[0]).size(), 1000U);
  const Reading word = readLoop("{\"schema_version\": 1, \"fluid\": {\"kind\": \"" + longest + "\"}}");
  ASSERT_EQ(word.remarks.size(), 1U);
  EXPECT_LT(text::oneLine(word.remarks[0]).size(), 1000U);
  const Reading number = readLoop("{\"schema_version\": " + std::string(400'000, '9') + "}");
  ASSERT_EQ(number.remarks.size(), 1U);
  EXPECT_LT(text::oneLine(number.remarks[0]).size(), 1000U);
  const Reading unquoted = readLoop("{\"schema_version\": " + longest + "}");
  ASSERT_EQ(unquoted.remarks.size(), 1U);
  EXPECT_LT(text::oneLine(unquoted.remarks[0]).size(), 1000U);
}

TEST(HostileFiles, EveryTruncationOfASmallFileIsRefusedWithALine) {
  const std::string whole = small();
  const auto lines = 1 + std::count(whole.begin(), whole.end(), '\n');
  const std::size_t last = whole.rfind('}');
  for (std::size_t size = 0; size <= last; ++size) {
    const Reading reading = readLoop(std::string_view(whole).substr(0, size));
    ASSERT_FALSE(reading.usable()) << size;
    ASSERT_GE(reading.remarks[0].place.line, 1) << size;
    ASSERT_LE(reading.remarks[0].place.line, lines) << size;
  }
  EXPECT_TRUE(readLoop(std::string_view(whole).substr(0, last + 1)).usable());
}

TEST(HostileFiles, RandomBytesAreRefused) {
  std::mt19937_64 random(test::seed());
  for (int i = 0; i < 5000; ++i) {
    std::string bytes(random() % 300, '\0');
    for (char& byte : bytes) byte = static_cast<char>(random());
    const Reading reading = readLoop(bytes);
    ASSERT_FALSE(reading.usable());
    expectJudged(reading);
  }
}

TEST(HostileFiles, RandomMutationsAreJudged) {
  std::mt19937_64 random(test::seed());
  const std::string whole = small();
  const std::string_view spice = "{}[]:,\"\\0123456789.eE+-tfn \n\x80\xff";
  int usable = 0;
  for (int i = 0; i < 20'000; ++i) {
    std::string text = whole;
    for (std::uint64_t times = 1 + random() % 4; times > 0; --times) {
      const std::size_t at = random() % text.size();
      const char byte = spice[random() % spice.size()];
      if (random() % 3 == 0)
        text.erase(at, 1 + random() % 20);
      else if (random() % 2 == 0)
        text.insert(at, 1, byte);
      else
        text[at] = byte;
    }
    const Reading reading = readLoop(text);
    ASSERT_NO_FATAL_FAILURE(expectJudged(reading)) << text;
    usable += reading.usable();
  }
  EXPECT_GT(usable, 100);  // the mutations reach past the parser
}

TEST(HostileFiles, SwappedTokensAreJudged) {
  // Whole tokens exchanged: mostly valid JSON, so that the content checks are reached.
  std::mt19937_64 random(test::seed());
  const std::string whole = small();
  std::vector<std::string> tokens;
  for (std::size_t i = 0; i < whole.size();) {
    std::size_t end = i + 1;
    if (whole[i] == '"')
      end = whole.find('"', i + 1) + 1;
    else if (std::isalnum(static_cast<unsigned char>(whole[i])) || whole[i] == '-')
      while (std::isalnum(static_cast<unsigned char>(whole[end])) || whole[end] == '.') ++end;
    tokens.push_back(whole.substr(i, end - i));
    i = end;
  }
  for (int i = 0; i < 10'000; ++i) {
    std::vector<std::string> mixed = tokens;
    for (int swap = 0; swap < 2; ++swap) mixed[random() % mixed.size()] = tokens[random() % tokens.size()];
    std::string text;
    for (const std::string& token : mixed) text += token;
    ASSERT_NO_FATAL_FAILURE(expectJudged(readLoop(text))) << text;
  }
}

}  // namespace
}  // namespace ebbline::loop
