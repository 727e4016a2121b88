#pragma once

#include <cstddef>
#include <string>
#include <string_view>
#include <vector>

/// Tables of numbers as this program writes them (io/csv.hpp), read back.
namespace lidwright {

/// The columns by name, all of one length.
struct NumberTable {
  std::vector<std::string> names, units;     ///< "1" where the head says none
  std::vector<std::vector<double>> columns;  ///< may hold nan and inf

  std::size_t rows() const { return columns.empty() ? 0 : columns.front().size(); }
  /// Nothing is returned for a column that is not there.
  const std::vector<double>* find(const std::string& name) const;
};

/// Row whose value is nearest to a number, the first of several; of one or more.
std::size_t nearest_row(const std::vector<double>& values, double number);

/// Of the file's text. A last line without its end, as a killed run leaves it, is dropped. Throws
/// InputError naming `path` when a row is damaged.
NumberTable parse_numbers(std::string_view text, const std::string& path);

/// The names in a list with commas between, without the blanks about them.
std::vector<std::string> names_in(const std::string& list);

}  // namespace lidwright
