#include "study/cycle.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>
#include <vector>

/// Histories whose turning points are known.
namespace lidwright {
namespace {

using std::numbers::pi;

struct History {
  std::vector<double> time, value;
};

/// 5 + cos(2 pi t) + share cos(pi t): two beats a cycle of 2, maxima 6 + share and 6 - share.
History two_beats(double share, int cycles, double drift = 0) {
  History h;
  for (int n = 0; n <= 2000 * cycles; ++n) {
    const double t = n / 1000.0 + 1e-4 * std::sin(n);  // steps differ
    h.time.push_back(t);
    h.value.push_back(5 + std::cos(2 * pi * t) + share * std::cos(pi * t) + drift * t);
  }
  return h;
}

TEST(Beats, FindsExtremaAndPeriodOfTwoBeats) {
  const History h = two_beats(0.2, 8);
  const Beats b = beats(h.time, h.value, 5);
  EXPECT_EQ(b.cycles, 5);
  EXPECT_NEAR(b.maximum_1, 6.2, 1e-6);
  EXPECT_NEAR(b.maximum_2, 5.8, 1e-6);
  // At the minima 2 sin(2 pi t) + share sin(pi t) = 0: cos(pi t) = -share/4.
  EXPECT_NEAR(b.minimum_1, 4 - 0.04 / 8, 1e-6);
  EXPECT_NEAR(b.minimum_2, b.minimum_1, 1e-6);
  EXPECT_NEAR(b.period, 2, 1e-6);
  EXPECT_LT(b.wander, 1e-6);
}

TEST(Beats, StartsACycleAtTheLargerMaximum) {
  const History h = two_beats(-0.2, 8);
  const Beats b = beats(h.time, h.value, 5);
  EXPECT_NEAR(b.maximum_1, 6.2, 1e-6);
  EXPECT_NEAR(b.maximum_2, 5.8, 1e-6);
}

TEST(Beats, SaysHowFarTheExtremaWander) {
  const History h = two_beats(0.2, 8, 0.01);
  EXPECT_NEAR(beats(h.time, h.value, 5).wander, 4 * 2 * 0.01, 1e-3);
}

TEST(Beats, FindsNoneWhereThereAreNone) {
  History h;
  for (int n = 0; n < 100; ++n) {
    h.time.push_back(n);
    h.value.push_back(n * n);
  }
  EXPECT_EQ(beats(h.time, h.value, 5).cycles, 0);
  EXPECT_EQ(beats({}, {}, 5).cycles, 0);
}

}  // namespace
}  // namespace lidwright
