#include "io/case_entries.hpp"

#include <fmt/format.h>
#include <fmt/ranges.h>

#include <algorithm>
#include <numeric>
#include <set>
#include <sstream>

#include "io/text_file.hpp"

namespace lidwright::case_text {
namespace {

std::string join(const std::string& table, std::string_view name) {
  return table.empty() ? std::string(name) : fmt::format("{}.{}", table, name);
}

/// Edits (insert, drop, change, swap neighbours) from one word to the other.
std::size_t edits(std::string_view a, std::string_view b) {
  std::vector<std::size_t> before(b.size() + 1), last(b.size() + 1), now(b.size() + 1);
  std::iota(last.begin(), last.end(), std::size_t{0});
  for (std::size_t i = 1; i <= a.size(); ++i) {
    now[0] = i;
    for (std::size_t j = 1; j <= b.size(); ++j) {
      now[j] = std::min({last[j] + 1, now[j - 1] + 1, last[j - 1] + (a[i - 1] != b[j - 1])});
      if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1])
        now[j] = std::min(now[j], before[j - 2] + 1);
    }
    before = last;
    last = now;
  }
  return last[b.size()];
}

const std::set<std::string>& known_tables() {
  static const std::set<std::string> tables = [] {
    std::set<std::string> found{"walls"};
    for (const Key& key : all_keys()) found.insert(key.table());
    return found;
  }();
  return tables;
}

const Key* find_key(const std::string& path) {
  for (const Key& key : all_keys())
    if (key.path == path && !key.in_list()) return &key;
  return nullptr;
}

/// Names that a table may hold: its keys and its sub-tables.
std::vector<std::string> names_in(const std::string& table) {
  std::vector<std::string> names;
  for (const Key& key : all_keys())
    if (!key.in_list() && key.table() == table) names.push_back(key.name());
  const std::string prefix = table.empty() ? "" : table + ".";
  for (const std::string& other : known_tables())
    if (!other.empty() && other.starts_with(prefix) &&
        other.find('.', prefix.size()) == std::string::npos)
      names.push_back(other.substr(prefix.size()));
  return names;
}

/// Where a key of this very name lives, should it be in the wrong table.
std::string elsewhere(std::string_view name) {
  std::string paths;
  for (const Key& key : all_keys())
    if (!key.in_list() && key.name() == name && !key.path.starts_with("body_used"))
      paths += (paths.empty() ? "" : " or ") + key.path;
  return paths.empty() ? "" : fmt::format(" (did you mean {}?)", paths);
}

[[noreturn]] void refuse_unknown(const std::string& place, const std::string& table,
                                 std::string_view name, bool is_table) {
  std::string hint = nearest(name, names_in(table));
  if (hint.empty()) hint = elsewhere(name);
  if (hint.empty()) hint = "; 'lidwright keys' lists all keys";
  const std::string path = join(table, name);
  refuse(place, is_table ? fmt::format("unknown table [{}]{}", path, hint)
                         : fmt::format("unknown key {}{}", path, hint));
}

[[noreturn]] void refuse_as_table(const std::string& place, const std::string& path,
                                  const std::string& value) {
  refuse(place,
         fmt::format("{0} = {1}: {0} is a table: write [{0}] and its keys below it", path, value));
}

toml::table parse(const std::string& text, const std::string& name) {
  if (text.size() > longest_text)
    refuse(name, "is longer than 1 MiB and hardly a case; a case is a short TOML file");
  try {
    return toml::parse(text);
  } catch (const toml::parse_error& error) {
    const auto begin = error.source().begin;
    refuse(fmt::format("{}:{}:{}", name, begin.line, begin.column),
           fmt::format("not valid TOML: {}", error.description()));
  }
}

/// A value on the command line: TOML, or bare text.
toml::table parse_setting(const std::string& value, bool text) {
  try {
    toml::table table = toml::parse("value = " + value);
    if (table.size() == 1 && (!text || table["value"].is_string())) return table;
  } catch (const toml::parse_error&) {
    // Bare text is no TOML; as a string it will be judged like any other value.
  }
  return toml::table{{"value", value}};
}

bool takes_text(const Key& key) { return !key.words.empty() || type_text(key) == "text"; }

std::string shortened(std::string text) {
  constexpr std::size_t longest = 60;
  if (text.size() <= longest) return text;
  std::size_t end = longest;
  while (end > 0 && (static_cast<unsigned char>(text[end]) & 0xC0) == 0x80) --end;  // within UTF-8
  return text.substr(0, end) + "...";
}

}  // namespace

void refuse(const std::string& place, const std::string& message) {
  throw InputError(fmt::format("{}: {}", place, message));
}

