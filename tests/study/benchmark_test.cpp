#include "study/benchmark.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <vector>

namespace lidwright {
namespace {

Expectation published(double value, double spread, Mark mark = Mark::Published) {
  Expectation e;
  e.quantity = "nusselt_outer";
  e.value = value;
  e.spread = spread;
  e.mark = mark;
  return e;
}

ErrorBar bar(double value, double half_width) {
  ErrorBar b;
  b.value = value;
  b.half_width = half_width;
  return b;
}

TEST(Verdicts, ComparesWithBothUncertainties) {
  const Comparison c = compare(published(10, 0.03), bar(10.02, 0.04));
  EXPECT_NEAR(c.distance, 0.02 / 0.05, 1e-12);
  EXPECT_EQ(c.verdict, Verdict::Agrees);
  EXPECT_TRUE(c.contained);
}

TEST(Verdicts, TellsMarginalFromDifferent) {
  EXPECT_EQ(compare(published(10, 0), bar(10.019, 0.01)).verdict, Verdict::Marginal);
  EXPECT_EQ(compare(published(10, 0), bar(10.021, 0.01)).verdict, Verdict::Differs);
  EXPECT_EQ(compare(published(10, 0), bar(9.979, 0.01)).verdict, Verdict::Differs);
}

TEST(Verdicts, IsNotTakenInByAWideBar) {
  EXPECT_EQ(compare(published(10, 0), bar(10, 0.6)).verdict, Verdict::Unresolved);
  EXPECT_EQ(compare(published(-10, 0), bar(-10, 0.4)).verdict, Verdict::Agrees);
}

TEST(Verdicts, MakesNothingOfWhatIsNotANumber) {
  EXPECT_EQ(compare(published(10, 0), bar(std::nan(""), 0.1)).verdict, Verdict::NotSolved);
}

TEST(Tallies, LeaveOutWhatIsDoubtful) {
  const std::vector<Comparison> all{
      compare(published(10, 0), bar(10.001, 0.01)), compare(published(10, 0), bar(10.03, 0.01)),
      compare(published(10, 0), bar(10.015, 0.03)), not_solved(published(10, 0)),
      compare(published(10, 0, Mark::Doubtful), bar(12, 0.01))};
  const Tally t = tally(all);
  EXPECT_EQ(t.agree, 2);
  EXPECT_EQ(t.differ, 1);
  EXPECT_EQ(t.not_solved, 1);
  EXPECT_EQ(t.doubtful, 1);
  EXPECT_EQ(t.bars, 3);
  EXPECT_EQ(t.contained, 2);
  EXPECT_NEAR(t.median_width, 0.002, 1e-12);
  EXPECT_NEAR(t.median_difference, 0.0015, 1e-12);
}

TEST(Rounding, IsHalfOfTheLastDigit) {
  EXPECT_DOUBLE_EQ(rounding_of("4.884"), 0.0005);
  EXPECT_DOUBLE_EQ(rounding_of("37325"), 0.5);
  EXPECT_DOUBLE_EQ(rounding_of("-1.50"), 0.005);
  EXPECT_DOUBLE_EQ(rounding_of("2.25e-4"), 0.5e-6);
  EXPECT_DOUBLE_EQ(rounding_of("3E+03"), 500);
}

}  // namespace
}  // namespace lidwright
