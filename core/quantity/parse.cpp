#include <array>
#include <charconv>
#include <cmath>
#include <optional>
#include <utility>

#include "core/quantity/shown.h"
#include "core/quantity/units.h"

namespace ebbline::quantity {
namespace {

using text::Code;
using text::Remark;
template <class T>
using Or = tl::expected<T, Remark>;

constexpr std::size_t kMostText = 200;  // bytes; nothing sensible is longer

bool isDigit(char c) {
  return c >= '0' && c <= '9';
}
bool isLower(char c) {
  return c >= 'a' && c <= 'z';
}
char lower(char c) {
  return c >= 'A' && c <= 'Z' ? static_cast<char>(c - 'A' + 'a') : c;
}

// One spelling for the signs that keyboards, sheets and this program itself write differently; single spaces.
std::string normalised(std::string_view typed) {
  static constexpr std::array<std::pair<std::string_view, std::string_view>, 10> kSame = {{{"\u2212", "-"},
                                                                                           {"\u2013", "-"},
                                                                                           {"\u00A0", " "},
                                                                                           {"\u202F", " "},
                                                                                           {"\u2009", " "},
                                                                                           {"\u2032", "'"},
                                                                                           {"\u2019", "'"},
                                                                                           {"\u2033", "\""},
                                                                                           {"\u201D", "\""},
                                                                                           {"\u03BC", "\u00B5"}}};
  std::string result;
  for (std::size_t i = 0; i < typed.size();) {
    std::string_view piece = typed.substr(i, 1);
    std::size_t length = 1;
    for (const auto& [from, to] : kSame)
      if (typed.substr(i).starts_with(from)) {
        piece = to;
        length = from.size();
      }
    if (piece == "\t") piece = " ";
    if (piece != " " || (!result.empty() && result.back() != ' ')) result += piece;
    i += length;
  }
  while (!result.empty() && result.back() == ' ') result.pop_back();
  return result;
}

// Reads one text from the left. Members that read return nothing, and leave a remark, when they cannot.
class Reader {
 public:
  Reader(std::string_view typed, Quantity quantity)
      : typed_(typed), table_(unitTable(quantity)), rest_storage_(normalised(typed)), rest_(rest_storage_) {}

  Or<std::pair<double, Unit>> read(const Unit& bare, bool valve_prefix);

 private:
  tl::unexpected<Remark> notANumber() const {
    return tl::make_unexpected(
        Remark{Code::kQuantityNotANumber,
               {},
               {shownInMessage(typed_), std::string(table_.words), std::string(table_.example)}});
  }
  void skipSpace() {
    while (!rest_.empty() && rest_.front() == ' ') rest_.remove_prefix(1);
  }
  bool skip(std::string_view start) {
    if (!rest_.starts_with(start)) return false;
    rest_.remove_prefix(start.size());
    return true;
  }
  Or<std::string> withoutCommas(std::string_view digits) const;
  Or<double> decimal();
  std::string_view exponentAt(std::size_t start) const;
  std::optional<std::pair<double, std::size_t>> fractionAt(std::size_t start) const;
  Or<double> mixed();
  Or<Unit> unit(std::string_view name) const;
  Or<std::optional<double>> inchesAfterFeet();

