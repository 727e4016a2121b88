#include "study/stability_verdict.hpp"

#include <gtest/gtest.h>

namespace lidwright {
namespace {

TEST(StabilityVerdict, TurningThePatternDoesNotCount) {
  const StabilityVerdict v = judge_stability({{2e-6, 0}, {-1, 0}, {-4, 3}}, Sides::Periodic, true);
  EXPECT_EQ(v.turning, 0);
  EXPECT_EQ(v.leading, 1);
  EXPECT_FALSE(v.unstable());
}

TEST(StabilityVerdict, NearestToZeroIsTheTurning) {
  const StabilityVerdict v =
      judge_stability({{5, 0}, {8e-3, 0}, {-1e-6, 0}, {-1, 0}}, Sides::Periodic, true);
  EXPECT_EQ(v.turning, 2);
  EXPECT_EQ(v.leading, 0);
  EXPECT_TRUE(v.unstable());
}

TEST(StabilityVerdict, NothingTurnsBetweenSidesOrAtRest) {
  EXPECT_EQ(judge_stability({{1e-6, 0}, {-1, 0}}, Sides::Reflecting, true).turning, -1);
  const StabilityVerdict at_rest = judge_stability({{1e-6, 0}, {-1, 0}}, Sides::Periodic, false);
  EXPECT_EQ(at_rest.turning, -1);
  EXPECT_TRUE(at_rest.unstable());
}

TEST(StabilityVerdict, NoRates) {
  const StabilityVerdict v = judge_stability({}, Sides::Periodic, true);
  EXPECT_EQ(v.leading, -1);
  EXPECT_FALSE(v.unstable());
}

}  // namespace
}  // namespace lidwright
