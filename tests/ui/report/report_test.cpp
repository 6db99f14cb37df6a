// The report as a client gets it: made by the program, read back by poppler's tools.

#include <array>
#include <cstdio>
#include <filesystem>
#include <fstream>
#include <sstream>

#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <nlohmann/json.hpp>

#include "core/quantity/quantity.h"

namespace {

namespace fs = std::filesystem;
using ebbline::quantity::Quantity;
using ebbline::quantity::UnitSystem;
using nlohmann::json;
using testing::AllOf;
using testing::HasSubstr;
using testing::Not;

struct Ended {
  int code = 0;
  std::string out;
};

Ended shell(const std::string& command) {
  Ended run;
  FILE* pipe = popen(command.c_str(), "r");
  std::array<char, 4096> piece{};
  std::size_t got = 0;
  while ((got = fread(piece.data(), 1, piece.size(), pipe)) > 0) run.out.append(piece.data(), got);
  run.code = pclose(pipe);
  return run;
}

const std::string kProgram = std::string(EBBLINE_BINARY_DIR) + "/app/ebbline";

class Report : public testing::Test {
 protected:
  Report()
      : folder_(fs::temp_directory_path() /
                ("ebbline_report_" + std::string(testing::UnitTest::GetInstance()->current_test_info()->name()))) {
    fs::remove_all(folder_);
    fs::create_directories(folder_);
  }
  ~Report() override { fs::remove_all(folder_); }

  std::string make(const std::string& options) const {
    const std::string file = (folder_ / "report.pdf").string();
    const Ended run = shell(kProgram + " report " + options + " -o " + file);
    EXPECT_EQ(run.code, 0) << run.out;
    EXPECT_THAT(run.out, HasSubstr("3 pages"));
    return file;
  }
  static std::string textOf(const std::string& file) { return shell("pdftotext -layout " + file + " -").out; }
  static json sweepOf(const std::string& options) {
    const Ended run = shell(kProgram + " sweep " + options + " --json");
    return json::parse(run.out)["rows"];
  }

  fs::path folder_;
};

// Numbers of the text that stand on the line beginning with `start`, in order.
std::vector<std::string> cellsOfLine(const std::string& text, const std::string& start) {
  std::istringstream lines(text);
  for (std::string line; std::getline(lines, line);) {
    std::istringstream words(line);
    std::vector<std::string> cells;
    for (std::string word; words >> word;) cells.push_back(word);
    if (!cells.empty() && cells.front() == start && cells.size() > 6) return cells;
  }
  return {};
}

void expectTableIsTheSweep(const std::string& text, const json& rows) {
  using ebbline::quantity::fileToBase;
  using ebbline::quantity::format;
  ASSERT_EQ(rows.size(), 10U);
  for (const json& row : rows) {
    const std::string load = std::to_string(row["load_percent"].get<int>());
    const std::vector<std::string> cells = cellsOfLine(text, load);
    ASSERT_GE(cells.size(), 7U) << load << "\n" << text;
    EXPECT_EQ(cells[1], format(fileToBase(row["flow_l_s"], Quantity::kFlow), Quantity::kFlow, UnitSystem::kSi));
    EXPECT_EQ(cells[2],
              format(fileToBase(row["pressure_kpa"], Quantity::kPressure), Quantity::kPressure, UnitSystem::kSi));
    EXPECT_EQ(cells[6], format(fileToBase(row["shaft_power_kw"], Quantity::kPower), Quantity::kPower, UnitSystem::kSi));
  }
}

TEST_F(Report, ItsTableIsTheSweepOfTheCommandLine) {
  expectTableIsTheSweep(textOf(make("office")), sweepOf("office"));
}

// The seeded fault: the table of another set-point must not pass.
TEST_F(Report, ATableOfAnotherSetPointIsSeen) {
  const std::string text = textOf(make("office --set-point 70kPa"));
  const json rows = sweepOf("office");
  const std::vector<std::string> cells = cellsOfLine(text, "50");
  ASSERT_GE(cells.size(), 7U);
  EXPECT_NE(cells[2], ebbline::quantity::format(1000 * rows[5]["pressure_kpa"].get<double>(), Quantity::kPressure,
                                                UnitSystem::kSi));
}

TEST_F(Report, ItSaysWhatWhoAndWhatToBewareOf) {
  const std::string text = textOf(make("office --state 'July morning, meeting rooms on'"));
  for (const char* words : {"Quarry Lane Offices", "July morning, meeting rooms on", "Assumed", "Caution", "licensed",
                            "fallback", "flow residual", "second method", "T3-3", "page 1 of 3", "page 3 of 3"})
    EXPECT_THAT(text, HasSubstr(words));
  EXPECT_THAT(text, AllOf(Not(HasSubstr("nan")), Not(HasSubstr("inf "))));
}

TEST_F(Report, ShortfallsAreThoseOfSolve) {
  const std::string state = " --state 'July morning, meeting rooms on'";
  const std::string text = textOf(make("office" + state));
  const json solved = json::parse(shell(kProgram + " solve office" + state + " --json").out);
  int count = 0;
  for (const json& terminal : solved["terminals"]) count += terminal["under_supplied"].get<bool>() ? 1 : 0;
  ASSERT_GT(count, 0);
  EXPECT_THAT(text, HasSubstr(std::to_string(count) + "  "));
  EXPECT_THAT(text, HasSubstr("terminals do not get the flow they ask for"));
}

TEST_F(Report, EveryFontIsEmbedded) {
  const std::string fonts = shell("pdffonts " + make("closed-form")).out;
  EXPECT_THAT(fonts, HasSubstr("Lato"));
  std::istringstream lines(fonts);
  std::string line;
  std::getline(lines, line);  // heads
  std::getline(lines, line);  // rule
  int count = 0;
  while (std::getline(lines, line)) {
    ++count;
    EXPECT_THAT(line, HasSubstr("Lato"));
    EXPECT_THAT(line, HasSubstr("yes")) << "not embedded: " << line;
  }
  EXPECT_GE(count, 2);
}

TEST_F(Report, PaperFollowsTheUnits) {
  const std::string si = shell("pdfinfo " + make("school")).out;
  EXPECT_THAT(si, AllOf(HasSubstr("A4"), HasSubstr("Pages:           3")));
  const std::string file = make("school --units ip");
  EXPECT_THAT(shell("pdfinfo " + file).out, HasSubstr("letter"));
  EXPECT_THAT(textOf(file), AllOf(HasSubstr("gpm"), Not(HasSubstr("L/s"))));
}

TEST_F(Report, TheLoopIsDrawnInLinesNotPixels) {
  EXPECT_THAT(shell("pdfimages -list " + make("office")).out, Not(HasSubstr("image ")));
}

TEST_F(Report, EverySampleAndALargeCampusHaveOne) {
  for (const char* sample : {"laboratory", "closed-form"}) make(sample);
  const std::string campus = (folder_ / "campus.ebbline").string();
  EXPECT_EQ(shell(kProgram + " sample campus --terminals 300 -o " + campus).code, 0);
  EXPECT_THAT(textOf(make(campus)), HasSubstr("of 300 terminals"));
}

TEST_F(Report, APlaceThatCannotBeWrittenIsSaid) {
  std::ofstream(folder_ / "plain") << "x";
  const Ended run = shell(kProgram + " report closed-form -o " + (folder_ / "plain" / "r.pdf").string() + " 2>&1");
  EXPECT_EQ(WEXITSTATUS(run.code), 4) << run.out;
  EXPECT_THAT(run.out, HasSubstr("cannot be written"));
}

}  // namespace
