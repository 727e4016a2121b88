#pragma once

#include <cstddef>
#include <string>
#include <vector>

/// history.csv read back, of this version or another one's.
namespace lidwright {

/// The columns by name, all of one length; times rise.
struct HistoryTable {
  std::vector<std::string> names, units;     ///< "1" where the head says none
  std::vector<std::vector<double>> columns;  ///< may hold nan and inf

  std::size_t rows() const { return columns.empty() ? 0 : columns.front().size(); }
  /// Nothing is returned for a column that is not there.
  const std::vector<double>* find(const std::string& name) const;
};

/// Of the file's text. A last line without its end, as a killed run leaves it, is dropped. Throws
/// InputError naming `path` when it is no history or a row is damaged.
HistoryTable parse_history(const std::string& text, const std::string& path);

/// The column, or an InputError that names it and `path`.
const std::vector<double>& column_of(const HistoryTable&, const std::string& name,
                                     const std::string& path);

/// The names in a list with commas between, without the blanks about them.
std::vector<std::string> names_in(const std::string& list);

/// Numbers that say how the computation went, not what the mantle does: step, time, wall time.
bool is_bookkeeping(const std::string& column);

}  // namespace lidwright
