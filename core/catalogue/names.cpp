#include "core/catalogue/names.h"

namespace ebbline::catalogue {

std::string comparable(std::string_view name) {
  std::string result;
  for (const char c : name)
    if (c != ' ') result += c >= 'A' && c <= 'Z' ? static_cast<char>(c - 'A' + 'a') : c;
  return result;
}

std::string listed(const std::vector<std::string>& names) {
  std::string list;
  for (const std::string& name : names) list += (list.empty() ? "" : ", ") + name;
  return list;
}

}  // namespace ebbline::catalogue
