#include <fmt/format.h>

#include <charconv>

#include "io/case_file.hpp"
#include "io/case_values.hpp"

namespace lidwright {
namespace {

using namespace case_text;

constexpr const char* heading =
    "# Written by lidwright: the case as read, every default filled in, dimensionless.\n"
    "# Units: length d (thickness of the shell), time d^2/kappa, temperature DeltaT.\n"
    "# Numbers are exact: read back, they give the same case to the last bit.\n";

std::string header(const std::string& table) {
  const char* note = "";
  if (table == "body_used")
    note =
        "# The body that the numbers of this file were made with. The rest of the file stays "
        "dimensionless.\n";
  return table.empty() ? "\n" : fmt::format("\n{}[{}]\n", note, table);
}

/// A number as it would stand in a file with [body]; "" for other types.
std::string in_si(const Key& key, Draft& draft) {
  Draft si = draft;
  si.si = true;
  const std::string value = written_value(key, si);
  double number = 0;
  const auto end = std::from_chars(value.data(), value.data() + value.size(), number);
  return end.ec == std::errc{} ? fmt::format("; {:.6g} {}", number, key.units().si) : "";
}

std::string comment(const Key& key, Draft& draft) {
  const Units units = key.units();
  if (units.dimensionless.empty()) return "";
  const bool two_units = draft.body_used && units.si != units.dimensionless;
  return fmt::format("  # {}{}", units.dimensionless, two_units ? in_si(key, draft) : "");
}

std::string list_value(const Key& list_key, std::size_t items, Draft& draft) {
  std::string text = "[";
  for (std::size_t k = 0; k < items; ++k) {
    text += "\n  { ";
    std::string members;
    for (const Key* key : item_keys(list_key)) {
      const std::string value = written_value(*key, draft, k);
      if (value.empty()) continue;
      members += fmt::format("{}{} = {}", members.empty() ? "" : ", ", key->name(), value);
    }
    text += members + " },";
  }
  return text + (items == 0 ? "]" : "\n]");
}

std::string line(const Key& key, Draft& draft) {
  const Target target = key.access(draft, 0);
  if (const auto* list = std::get_if<List>(&target))
    return fmt::format("{} = {}\n", key.name(), list_value(key, list->size(), draft));
  const std::string value = written_value(key, draft);
  if (value.empty()) return "";
  return fmt::format("{} = {}{}\n", key.name(), value, comment(key, draft));
}

}  // namespace

std::string write_case(const Case& made) {
  Draft draft = take_apart(made);
  std::string text = heading, table = "no table yet";
  for (const Key& key : all_keys()) {
    if (key.in_list() || !key.only.holds(draft)) continue;
    if (key.table() != table) text += header(key.table());
    table = key.table();
    text += line(key, draft);
  }
  return text;
}

}  // namespace lidwright
