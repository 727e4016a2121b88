#include "io/thinning.hpp"

#include <algorithm>
#include <cmath>
#include <numeric>

namespace lidwright {
namespace {

std::vector<std::size_t> all_rows(std::size_t count) {
  std::vector<std::size_t> rows(count);
  std::iota(rows.begin(), rows.end(), std::size_t{0});
  return rows;
}

/// What to keep of rows [from, to).
void keep_extremes(std::span<const double> values, std::size_t from, std::size_t to,
                   std::vector<std::size_t>& rows) {
  std::size_t least = to, largest = to, gap = to;
  for (std::size_t k = from; k < to; ++k) {
    if (!std::isfinite(values[k])) {
      gap = std::min(gap, k);
      continue;
    }
    if (least == to || values[k] < values[least]) least = k;
    if (largest == to || values[k] > values[largest]) largest = k;
  }
  for (const std::size_t k : {least, largest, gap})
    if (k < to) rows.push_back(k);
}

}  // namespace

std::vector<std::size_t> rows_to_draw(std::span<const double> values, std::size_t most) {
  const std::size_t count = values.size();
  if (count <= most) return all_rows(count);
  const std::size_t stretches = (most - 2) / 2;
  std::vector<std::size_t> rows{0, count - 1};
  for (std::size_t k = 0; k < stretches; ++k)
    keep_extremes(values, count * k / stretches, count * (k + 1) / stretches, rows);
  std::sort(rows.begin(), rows.end());
  rows.erase(std::unique(rows.begin(), rows.end()), rows.end());
  return rows;
}

std::vector<std::size_t> evenly_chosen(std::size_t count, std::size_t most) {
  if (count <= most) return all_rows(count);
  if (most == 1) return {count - 1};
  std::vector<std::size_t> chosen;
  for (std::size_t k = 0; k < most; ++k)
    chosen.push_back((k * (count - 1) + (most - 1) / 2) / (most - 1));
  return chosen;
}

}  // namespace lidwright
