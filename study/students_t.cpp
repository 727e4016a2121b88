#include "study/students_t.hpp"

#include <algorithm>
#include <cmath>

namespace lidwright {
namespace {

constexpr double tiny = 1e-300;
double away_from_zero(double x) { return std::abs(x) < tiny ? tiny : x; }

/// The continued fraction of the incomplete beta function by Lentz's method (NIST Digital Library
/// of Mathematical Functions, 8.17.22; from memory). Converges fast for x < (a + 1)/(a + b + 2).
double beta_fraction(double a, double b, double x) {
  double c = 1, d = 1 / away_from_zero(1 - (a + b) * x / (a + 1)), value = d;
  for (int m = 1; m <= 500; ++m) {
    const double even = m * (b - m) * x / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 / away_from_zero(1 + even * d);
    c = away_from_zero(1 + even / c);
    value *= c * d;
    const double odd = -(a + m) * (a + b + m) * x / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 / away_from_zero(1 + odd * d);
    c = away_from_zero(1 + odd / c);
    value *= c * d;
    if (std::abs(c * d - 1) < 1e-15) break;
  }
  return value;
}

/// Regularised; 0 <= x <= 1.
double incomplete_beta(double a, double b, double x) {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  const double front = std::exp(std::lgamma(a + b) - std::lgamma(a) - std::lgamma(b) +
                                a * std::log(x) + b * std::log1p(-x));
  if (x < (a + 1) / (a + b + 2)) return front * beta_fraction(a, b, x) / a;
  return 1 - front * beta_fraction(b, a, 1 - x) / b;
}

}  // namespace

double t_two_sided(double t, double freedom) {
  return incomplete_beta(freedom / 2, 0.5, freedom / (freedom + t * t));
}

double t_quantile(double outside, double freedom) {
  double low = 0, high = 1;
  while (t_two_sided(high, freedom) > outside) high *= 2;
  for (int k = 0; k < 60; ++k) {
    const double middle = (low + high) / 2;
    (t_two_sided(middle, freedom) > outside ? low : high) = middle;
  }
  return (low + high) / 2;
}

}  // namespace lidwright
