#include "io/csv.hpp"

#include <fmt/format.h>

#include <iterator>

namespace lidwright {

std::string table_head(std::string_view title, std::span<const Column> columns) {
  std::string text = fmt::format("# {}\n# {}\n", title, units_note), names;
  for (const Column& c : columns) {
    fmt::format_to(std::back_inserter(text), "# {} [{}]: {}\n", c.name, c.unit, c.meaning);
    fmt::format_to(std::back_inserter(names), "{}{}", names.empty() ? "" : ",", c.name);
  }
  return text + names + "\n";
}

std::string table_row(std::span<const double> numbers) {
  return fmt::format("{}\n", fmt::join(numbers, ","));
}

std::string table(std::string_view title, std::span<const Column> columns,
                  std::span<const std::vector<double>> numbers) {
  std::string text = table_head(title, columns);
  const std::size_t rows = numbers.empty() ? 0 : numbers.front().size();
  std::vector<double> row(numbers.size());
  for (std::size_t k = 0; k < rows; ++k) {
    for (std::size_t c = 0; c < numbers.size(); ++c) row[c] = numbers[c].at(k);
    text += table_row(row);
  }
  return text;
}

}  // namespace lidwright
