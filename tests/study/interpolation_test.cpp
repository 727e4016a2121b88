#include "study/interpolation.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <vector>

#include "tests/support/observed_order.hpp"

namespace lidwright {
namespace {

const std::vector<double> uneven{0.1, 0.25, 0.5, 0.6, 0.85, 1.1, 1.2};

std::vector<double> values(double (*f)(double)) {
  std::vector<double> y;
  for (const double x : uneven) y.push_back(f(x));
  return y;
}

TEST(Interpolation, IsExactForAPolynomialOfFourthDegree) {
  const auto f = [](double x) { return 2 - x + 3 * x * x - x * x * x * x; };
  for (const double at : {0.1, 0.3, 0.6, 0.999, 1.2})
    EXPECT_NEAR(interpolated(uneven, values(f), at), f(at), 1e-13);
}

TEST(Interpolation, TakesAllPointsWhenThereAreFew) {
  EXPECT_NEAR(interpolated(std::vector<double>{0, 2}, std::vector<double>{1, 5}, 0.5), 2, 1e-14);
}

TEST(Interpolation, ContinuesAnEvenLineToItsSide) {
  const auto f = [](double x) { return 7 - 2 * x * x + 0.5 * x * x * x * x; };
  EXPECT_NEAR(at_side(uneven, values(f)), 7, 1e-13);
}

TEST(Interpolation, FindsWhereALineTurns) {
  const auto f = [](double x) { return 3 - std::pow(x - 0.58, 2) + std::pow(x - 0.58, 4); };
  const TurningPoint t = turning_point(uneven, values(f), 3);
  EXPECT_NEAR(t.place, 0.58, 1e-7);
  EXPECT_NEAR(t.value, 3, 1e-13);
}

TEST(Interpolation, FindsLowestAndHighestPoints) {
  const auto f = [](double x) { return std::sin(6 * x); };
  EXPECT_NEAR(extremum(uneven, values(f), -1).place, 1.5 * M_PI / 6, 0.01);
  const TurningPoint end = extremum(std::vector<double>{0, 1, 2}, std::vector<double>{1, 2, 4}, 1);
  EXPECT_EQ(end.place, 2);
  EXPECT_EQ(end.value, 4);
}

}  // namespace
}  // namespace lidwright
