#include "study/mean_error.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <numbers>
#include <vector>

#include "study/spectrum.hpp"
#include "study/students_t.hpp"

namespace lidwright {
namespace {

using std::numbers::pi;

/// Of the lowest ordinates, each over what is left of the spectrum at zero, 1/(1 + (omega tau)^2).
double sum_of_lowest(std::span<const double> x, std::size_t ordinates, double correlation_time) {
  const std::vector<double> power = periodogram(x);
  double sum = 0;
  for (std::size_t k = 1; k <= ordinates; ++k) {
    const double omega = 2 * pi * static_cast<double>(k) / static_cast<double>(x.size());
    sum += power[k] * (1 + omega * omega * correlation_time * correlation_time);
  }
  return sum;
}

std::vector<double> batch_means(std::span<const double> x) {
  std::vector<double> means(x.size() / values_a_batch);
  for (std::size_t k = 0; k < means.size(); ++k)
    means[k] = mean_of(x.subspan(k * values_a_batch, values_a_batch));
  return means;
}

}  // namespace

double MeanError::half_width() const {
  return standard_error > 0 ? t_quantile(0.05, freedom) * standard_error : 0;
}

MeanError mean_error(std::span<const double> x, std::size_t ordinates, double correlation_time) {
  const double m = static_cast<double>(ordinates);
  const double at_zero = sum_of_lowest(x, ordinates, correlation_time) / m;
  return {mean_of(x), std::sqrt(at_zero / static_cast<double>(x.size())), 2 * m};
}

double slope_chance(std::span<const double> x, std::size_t ordinates, double correlation_time) {
  const double n = static_cast<double>(x.size());
  // Of white noise, the line takes 6/(pi k)^2 of the power of the k-th sine, none of the cosine's.
  double freedom = 2 * static_cast<double>(ordinates);
  for (std::size_t k = 1; k <= ordinates; ++k)
    freedom -= 6 / (pi * pi * static_cast<double>(k) * static_cast<double>(k));
  const double at_zero = 2 * sum_of_lowest(without_line(x), ordinates, correlation_time) / freedom;
  const double standard_error = std::sqrt(12 * at_zero / (n * (n * n - 1)));
  const double slope = std::abs(line_slope(x));
  if (standard_error == 0) return slope > 0 ? 0 : 1;
  return t_two_sided(slope / standard_error, freedom);
}

std::size_t settled_from(std::span<const double> x, std::size_t least_left) {
  const std::vector<double> means = batch_means(x);
  const std::size_t count = means.size();
  double sum = 0, squares = 0, least = std::numeric_limits<double>::infinity();
  std::size_t best = 0;
  // From the end, so that the sums are at hand; about the last mean, against cancellation.
  for (std::size_t k = count; k-- > 0;) {
    const double v = means[k] - means.back(), n = static_cast<double>(count - k);
    sum += v;
    squares += v * v;
    const double marginal = std::max(squares - sum * sum / n, 0.0) / (n * n);
    if (count - k < least_left || marginal > least) continue;
    least = marginal;
    best = k;
  }
  return best;
}

}  // namespace lidwright
