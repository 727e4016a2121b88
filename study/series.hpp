#pragma once

#include <cstddef>
#include <span>
#include <vector>

/// Records over time with steps that differ, as a march leaves them.
namespace lidwright {

/// A value at times that rise strictly; between them it is a straight line.
struct Series {
  std::vector<double> time, value;
  std::size_t size() const { return time.size(); }
  double length() const { return time.back() - time.front(); }
  double middle() const { return (time.front() + time.back()) / 2; }
};

/// The rows where time and value are finite and the time is later than that of the row before.
Series defined_rows(std::span<const double> time, std::span<const double> value);

/// Means over `count` >= 1 equal intervals of [from, to], which lies within the record: integrals
/// of the straight lines, so that the mean of these means is the mean over the time.
std::vector<double> interval_means(const Series&, double from, double to, std::size_t count);

/// The part at or after `from`.
Series after(const Series&, double from);

}  // namespace lidwright
