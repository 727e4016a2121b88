#include "study/error_bars.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <functional>
#include <random>
#include <vector>

/// Sequences whose limit is known.
namespace lidwright {
namespace {

constexpr double limit = 4.884409;

/// limit + error(h) on h = 1/16, 1/32, 1/64.
std::vector<double> sequence(const std::function<double(double)>& error) {
  return {limit + error(1.0 / 16), limit + error(1.0 / 32), limit + error(1.0 / 64)};
}

void expect_contains(const ErrorBar& bar) {
  EXPECT_LE(std::abs(bar.value - limit), bar.half_width * (1 + 1e-12));
}

TEST(ErrorBar, FindsTheLimitOfAPureOrder) {
  for (const double p : {1.6, 2.0, 2.4}) {
    const std::vector<double> f = sequence([&](double h) { return 3 * std::pow(h, p); });
    const ErrorBar bar = error_bar(f, 1e-12);
    EXPECT_EQ(bar.convergence, Convergence::Sound);
    EXPECT_NEAR(bar.order, p, 1e-9);
    EXPECT_NEAR(bar.value, limit, 1e-12);
    EXPECT_NEAR(bar.half_width, 1.25 * (f[2] - limit), 1e-12);
  }
}

TEST(ErrorBar, HoldsTheLimitOfMixedOrders) {
  for (const double share : {-50.0, -10.0, -1.0, 0.0, 1.0, 10.0, 50.0, 400.0})
    expect_contains(
        error_bar(sequence([&](double h) { return h * h * (1 + share * h * h); }), 1e-12));
}

/// h^2 and h^4 that cancel between the first two grids: they seem to stand still.
TEST(ErrorBar, IsNotTakenInByATurningPoint) {
  for (const double share : {-40.0, -51.2, -60.0, -100.0, -200.0, -250.0, -300.0}) {
    const ErrorBar bar =
        error_bar(sequence([&](double h) { return h * h * (1 + share * h * h); }), 1e-12);
    expect_contains(bar);
    EXPECT_GT(bar.half_width, 1e-6);
  }
}

TEST(ErrorBar, AssumesOrderOneWhereTheOrderIsLow) {
  const ErrorBar bar = error_bar(sequence([](double h) { return 0.1 * h; }), 1e-12);
  EXPECT_EQ(bar.convergence, Convergence::Slow);
  EXPECT_NEAR(bar.order, 1, 1e-9);
  EXPECT_NEAR(bar.value, limit, 1e-12);
  EXPECT_NEAR(bar.half_width, 3 * 0.1 / 64, 1e-12);
  expect_contains(error_bar(sequence([](double h) { return 0.1 * std::pow(h, 0.6); }), 1e-12));
}

TEST(ErrorBar, AssumesOrderTwoWhereTheOrderIsHigh) {
  const ErrorBar bar = error_bar(sequence([](double h) { return std::pow(h, 4); }), 1e-12);
  EXPECT_EQ(bar.convergence, Convergence::Steep);
  EXPECT_NEAR(bar.order, 4, 1e-6);
  expect_contains(bar);
}

TEST(ErrorBar, HoldsTheLimitOfAnOscillation) {
  for (const double ratio : {-0.9, -0.5, -0.25, -0.05}) {
    const std::vector<double> f = {limit + 1, limit + ratio, limit + ratio * ratio};
    const ErrorBar bar = error_bar(f, 1e-12);
    EXPECT_EQ(bar.convergence, Convergence::Oscillating);
    EXPECT_TRUE(std::isnan(bar.order));
    expect_contains(bar);
  }
}

TEST(ErrorBar, DoesNotExtrapolateWhatDiverges) {
  const ErrorBar bar = error_bar(std::vector<double>{1, 1.5, 3}, 1e-12);
  EXPECT_EQ(bar.convergence, Convergence::Diverging);
  EXPECT_EQ(bar.value, 3);
  EXPECT_EQ(bar.half_width, 4.5);
}

TEST(ErrorBar, IsTheFloorWhereNothingChanges) {
  const ErrorBar bar = error_bar(std::vector<double>{2, 2, 2}, 1e-8);
  EXPECT_EQ(bar.convergence, Convergence::Flat);
  EXPECT_EQ(bar.value, 2);
  EXPECT_EQ(bar.half_width, 1e-8);
  EXPECT_TRUE(std::isnan(bar.order));
}

/// Values that differ by the solver's tolerance only: no order is read into noise.
TEST(ErrorBar, HoldsTheLimitOfNoise) {
  std::mt19937 engine(1);
  std::uniform_real_distribution<double> noise(-1e-8, 1e-8);
  int held = 0;
  for (int n = 0; n < 1000; ++n) {
    const ErrorBar bar = error_bar(sequence([&](double) { return noise(engine); }), 1e-8);
    EXPECT_EQ(bar.convergence, Convergence::Flat);
    EXPECT_LE(bar.half_width, 6e-8);
    held += std::abs(bar.value - limit) <= bar.half_width;
  }
  EXPECT_EQ(held, 1000);
}

/// Second order with noise of a tenth of the finest step.
TEST(ErrorBar, HoldsTheLimitOfNoisyConvergence) {
  std::mt19937 engine(2);
  std::uniform_real_distribution<double> noise(-0.5, 0.5);
  int held = 0;
  for (int n = 0; n < 1000; ++n) {
    const ErrorBar bar =
        error_bar(sequence([&](double h) { return h * h + 1e-4 * noise(engine); }), 1e-12);
    held += std::abs(bar.value - limit) <= bar.half_width;
  }
  EXPECT_GE(held, 950);
}

TEST(ErrorBar, TriplesTheSafetyOnTwoGrids) {
  const ErrorBar bar = error_bar(std::vector<double>{limit + 4e-3, limit + 1e-3}, 1e-12);
  EXPECT_EQ(bar.convergence, Convergence::TwoGrids);
  EXPECT_NEAR(bar.value, limit, 1e-12);
  EXPECT_NEAR(bar.half_width, 3e-3, 1e-12);
}

TEST(ErrorBar, JudgesTheFinestThreeOfMoreGrids) {
  const ErrorBar bar =
      error_bar(std::vector<double>{9, limit + 16e-3, limit + 4e-3, limit + 1e-3}, 1e-12);
  EXPECT_NEAR(bar.order, 2, 1e-9);
  EXPECT_NEAR(bar.value, limit, 1e-12);
}

}  // namespace
}  // namespace lidwright
