#include "study/series.hpp"

#include <algorithm>
#include <cmath>

namespace lidwright {
namespace {

/// The line through rows k and k+1 at time t, above the first row's value, so that a constant's
/// mean is exact.
double on_line(const Series& s, std::size_t k, double t) {
  const double share = (t - s.time[k]) / (s.time[k + 1] - s.time[k]);
  return s.value[k] - s.value.front() + share * (s.value[k + 1] - s.value[k]);
}

/// Goes through a record once, from left to right.
class Sweep {
 public:
  Sweep(const Series& s, double from) : s_(s) {
    const auto later = std::upper_bound(s.time.begin(), s.time.end(), from);
    const auto row = later - s.time.begin() - 1;
    row_ = static_cast<std::size_t>(std::max<std::ptrdiff_t>(row, 0));
  }

  /// Integral over [from, to], which begins where the one before ended.
  double integral(double from, double to) {
    double sum = 0;
    while (from < to && row_ + 1 < s_.size()) {
      const double end = std::min(to, s_.time[row_ + 1]);
      sum += (end - from) * (on_line(s_, row_, from) + on_line(s_, row_, end)) / 2;
      from = end;
      if (end < to) ++row_;
    }
    return sum;
  }

 private:
  const Series& s_;
  std::size_t row_ = 0;
};

}  // namespace

Series defined_rows(std::span<const double> time, std::span<const double> value) {
  Series s;
  for (std::size_t k = 0; k < time.size(); ++k) {
    if (!std::isfinite(time[k]) || !std::isfinite(value[k])) continue;
    if (!s.time.empty() && time[k] <= s.time.back()) continue;
    s.time.push_back(time[k]);
    s.value.push_back(value[k]);
  }
  return s;
}

std::vector<double> interval_means(const Series& s, double from, double to, std::size_t count) {
  const double width = (to - from) / static_cast<double>(count);
  Sweep sweep(s, from);
  std::vector<double> means(count);
  for (std::size_t k = 0; k < count; ++k) {
    const double begin = from + static_cast<double>(k) * width;
    const double end = k + 1 == count ? to : begin + width;
    means[k] = s.value.front() + sweep.integral(begin, end) / (end - begin);
  }
  return means;
}

Series after(const Series& s, double from) {
  const auto first = std::lower_bound(s.time.begin(), s.time.end(), from) - s.time.begin();
  return {{s.time.begin() + first, s.time.end()}, {s.value.begin() + first, s.value.end()}};
}

}  // namespace lidwright
