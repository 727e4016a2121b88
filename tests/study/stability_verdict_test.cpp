#include "study/stability_verdict.hpp"

#include <gtest/gtest.h>

namespace lidwright {
namespace {

TEST(StabilityVerdict, TurningThePatternDoesNotCount) {
  const StabilityVerdict v = judge_stability({{2e-6, 0, true}, {-1, 0}, {-4, 3}});
  EXPECT_EQ(v.turning, 0);
  EXPECT_EQ(v.leading, 1);
  EXPECT_FALSE(v.unstable());
}

TEST(StabilityVerdict, WhereverItStands) {
  const StabilityVerdict v = judge_stability({{5, 0}, {8e-3, 0}, {-0.6, 0, true}, {-1, 0}});
  EXPECT_EQ(v.turning, 2);
  EXPECT_EQ(v.leading, 0);
  EXPECT_TRUE(v.unstable());
}

TEST(StabilityVerdict, NearZeroIsNotTurning) {
  const StabilityVerdict v = judge_stability({{1e-6, 0}, {-1, 0}});
  EXPECT_EQ(v.turning, -1);
  EXPECT_TRUE(v.unstable());
}

TEST(StabilityVerdict, NoRates) {
  const StabilityVerdict v = judge_stability({});
  EXPECT_EQ(v.leading, -1);
  EXPECT_FALSE(v.unstable());
}

}  // namespace
}  // namespace lidwright
