#include "io/history_table.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <string_view>

#include "io/case_file.hpp"

namespace lidwright {
namespace {

constexpr std::string_view mark = "# lidwright history\n";

}  // namespace

HistoryTable parse_history(const std::string& text, const std::string& path) {
  if (!text.starts_with(mark))
    throw InputError(fmt::format(
        "{}: is not the history of a run of this program; name the folder of a march", path));
  HistoryTable t = parse_numbers(text, path);
  column_of(t, "time", path);
  return t;
}

const std::vector<double>& column_of(const HistoryTable& t, const std::string& name,
                                     const std::string& path) {
  if (const auto* column = t.find(name)) return *column;
  throw InputError(fmt::format(
      "{}: has no column '{}'; march the case with this version of the program", path, name));
}

bool is_bookkeeping(const std::string& column) {
  constexpr std::array<std::string_view, 6> names{"step",         "time",           "time_step",
                                                  "applications", "factorisations", "wall_time"};
  return std::find(names.begin(), names.end(), column) != names.end();
}

}  // namespace lidwright
