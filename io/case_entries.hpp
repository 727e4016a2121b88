#pragma once

#include <toml++/toml.h>

#include <list>
#include <map>
#include <string>
#include <string_view>
#include <vector>

#include "io/case_keys.hpp"

/// The keys that a file and the command line give, each with its place. Knows which keys exist, not
/// what they mean. Everything here throws InputError.
namespace lidwright::case_text {

struct Entry {
  const toml::node* value;
  std::string place;  ///< "case.toml:12:3", "--set 2" or "--along"
};

class Entries {
 public:
  /// Parses a file's text; checks that every table and key is known.
  Entries(const std::string& text, const std::string& name);
  Entries(const Entries&) = delete;
  Entries& operator=(const Entries&) = delete;

  /// A "table.key=value" of the command line, which stands at `place` ("--set 2"); replaces what
  /// the file says.
  void set(const std::string& setting, const std::string& place);

  const Entry* find(const std::string& path) const;
  bool has_table(const std::string& table) const { return tables_.count(table) > 0; }
  /// Of the first of: the key or list item ("viscosity.layers[2].below", from 1), its table, the
  /// file.
  std::string place(const std::string& path) const;
  const std::string& file() const { return name_; }
  std::string place_in_file(const toml::source_region&) const;
  void note_place(const std::string& path, const std::string& place) { places_[path] = place; }

 private:
  void collect(const toml::table&, const std::string& path);
  void note_table(const std::string& path, const std::string& place);
  /// A table and those around it.
  void note_tables(const std::string& innermost, const std::string& place);

  std::string name_;
  std::list<toml::table> parsed_;  ///< owns what the entries point to
  std::map<std::string, Entry> entries_;
  std::map<std::string, std::string> tables_, places_;
};

/// The key that a command line names at `place`; lists' items cannot be named.
const Key& key_named(const std::string& path, const std::string& place);

[[noreturn]] void refuse(const std::string& place, const std::string& message);
/// The value as in TOML, shortened when long.
std::string value_text(const toml::node&);
/// " (did you mean 'x'?)" with the candidate that is spelt most alike, or "".
std::string nearest(std::string_view word, const std::vector<std::string>& candidates);
/// Refuses a key that the list's items do not have.
void check_item_keys(const Key& list, const toml::table& item, const std::string& path,
                     const Entries&, const std::string& list_place);

}  // namespace lidwright::case_text
