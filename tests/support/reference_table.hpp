#pragma once

#include <map>
#include <string>
#include <vector>

/// The tables in tests/reference: `#` lines say what they are, then a line of column names.
namespace lidwright {

class ReferenceRow {
 public:
  explicit ReferenceRow(std::map<std::string, std::string> cells) : cells_(std::move(cells)) {}
  /// Throws std::out_of_range when there is no such column.
  const std::string& text(const std::string& column) const { return cells_.at(column); }
  double number(const std::string& column) const { return std::stod(text(column)); }

 private:
  std::map<std::string, std::string> cells_;
};

/// Throws std::runtime_error when the file cannot be read or is empty.
std::vector<ReferenceRow> reference_table(const std::string& file);

}  // namespace lidwright
