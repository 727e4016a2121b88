#include "io/toml_sections.hpp"

#include <fmt/format.h>
#include <toml++/toml.h>

#include <algorithm>
#include <limits>

#include "io/case_file.hpp"
#include "io/plain_text.hpp"

namespace lidwright {
namespace {

std::string text_of(const toml::node& n) {
  if (const auto text = n.value_exact<std::string>()) return *text;
  if (const auto whole = n.value_exact<int64_t>()) return fmt::format("{}", *whole);
  if (const auto number = n.value_exact<double>()) return fmt::format("{}", *number);
  if (const auto truth = n.value_exact<bool>()) return *truth ? "true" : "false";
  return "";
}

/// Dotted keys are tables in TOML; they stay one name here.
void add_entries(const toml::table& table, const std::string& prefix, TomlSection& section) {
  for (const auto& [key, node] : table) {
    const std::string name = prefix + std::string(key.str());
    if (const auto* inner = node.as_table())
      add_entries(*inner, name + ".", section);
    else if (!node.is_array())
      section.entries.emplace_back(name, text_of(node));
  }
}

void add_tables(const std::string& name, const toml::array& all,
                std::vector<TomlSection>& sections) {
  for (const auto& node : all)
    if (const auto* table = node.as_table()) {
      sections.push_back({name, {}});
      add_entries(*table, "", sections.back());
    }
}

}  // namespace

std::string TomlSection::operator[](const std::string& key) const {
  const auto found = std::find_if(entries.begin(), entries.end(),
                                  [&](const auto& entry) { return entry.first == key; });
  return found == entries.end() ? "" : found->second;
}

double TomlSection::number(const std::string& key) const {
  return number_of((*this)[key]).value_or(std::numeric_limits<double>::quiet_NaN());
}

std::vector<TomlSection> toml_sections(const std::string& text, const std::string& path) {
  try {
    const toml::table root = toml::parse(text, path);
    std::vector<TomlSection> sections(1);
    add_entries(root, "", sections.front());
    for (const auto& [key, node] : root)
      if (const auto* all = node.as_array()) add_tables(std::string(key.str()), *all, sections);
    return sections;
  } catch (const toml::parse_error& e) {
    throw InputError(fmt::format("{}:{}: {}; the file was changed or damaged", path,
                                 e.source().begin.line, e.description()));
  }
}

}  // namespace lidwright
