#pragma once

#include <string>
#include <utility>
#include <vector>

/// The records that a run leaves as TOML (provenance.toml, summary.toml), as names and texts.
namespace lidwright {

struct TomlSection {
  std::string name;  ///< of the table; empty: what stands before the first
  std::vector<std::pair<std::string, std::string>> entries;  ///< "library.vtk", "9.1.0"

  /// Empty when it is not there.
  std::string operator[](const std::string& key) const;
  /// nan when it is not there or no number.
  double number(const std::string& key) const;
};

/// In the order of the names; a table in an array is a section each. Throws InputError naming
/// `path` when the text is no TOML.
std::vector<TomlSection> toml_sections(const std::string& text, const std::string& path);

}  // namespace lidwright
