#include "study/bootstrap.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>
#include <set>

#include "tests/support/records.hpp"

namespace lidwright {
namespace {

constexpr double nan = std::numeric_limits<double>::quiet_NaN();

TEST(Bootstrap, DrawsBlocksThatGoRoundTheEnd) {
  BlockBootstrap bootstrap(10, 4, 7);
  std::set<std::size_t> firsts;
  for (int draw = 0; draw < 200; ++draw) {
    const std::vector<std::size_t> rows = bootstrap.draw();
    ASSERT_EQ(rows.size(), 10u);
    for (std::size_t k = 0; k < 10; ++k) {
      if (k % 4 != 0) {
        EXPECT_EQ(rows[k], (rows[k - 1] + 1) % 10);
      }
    }
    firsts.insert(rows[0]);
  }
  EXPECT_EQ(firsts.size(), 10u);
  EXPECT_EQ(BlockBootstrap(10, 4, 7).draw(), BlockBootstrap(10, 4, 7).draw());
  EXPECT_NE(BlockBootstrap(10, 4, 7).draw(), BlockBootstrap(10, 4, 8).draw());
}

TEST(Bootstrap, ChoosesBlocksByCorrelationAndPeriod) {
  EXPECT_EQ(block_length(1000, 10, nan), 50u);
  EXPECT_EQ(block_length(1000, 10, 30), 60u);
  EXPECT_EQ(block_length(1000, 10, 80), 80u);
  EXPECT_EQ(block_length(1000, 0, nan), 1u);
  EXPECT_EQ(block_length(100, 50, nan), 20u);
}

/// Means of resamples scatter as the mean of red noise does, variance 2 tau/T, less what is lost
/// between blocks: of blocks of 5 tau a fifth (Kuensch's bias, 1/block).
TEST(Bootstrap, KnowsTheErrorOfACorrelatedMean) {
  double variance = 0;
  for (int k = 0; k < 40; ++k) {
    Dice dice(static_cast<std::uint64_t>(k));
    const Series s = red_noise(dice, 1000, 10).series;
    BlockBootstrap bootstrap(s.size(), block_length(s.size(), 10, nan), 1);
    double sum = 0, squares = 0;
    for (int draw = 0; draw < 200; ++draw) {
      double mean = 0;
      for (const std::size_t row : bootstrap.draw()) mean += s.value[row] / 1000;
      sum += (mean - 5) / 200;
      squares += (mean - 5) * (mean - 5) / 200;
    }
    variance += (squares - sum * sum) / 40;
  }
  EXPECT_NEAR(variance, 0.8 * 20 / 1000.0, 0.15 * 20 / 1000.0);
}

}  // namespace
}  // namespace lidwright
