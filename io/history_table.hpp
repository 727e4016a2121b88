#pragma once

#include <string>
#include <vector>

#include "io/number_table.hpp"

/// history.csv read back, of this version or another one's.
namespace lidwright {

/// Times rise.
using HistoryTable = NumberTable;

/// Of the file's text. A last line without its end, as a killed run leaves it, is dropped. Throws
/// InputError naming `path` when it is no history or a row is damaged.
HistoryTable parse_history(const std::string& text, const std::string& path);

/// The column, or an InputError that names it and `path`.
const std::vector<double>& column_of(const HistoryTable&, const std::string& name,
                                     const std::string& path);

/// Numbers that say how the computation went, not what the mantle does: step, time, wall time.
bool is_bookkeeping(const std::string& column);

}  // namespace lidwright
