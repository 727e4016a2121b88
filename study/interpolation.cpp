#include "study/interpolation.hpp"

#include <algorithm>
#include <cassert>
#include <cmath>
#include <vector>

namespace lidwright {
namespace {

constexpr std::size_t most_points = 5;

/// Lagrange's form.
double polynomial(std::span<const double> x, std::span<const double> y, double at) {
  double sum = 0;
  for (std::size_t k = 0; k < x.size(); ++k) {
    double term = y[k];
    for (std::size_t n = 0; n < x.size(); ++n)
      if (n != k) term *= (at - x[n]) / (x[k] - x[n]);
    sum += term;
  }
  return sum;
}

/// Number of the first of the points nearest to `at`.
std::size_t first_near(std::span<const double> x, double at) {
  const std::size_t count = std::min(most_points, x.size());
  std::size_t first = 0;
  while (first + count < x.size() && at - x[first] > x[first + count] - at) ++first;
  return first;
}

/// Highest point of sign * polynomial in (low, high), which rises and then falls there.
double place_of_top(std::span<const double> x, std::span<const double> y, int sign, double low,
                    double high) {
  for (int n = 0; n < 60; ++n) {
    const double a = low + (high - low) / 3, b = high - (high - low) / 3;
    (sign * polynomial(x, y, a) < sign * polynomial(x, y, b) ? low : high) =
        sign * polynomial(x, y, a) < sign * polynomial(x, y, b) ? a : b;
  }
  return (low + high) / 2;
}

}  // namespace

double interpolated(std::span<const double> x, std::span<const double> y, double at) {
  assert(!x.empty() && x.size() == y.size());
  const std::size_t first = first_near(x, at), count = std::min(most_points, x.size());
  return polynomial(x.subspan(first, count), y.subspan(first, count), at);
}

double at_side(std::span<const double> distance, std::span<const double> value) {
  const std::size_t count = std::min<std::size_t>(3, distance.size());
  std::vector<double> squared;
  for (std::size_t k = 0; k < count; ++k) squared.push_back(distance[k] * distance[k]);
  return polynomial(squared, value.first(count), 0);
}

TurningPoint turning_point(std::span<const double> x, std::span<const double> y, std::size_t k) {
  assert(k > 0 && k + 1 < x.size());
  const std::size_t first = first_near(x, x[k]), count = std::min(most_points, x.size());
  const auto near_x = x.subspan(first, count), near_y = y.subspan(first, count);
  const int sign = y[k] > y[k - 1] ? 1 : -1;
  const double place = place_of_top(near_x, near_y, sign, x[k - 1], x[k + 1]);
  return {place, polynomial(near_x, near_y, place)};
}

TurningPoint extremum(std::span<const double> x, std::span<const double> y, int sign) {
  const auto lower = [sign](double a, double b) { return sign * a < sign * b; };
  const auto k = static_cast<std::size_t>(std::max_element(y.begin(), y.end(), lower) - y.begin());
  if (k == 0 || k + 1 == x.size()) return {x[k], y[k]};
  return turning_point(x, y, k);
}

}  // namespace lidwright