std::string value_text(const toml::node& node) {
  if (node.is_table()) return "a table";
  if (node.is_array()) return "a list";
  if (const auto* number = node.as_floating_point()) return fmt::format("{}", number->get());
  std::ostringstream out;
  node.visit([&](const auto& value) { out << value; });
  const std::string text = node.is_string()
                               ? fmt::format("\"{}\"", shortened(*node.value<std::string>()))
                               : shortened(out.str());
  return text;
}

std::string nearest(std::string_view word, const std::vector<std::string>& candidates) {
  const std::size_t allowed = std::max<std::size_t>(1, word.size() / 3);
  std::string best;
  std::size_t fewest = allowed + 1;
  for (const std::string& candidate : candidates) {
    const std::size_t n = edits(word, candidate);
    if (n < fewest) best = candidate, fewest = n;
  }
  return best.empty() ? "" : fmt::format(" (did you mean '{}'?)", best);
}

const Key& key_named(const std::string& path, const std::string& place) {
  if (const Key* key = find_key(path)) return *key;
  const auto dot = path.rfind('.');
  const std::string table = dot == std::string::npos ? "" : path.substr(0, dot);
  if (known_tables().count(table) == 0) refuse_unknown(place, "", table, true);
  refuse_unknown(place, table, dot == std::string::npos ? path : path.substr(dot + 1), false);
}

void check_item_keys(const Key& list, const toml::table& item, const std::string& path,
                     const Entries& entries, const std::string& list_place) {
  std::vector<std::string> names;
  for (const Key* key : item_keys(list)) names.push_back(key->name());
  for (const auto& [name, value] : item) {
    if (std::find(names.begin(), names.end(), name.str()) != names.end()) continue;
    std::string hint = nearest(name.str(), names);
    if (hint.empty()) hint = fmt::format("; its keys are {}", fmt::join(names, ", "));
    const bool in_file = list_place.starts_with(entries.file());
    refuse(in_file ? entries.place_in_file(name.source()) : list_place,
           fmt::format("unknown key {}.{}{}", path, name.str(), hint));
  }
}

Entries::Entries(const std::string& text, const std::string& name) : name_(name) {
  if (text.find_first_not_of(" \t\r\n") == std::string::npos)
    refuse(name,
           "is empty; a case needs at least [shell], [grid], [walls.inner], [walls.outer] and "
           "[numbers] or [body]");
  parsed_.push_back(parse(text, name));
  collect(parsed_.back(), "");
}

void Entries::collect(const toml::table& table, const std::string& path) {
  for (const auto& [name, value] : table) {
    const std::string full = join(path, name.str());
    const std::string place = place_in_file(name.source());
    const bool known_table = known_tables().count(full) > 0;
    if (find_key(full)) {
      entries_[full] = {&value, place};
    } else if (!known_table) {
      refuse_unknown(place, path, name.str(), value.is_table());
    } else if (!value.is_table()) {
      refuse_as_table(place, full, value_text(value));
    } else {
      note_table(full, place);
      collect(*value.as_table(), full);
    }
  }
}

void Entries::note_table(const std::string& path, const std::string& place) {
  tables_.try_emplace(path, place);
}

void Entries::note_tables(const std::string& innermost, const std::string& place) {
  for (std::string table = innermost;;) {
    note_table(table, place);
    const auto dot = table.rfind('.');
    if (dot == std::string::npos) return;
    table.resize(dot);
  }
}

void Entries::set(const std::string& setting, const std::string& place) {
  const auto equals = setting.find('=');
  if (equals == 0 || equals == std::string::npos || equals + 1 == setting.size())
    refuse(place, fmt::format("\"{}\": must be table.key=value, such as grid.radial=64",
                              shortened(setting)));
  const std::string path = setting.substr(0, equals), value = setting.substr(equals + 1);
  if (!find_key(path) && known_tables().count(path) > 0) refuse_as_table(place, path, value);
  const Key& key = key_named(path, place);
  parsed_.push_back(parse_setting(value, takes_text(key)));
  entries_[path] = {parsed_.back().get("value"), place};
  note_tables(key.table(), place);
}

const Entry* Entries::find(const std::string& path) const {
  const auto found = entries_.find(path);
  return found == entries_.end() ? nullptr : &found->second;
}

std::string Entries::place(const std::string& path) const {
  if (const auto noted = places_.find(path); noted != places_.end()) return noted->second;
  if (const Entry* entry = find(path)) return entry->place;
  if (const auto found = tables_.find(path); found != tables_.end()) return found->second;
  for (std::string table = path; !table.empty();) {
    const auto dot = table.find_last_of(".[");
    table = dot == std::string::npos ? "" : table.substr(0, dot);
    if (const Entry* entry = find(table)) return entry->place;
    if (const auto found = tables_.find(table); found != tables_.end()) return found->second;
  }
  return name_;
}

std::string Entries::place_in_file(const toml::source_region& source) const {
  return fmt::format("{}:{}:{}", name_, source.begin.line, source.begin.column);
}

}  // namespace lidwright::case_text
