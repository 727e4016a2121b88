#include "tests/support/reference_table.hpp"

#include <fstream>
#include <sstream>
#include <stdexcept>

namespace lidwright {
namespace {

std::vector<std::string> split(const std::string& line) {
  std::vector<std::string> cells;
  std::istringstream in(line);
  for (std::string cell; std::getline(in, cell, ',');) cells.push_back(cell);
  return cells;
}

}  // namespace

std::vector<ReferenceRow> reference_table(const std::string& file) {
  std::ifstream in(std::string(LIDWRIGHT_SOURCE_DIR) + "/tests/reference/" + file);
  std::vector<std::string> names;
  std::vector<ReferenceRow> rows;
  for (std::string line; std::getline(in, line);) {
    if (line.empty() || line.front() == '#') continue;
    const std::vector<std::string> cells = split(line);
    if (names.empty()) {
      names = cells;
      continue;
    }
    std::map<std::string, std::string> named;
    for (std::size_t n = 0; n < names.size(); ++n)
      named[names[n]] = n < cells.size() ? cells[n] : "";
    rows.emplace_back(std::move(named));
  }
  if (rows.empty()) throw std::runtime_error("no reference values in " + file);
  return rows;
}

}  // namespace lidwright
