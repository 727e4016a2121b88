#include "io/number_table.hpp"

#include <fmt/format.h>
#include <cmath>

#include <algorithm>
#include <charconv>
#include <limits>

#include "io/case_file.hpp"

namespace lidwright {
namespace {

std::vector<std::string> parts_of(std::string_view line) {
  std::vector<std::string> parts(1);
  for (const char c : line)
    if (c == ',')
      parts.emplace_back();
    else
      parts.back() += c;
  return parts;
}

/// std::from_chars reads "nan" and "inf" too.
bool read_row(std::string_view line, std::vector<double>& row) {
  const char *at = line.data(), *const end = at + line.size();
  for (double& number : row) {
    const auto [next, error] = std::from_chars(at, end, number);
    const bool last = &number == &row.back();
    if (error != std::errc() || (last ? next != end : next == end || *next != ',')) return false;
    at = next + 1;
  }
  return true;
}

/// "# name [unit]: meaning"
void note_unit(std::string_view line, NumberTable& t, std::vector<std::string>& described) {
  const std::size_t open = line.find(" ["), close = line.find("]: ");
  if (open == std::string_view::npos || close == std::string_view::npos || close < open) return;
  described.emplace_back(line.substr(2, open - 2));
  t.units.emplace_back(line.substr(open + 2, close - open - 2));
}

void match_units(NumberTable& t, const std::vector<std::string>& described) {
  std::vector<std::string> units;
  for (const std::string& name : t.names) {
    const auto found = std::find(described.begin(), described.end(), name);
    units.push_back(found == described.end()
                        ? "1"
                        : t.units[static_cast<std::size_t>(found - described.begin())]);
  }
  t.units = units;
}

}  // namespace

const std::vector<double>* NumberTable::find(const std::string& name) const {
  const auto found = std::find(names.begin(), names.end(), name);
  if (found == names.end()) return nullptr;
  return &columns[static_cast<std::size_t>(found - names.begin())];
}

std::size_t nearest_row(const std::vector<double>& values, double number) {
  const auto nearer = [&](double p, double q) {
    return std::abs(p - number) < std::abs(q - number);
  };
  return static_cast<std::size_t>(std::min_element(values.begin(), values.end(), nearer) -
                                  values.begin());
}

NumberTable parse_numbers(std::string_view text, const std::string& path) {
  NumberTable t;
  std::vector<std::string> described;
  std::vector<double> row;
  long number = 0;
  for (std::size_t at = 0, end; (end = text.find('\n', at)) != std::string_view::npos;
       at = end + 1) {
    const std::string_view line = text.substr(at, end - at);
    ++number;
    if (line.starts_with('#')) {
      note_unit(line, t, described);
    } else if (t.names.empty()) {
      t.names = parts_of(line);
      t.columns.resize(t.names.size());
      row.assign(t.names.size(), std::numeric_limits<double>::quiet_NaN());
    } else {
      if (!read_row(line, row))
        throw InputError(
            fmt::format("{}:{}: not a row of {} numbers; the file was changed or damaged", path,
                        number, row.size()));
      for (std::size_t k = 0; k < row.size(); ++k) t.columns[k].push_back(row[k]);
    }
  }
  match_units(t, described);
  return t;
}

std::vector<std::string> names_in(const std::string& list) {
  std::vector<std::string> names = parts_of(list);
  for (std::string& name : names) {
    const std::size_t first = name.find_first_not_of(' ');
    name = first == std::string::npos ? ""
                                      : name.substr(first, name.find_last_not_of(' ') - first + 1);
  }
  return names;
}

}  // namespace lidwright
