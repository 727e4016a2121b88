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

void apply_settings(Entries& entries, const std::vector<std::string>& settings) {
  for (std::size_t n = 0; n < settings.size(); ++n)
    entries.set(settings[n], fmt::format("--set {}", n + 1));
}

/// Everything that the file and the command line say, checked.
Draft read_draft(Entries& entries, const std::string& name) {
  Draft draft;
  choose_tables(draft, entries);
  read_body_keys(draft, entries);
  check_body(draft, entries);
  read_other_keys(draft, entries);
  read_profile_table(draft, entries, name);
  check_together(draft, entries);
  return draft;
}

/// A title is for people, and what one of several keys must say is no default of the others.
bool worth_naming(const Key& key, const Draft& draft, const Entries& entries) {
  const bool one_of_several = key.default_text.find("required") != std::string_view::npos ||
                              key.default_text.find("must be given") != std::string_view::npos;
  return !key.in_list() && !key.table().empty() && key.need == Need::Default && !one_of_several &&
         key.only.holds(draft) && !entries.find(key.path);
}

DefaultTaken default_taken(const Key& key, Draft& draft) {
  const std::string written = written_value(key, draft);
  const bool value = !written.empty() && written != R"("")";
  const std::string_view in_words = key.default_text.empty() ? "none" : key.default_text;
  return {key.table(), key.name(), value ? written : std::string(in_words),
          value ? std::string(unit_in_file(key, draft)) : ""};
}

}  // namespace

Case parse_case(const std::string& text, const std::string& name,
                const std::vector<std::string>& settings, const std::string& along) {
  Entries entries(text, name);
  apply_settings(entries, settings);
  if (!along.empty()) entries.set(along, along_place);
  Case made = assemble(read_draft(entries, name));
  settle_path(made.initial.from, name);
  return made;
}

std::vector<DefaultTaken> defaults_taken(const std::string& path,
                                         const std::vector<std::string>& settings) {
  Entries entries(read_case_text(path), path);
  apply_settings(entries, settings);
  Draft draft = read_draft(entries, path);
  if (!draft.box()) draft.extent = draft.extent_or_default();
  std::vector<DefaultTaken> taken;
  for (const Key& key : all_keys())
    if (worth_naming(key, draft, entries)) taken.push_back(default_taken(key, draft));
  return taken;
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
