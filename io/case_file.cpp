#include "io/case_file.hpp"

#include <fmt/format.h>

#include <filesystem>

#include "io/case_draft.hpp"
#include "io/case_entries.hpp"
#include "io/case_profile_table.hpp"
#include "io/case_rules.hpp"
#include "io/case_values.hpp"
#include "io/text_file.hpp"

namespace lidwright {
namespace {

using namespace case_text;

constexpr const char* along_place = "--along";

/// A path in a case starts at the case file, wherever the program runs.
void settle_path(std::string& path, const std::string& case_file) {
  if (path.empty()) return;
  const std::filesystem::path from(path);
  if (from.is_absolute()) return;
  const auto folder = std::filesystem::path(case_file).parent_path();
  path = std::filesystem::absolute(folder / from).lexically_normal().string();
}

}  // namespace

Case parse_case(const std::string& text, const std::string& name,
                const std::vector<std::string>& settings, const std::string& along) {
  Entries entries(text, name);
  for (std::size_t n = 0; n < settings.size(); ++n)
    entries.set(settings[n], fmt::format("--set {}", n + 1));
  if (!along.empty()) entries.set(along, along_place);
  Draft draft;
  choose_tables(draft, entries);
  read_body_keys(draft, entries);
  check_body(draft, entries);
  read_other_keys(draft, entries);
  read_profile_table(draft, entries, name);
  check_together(draft, entries);
  Case made = assemble(std::move(draft));
  settle_path(made.initial.from, name);
  return made;
}

std::string read_case_text(const std::string& path) {
  if (path.empty()) refuse("case file", "no path is given");
  return read_text_file(path, [&](const std::string& complaint) { refuse(path, complaint); });
}

NumberKey number_key(const std::string& path) {
  const Key& key = key_named(path, along_place);
  const std::string type = type_text(key);
  if (key.table() == "grid")
    refuse(along_place, fmt::format("{} is of the grid, which stays the same along a branch; for "
                                    "the effect of the grid use --error-bars",
                                    path));
  if (type != "number")
    refuse(along_place,
           fmt::format("{} takes {} and cannot go from one number to another; give a "
                       "key that takes a number, such as numbers.rayleigh",
                       path, type == "list" || type == "whole number" ? "a " + type : type));
  return {path, std::string(key.units().dimensionless), std::string(key.units().si)};
}

Case read_case(const std::string& path, const std::vector<std::string>& settings) {
  return parse_case(read_case_text(path), path, settings);
}

}  // namespace lidwright
