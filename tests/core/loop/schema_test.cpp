// The schema in resources/ is the one the field table makes, and an independent validator accepts what is written.

#include <filesystem>
#include <fstream>
#include <sstream>

#include <gtest/gtest.h>
#include <nlohmann/json.hpp>
#include <valijson/adapters/nlohmann_json_adapter.hpp>
#include <valijson/schema.hpp>
#include <valijson/schema_parser.hpp>
#include <valijson/validator.hpp>

#include "core/loop/campus.h"
#include "core/loop/file.h"
#include "tests/core/loop/random_loop.h"

namespace ebbline::loop {
namespace {

using Json = nlohmann::json;
using Adapter = valijson::adapters::NlohmannJsonAdapter;
const std::filesystem::path kSource = EBBLINE_SOURCE_DIR;

std::string contentOf(const std::filesystem::path& path) {
  std::ostringstream text;
  text << std::ifstream(path, std::ios::binary).rdbuf();
  return text.str();
}

// Empty = valid, otherwise the complaints.
std::string complaints(const std::string& text) {
  static const Json kSchemaJson = Json::parse(contentOf(kSource / "resources/schema/ebbline-1.schema.json"));
  valijson::Schema schema;
  valijson::SchemaParser().populateSchema(Adapter(kSchemaJson), schema);
  const Json document = Json::parse(text);
  valijson::ValidationResults results;
  if (valijson::Validator().validate(schema, Adapter(document), &results)) return "";
  std::string all;
  valijson::ValidationResults::Error error;
  while (results.popError(error)) {
    for (const std::string& step : error.context) all += step;
    all += ": " + error.description + "\n";
  }
  return all.empty() ? "not valid" : all;
}

TEST(Schema, FileInResourcesIsTheOneOfTheFieldTable) {
  EXPECT_EQ(contentOf(kSource / "resources/schema/ebbline-1.schema.json"), schemaText());
}

TEST(Schema, AcceptsLoopsAsWritten) {
  EXPECT_EQ(complaints(writeLoop({})), "");
  EXPECT_EQ(complaints(writeLoop(test::fullLoop())), "");
  EXPECT_EQ(complaints(writeLoop(campus(70))), "");
  std::mt19937_64 random(3);
  for (int i = 0; i < 10; ++i) EXPECT_EQ(complaints(writeLoop(test::randomLoop(random))), "");
}

TEST(Schema, AcceptsEverySample) {
  EXPECT_EQ(complaints(contentOf(kSource / "tests/data/small.ebbline")), "");
  if (!std::filesystem::exists(kSource / "samples")) return;
  for (const auto& entry : std::filesystem::directory_iterator(kSource / "samples"))
    if (entry.path().extension() == ".ebbline") {
      EXPECT_EQ(complaints(contentOf(entry.path())), "") << entry.path();
    }
}

TEST(Schema, RefusesWhatTheReaderRefuses) {
  for (const char* file :
       {"missing-key", "text-for-number", "null-for-number", "id-with-fraction", "below-limit", "not-above",
        "above-limit", "unknown-choice", "unknown-key", "version-zero", "version-missing", "a-list"})
    EXPECT_NE(complaints(contentOf(kSource / "tests/data/bad" / (std::string(file) + ".ebbline"))), "") << file;
}

}  // namespace
}  // namespace ebbline::loop
