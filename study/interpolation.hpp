#pragma once

#include <cstddef>
#include <span>

/// Values between the points of a smooth line, by the polynomial through the nearest points: of so
/// high an order that what is left of a second-order scheme's error stays second order, and can be
/// extrapolated.
namespace lidwright {

/// Through the five points nearest to `at` (all when fewer); `x` ascending, as long as `y`.
double interpolated(std::span<const double> x, std::span<const double> y, double at);

/// At a reflecting side, about which the line is even: a polynomial in the squared distance through
/// the three nearest points (two when there are no more). `distance` from the side, > 0, ascending.
double at_side(std::span<const double> distance, std::span<const double> value);

struct TurningPoint {
  double place = 0, value = 0;
};
/// Where the polynomial through the five points about point k turns, k an extremum among its
/// neighbours.
TurningPoint turning_point(std::span<const double> x, std::span<const double> y, std::size_t k);

/// The first of the lowest (sign -1) or highest (+1) points of the line, refined as a turning
/// point; an end of the line as it is.
TurningPoint extremum(std::span<const double> x, std::span<const double> y, int sign);

}  // namespace lidwright
