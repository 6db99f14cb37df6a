#include "tests/architecture/source_rules.h"

#include <algorithm>
#include <cctype>
#include <fstream>
#include <optional>
#include <regex>
#include <set>

namespace ebbline::test {
namespace {

namespace fs = std::filesystem;

// In order: a module may use itself and those before it.
const std::vector<std::string> kCoreOrder = {"core/text",        "core/parallel",      "core/quantity",
                                             "core/fluid",       "core/catalogue",     "core/part",
                                             "core/loop",        "core/edit",          "core/network",
                                             "core/heat",        "core/control",       "core/proof",
                                             "core/study/sweep", "core/study/size",    "core/study/balance",
                                             "core/study/year",  "core/study/places",  "core/study/inference",
                                             "core/study/pumps", "core/study/options", "core/study/match",
                                             "core/finding",     "core/sheet"};
const std::vector<std::string> kUiOrder = {"ui/theme",  "ui/work",   "ui/document", "ui/plot",
                                           "ui/canvas", "ui/report", "ui/page",     "ui/shell"};

// Headers whose job needs a heavy library; everyone else's header keeps it in its .cpp (build time).
const std::set<std::string> kMayIncludeJson = {"core/loop/json_fields.h", "core/loop/field_table.h"};
const std::set<std::string> kMayIncludeSparse = {"core/network/linear.h", "core/network/newton_work.h"};

struct SourceLine {
  std::string file;  // from the root, with /
  int number = 0;
  std::string text;
};

std::string at(const SourceLine& line) {
  return line.file + ":" + std::to_string(line.number) + ": ";
}

bool startsWith(const std::string& text, const std::string& start) {
  return text.rfind(start, 0) == 0;
}

std::optional<std::size_t> rankIn(const std::vector<std::string>& order, const std::string& path) {
  for (std::size_t i = 0; i < order.size(); ++i)
    if (startsWith(path, order[i] + "/")) return i;
  return std::nullopt;
}

void checkOrder(const std::vector<std::string>& order, const SourceLine& line, const std::string& included,
                std::vector<std::string>& breaches) {
  const auto own = rankIn(order, line.file);
  const auto other = rankIn(order, included);
  if (!own)
    breaches.push_back(at(line) + "lies in no module of the list");
  else if (!other)
    breaches.push_back(at(line) + "includes " + included + ", which lies in no module of the list");
  else if (*other > *own)
    breaches.push_back(at(line) + order[*own] + " must not use the later module " + order[*other]);
}

void checkLayer(const SourceLine& line, const std::string& included, std::vector<std::string>& breaches) {
  const bool in_core = startsWith(line.file, "core/");
  const bool in_ui = startsWith(line.file, "ui/");
  if (in_core && startsWith(included, "core/")) return checkOrder(kCoreOrder, line, included, breaches);
  if (in_ui && startsWith(included, "ui/")) return checkOrder(kUiOrder, line, included, breaches);
  if (in_core && !startsWith(included, "resources/")) breaches.push_back(at(line) + "core must not use " + included);
  if (in_ui && !startsWith(included, "core/") && !startsWith(included, "resources/"))
    breaches.push_back(at(line) + "ui must not use " + included);
}

void checkSystemInclude(const SourceLine& line, const std::string& header, std::vector<std::string>& breaches) {
  const bool in_core = startsWith(line.file, "core/");
  const bool is_header = line.file.size() > 2 && line.file.substr(line.file.size() - 2) == ".h";
  const bool qt = startsWith(header, "Q") || startsWith(header, "qt");
  if (in_core && qt) breaches.push_back(at(line) + "core must not use Qt (" + header + ")");
  if (in_core && (header == "execution" || header == "ranges"))
    breaches.push_back(at(line) + "core must not use <" + header + ">");
  if (!is_header) return;
  if (startsWith(header, "nlohmann/") && kMayIncludeJson.count(line.file) == 0)
    breaches.push_back(at(line) + "a header must not include " + header);
  if ((startsWith(header, "Eigen/Sparse") || header == "Eigen/Eigen") && kMayIncludeSparse.count(line.file) == 0)
    breaches.push_back(at(line) + "a header must not include " + header);
  const bool charts = startsWith(header, "QtCharts/") || startsWith(header, "QChart") || header == "QtCharts";
  if (charts && !startsWith(line.file, "ui/plot/"))
    breaches.push_back(at(line) + "Qt Charts belongs in the headers of ui/plot alone (" + header + ")");
}

void checkCodeLine(const SourceLine& line, std::vector<std::string>& breaches) {
  static const std::regex kInclude(R"re(^\s*#\s*include\s*([<"])([^>"]+)[>"])re");
  static const std::regex kForbidden(R"(\bstd\s*::\s*(execution|reduce|transform_reduce)\b)");
  std::smatch match;
  if (std::regex_search(line.text, match, kInclude)) {
    const std::string included = match[2];
    const bool ours = startsWith(included, "core/") || startsWith(included, "ui/") || startsWith(included, "app/") ||
                      startsWith(included, "resources/") || startsWith(included, "tests/");
    if (match[1] == "<")
      checkSystemInclude(line, included, breaches);
    else if (ours)
      checkLayer(line, included, breaches);
    else if (included.find(".moc") == std::string::npos)
      breaches.push_back(at(line) + "includes are written from the repository root (" + included + ")");
  }
  if (startsWith(line.file, "core/") && std::regex_search(line.text, kForbidden))
    breaches.push_back(at(line) + "std::execution and std::reduce are not used (they terminate, and sum in any order)");
}

void checkPlaces(const SourceLine& line, std::vector<std::string>& breaches) {
  // Put together from pieces, so that this file does not breach its own rule.
  static const std::vector<std::string> kOutside = {std::string("..") + "/shared", std::string("/wo") + "rk/",
                                                    std::string("/ho") + "me/", std::string("/ro") + "ot/"};
  // An absolute path starts a word: the folder of ui/work/ is ours.
  const auto startsAWord = [&line](std::size_t i) {
    return i == 0 || (std::isalnum(static_cast<unsigned char>(line.text[i - 1])) == 0 && line.text[i - 1] != '_');
  };
  for (const std::string& place : kOutside)
    for (std::size_t i = line.text.find(place); i != std::string::npos; i = line.text.find(place, i + 1))
      if (startsAWord(i)) {
        breaches.push_back(at(line) + "names a place outside the repository (" + place + ")");
        break;
      }
}

bool isText(const fs::path& path) {
  static const std::set<std::string> kEndings = {".h",   ".cpp", ".txt", ".md",    ".sh",      ".json", ".csv",
                                                 ".svg", ".inc", ".in",  ".cmake", ".ebbline", ".qrc",  ""};
  return kEndings.count(path.extension().string()) > 0;
}

void checkFile(const fs::path& root, const fs::path& path, std::vector<std::string>& breaches) {
  std::ifstream in(path);
  SourceLine line;
  line.file = fs::relative(path, root).generic_string();
  const bool code = path.extension() == ".h" || path.extension() == ".cpp" || path.extension() == ".inc";
  const bool product_code = code && (startsWith(line.file, "core/") || startsWith(line.file, "ui/"));
  while (std::getline(in, line.text)) {
    ++line.number;
    checkPlaces(line, breaches);
    if (product_code) checkCodeLine(line, breaches);
  }
}

}  // namespace

std::vector<std::string> breachesIn(const fs::path& root) {
  std::vector<std::string> breaches;
  std::vector<fs::path> files;
  for (const char* top : {"core", "ui", "app", "resources", "samples", "tests", ".ci"}) {
    if (!fs::exists(root / top)) continue;
    for (const auto& entry : fs::recursive_directory_iterator(root / top))
      if (entry.is_regular_file() && isText(entry.path())) files.push_back(entry.path());
  }
  for (const char* name : {"README.md", "DEVELOPERS.md", "CHANGELOG.md", "CMakeLists.txt", "CMakePresets.json"})
    if (fs::exists(root / name)) files.push_back(root / name);
  std::sort(files.begin(), files.end());
  for (const fs::path& file : files) checkFile(root, file, breaches);
  return breaches;
}

}  // namespace ebbline::test