  std::string_view typed_;
  const UnitTable& table_;
  std::string rest_storage_;
  std::string_view rest_;
};

// Applies the comma rule of quantity.h to a run of digits, commas and points.
Or<std::string> Reader::withoutCommas(std::string_view digits) const {
  const std::size_t first = digits.find(',');
  if (first == std::string_view::npos) return std::string(digits);
  const std::size_t point = digits.find('.');
  const std::string_view whole = digits.substr(0, point);
  bool groups = first >= 1 && first <= 3 && digits.front() != '0';
  std::string joined;
  for (std::size_t i = 0; i < whole.size(); ++i) {
    if (whole[i] != ',') joined += whole[i];
    const bool due = i >= first && (i - first) % 4 == 0;
    if ((whole[i] == ',') != due) groups = false;
  }
  groups = groups && (whole.size() - first) % 4 == 0;
  const bool single = digits.find(',', first + 1) == std::string_view::npos;
  if (single && point == std::string_view::npos) {
    std::string with_point(digits);
    with_point[first] = '.';
    if (!groups) return with_point;
    return tl::make_unexpected(Remark{Code::kQuantityAmbiguousComma, {}, {shownInMessage(typed_), with_point, joined}});
  }
  if (!groups || (point != std::string_view::npos && digits.find(',', point) != std::string_view::npos))
    return notANumber();
  return joined + std::string(point == std::string_view::npos ? "" : digits.substr(point));
}

// A number without sign and fraction: digits with point, commas and exponent.
Or<double> Reader::decimal() {
  std::size_t end = 0;
  while (end < rest_.size() && (isDigit(rest_[end]) || rest_[end] == '.' || rest_[end] == ',')) ++end;
  if (end == 0) return notANumber();
  const auto digits = withoutCommas(rest_.substr(0, end));
  if (!digits) return tl::make_unexpected(digits.error());
  const std::string_view exponent = exponentAt(end);
  const std::string number = *digits + std::string(exponent);
  double value = 0;
  const char* const last = number.data() + number.size();
  const auto result = std::from_chars(number.data(), last, value);
  if (result.ec == std::errc::result_out_of_range)
    return tl::make_unexpected(Remark{Code::kQuantityTooLarge, {}, {shownInMessage(typed_)}});
  if (result.ec != std::errc() || result.ptr != last) return notANumber();
  rest_.remove_prefix(end + exponent.size());
  return value;
}

// "e-3" at `start` of the rest; empty if there is none.
std::string_view Reader::exponentAt(std::size_t start) const {
  if (start >= rest_.size() || lower(rest_[start]) != 'e') return {};
  std::size_t end = start + 1;
  if (end < rest_.size() && (rest_[end] == '+' || rest_[end] == '-')) ++end;
  const std::size_t first_digit = end;
  while (end < rest_.size() && isDigit(rest_[end])) ++end;
  return end > first_digit ? rest_.substr(start, end - start) : std::string_view{};
}

// "3/4" at `start` of the rest: its value and where it ends.
std::optional<std::pair<double, std::size_t>> Reader::fractionAt(std::size_t start) const {
  const auto whole = [this](std::size_t from, double& value) {
    std::size_t to = from;
    value = 0;
    while (to < rest_.size() && isDigit(rest_[to]) && to - from < 4) value = value * 10 + (rest_[to++] - '0');
    return to;
  };
  double over = 0;
  double under = 0;
  const std::size_t slash = whole(start, over);
  if (slash == start || slash >= rest_.size() || rest_[slash] != '/') return std::nullopt;
  const std::size_t end = whole(slash + 1, under);
  if (end == slash + 1 || under == 0) return std::nullopt;
  return std::pair{over / under, end};
}

// "2.5", "3/4", "1-1/4", "1 1/4".
Or<double> Reader::mixed() {
  if (const auto alone = fractionAt(0)) {
    rest_.remove_prefix(alone->second);
    return alone->first;
  }
  auto value = decimal();
  if (!value || rest_.empty() || (rest_.front() != '-' && rest_.front() != ' ')) return value;
  const auto part = fractionAt(1);
  if (!part) return value;
  if (*value != std::floor(*value) || part->first >= 1) return notANumber();
  rest_.remove_prefix(part->second);
  return *value + part->first;
}

// The unit of this name: as written, else without regard to capitals. The first letter m or M always counts unless
// all is in capitals, since milli and mega differ by a factor of 1e9.
Or<Unit> Reader::unit(std::string_view name) const {
  std::vector<Unit> all = {table_.si, table_.ip, table_.file};
  for (const Unit& other : table_.others)
    if (!other.name.empty()) all.push_back(other);
  for (const Unit& one : all)
    if (one.name == name) return one;
  bool capitals = true;
  for (const char c : name) capitals = capitals && !isLower(c);
  for (const Unit& one : all) {
    bool same = one.name.size() == name.size();
    for (std::size_t i = 0; same && i < name.size(); ++i) same = lower(one.name[i]) == lower(name[i]);
    const bool prefix_counts = same && lower(name[0]) == 'm' && !capitals;
    if (same && (!prefix_counts || one.name[0] == name[0])) return one;
  }
  std::string list;
  for (std::size_t i = 0; i < all.size(); ++i)
    if (i == 0 || list.find(all[i].name) == std::string::npos) list += (i > 0 ? ", " : "") + std::string(all[i].name);
  return tl::make_unexpected(
      Remark{Code::kQuantityUnknownUnit, {}, {shownInMessage(name), std::string(table_.words), list}});
}

// After a number: "' 6 1/2\"" or "ft 6 in". Nothing if the text is not feet followed by inches.
Or<std::optional<double>> Reader::inchesAfterFeet() {
  const std::string_view before = rest_;
  const bool feet = skip("'") || skip("feet") || skip("foot") || skip("ft");
  skipSpace();
  if (skip("-")) skipSpace();
  if (!feet || rest_.empty() || !isDigit(rest_.front())) {
    rest_ = before;
    return std::nullopt;
  }
  const auto inches = mixed();
  if (!inches) return tl::make_unexpected(inches.error());
  skipSpace();
  const bool named = rest_.empty() || rest_ == "\"" || rest_ == "in" || rest_ == "inch" || rest_ == "inches";
  if (!named || *inches >= 12) return notANumber();
  rest_ = {};
  return *inches;
}

Or<std::pair<double, Unit>> Reader::read(const Unit& bare, bool valve_prefix) {
  if (typed_.size() > kMostText) return notANumber();
  std::string_view prefix;
  if (valve_prefix)
    for (const std::string_view name : {"Kvs", "kvs", "Kv", "kv", "KV", "Cv", "cv", "CV"})
      if (prefix.empty() && skip(name)) prefix = name;
  skipSpace();
  if (!prefix.empty() && skip("=")) skipSpace();
  const double sign = skip("-") ? -1 : 1;
  if (sign > 0) skip("+");
  skipSpace();
  auto value = mixed();
  if (!value) return tl::make_unexpected(value.error());
  skipSpace();
  if (table_.feet_and_inches) {
    const auto inches = inchesAfterFeet();
    if (!inches) return tl::make_unexpected(inches.error());
    if (*inches) return std::pair{sign * (*value * 12 + **inches), *unit("in")};
  }
  if (!prefix.empty() && !rest_.empty()) return notANumber();
  const std::string_view name = prefix.empty() ? rest_ : prefix;
  if (name.empty()) return std::pair{sign * *value, bare};
  if (isDigit(name.front()) || std::string_view("+-.,/'\"").find(name.front()) < 5) return notANumber();
  const auto found = unit(name);
  if (!found) return tl::make_unexpected(found.error());
  return std::pair{sign * *value, *found};
}

Or<std::pair<double, Unit>> readTyped(std::string_view typed, Quantity quantity, UnitSystem bare) {
  auto read = Reader(typed, quantity).read(shownUnit(quantity, bare), quantity == Quantity::kValveCoefficient);
  if (read && !std::isfinite(read->first * read->second.factor + read->second.offset))
    return tl::make_unexpected(Remark{Code::kQuantityTooLarge, {}, {shownInMessage(typed)}});
  return read;
}

}  // namespace

tl::expected<double, Remark> parse(std::string_view text, Quantity quantity, UnitSystem bare) {
  const auto typed = readTyped(text, quantity, bare);
  if (!typed) return tl::make_unexpected(typed.error());
  return typed->first * typed->second.factor + typed->second.offset;
}

tl::expected<double, Remark> parseToFileUnit(std::string_view text, Quantity quantity, UnitSystem bare) {
  const auto typed = readTyped(text, quantity, bare);
  if (!typed) return tl::make_unexpected(typed.error());
  const auto& [value, unit] = *typed;
  const Unit& file = unitTable(quantity).file;
  if (unit.factor == file.factor && unit.offset == file.offset) return value;
  const double in_file_unit = (value * unit.factor + unit.offset) / file.factor;
  if (!std::isfinite(in_file_unit))
    return tl::make_unexpected(Remark{Code::kQuantityTooLarge, {}, {shownInMessage(text)}});
  return in_file_unit;
}

}  // namespace ebbline::quantity
