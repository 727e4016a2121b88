#include "study/bootstrap.hpp"

#include <algorithm>
#include <cmath>

namespace lidwright {

std::vector<std::size_t> BlockBootstrap::draw() {
  std::vector<std::size_t> rows;
  rows.reserve(rows_);
  while (rows.size() < rows_) {
    const auto first = static_cast<std::size_t>(random_() % rows_);
    for (std::size_t k = 0; k < block_ && rows.size() < rows_; ++k)
      rows.push_back((first + k) % rows_);
  }
  return rows;
}

std::size_t block_length(std::size_t rows, double correlation_time, double period) {
  double length = 5 * correlation_time;
  if (std::isfinite(period)) length = period * std::ceil(std::max(length / period, 1.0));
  const double most = std::max(1.0, static_cast<double>(rows) / 5);
  return static_cast<std::size_t>(std::clamp(std::round(length), 1.0, most));
}

}  // namespace lidwright
