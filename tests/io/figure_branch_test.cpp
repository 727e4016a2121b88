#include "io/figure_branch.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>

#include "tests/io/figure_samples.hpp"
#include "tests/io/png_image.hpp"
#include "tests/io/scratch.hpp"

namespace lidwright {
namespace {

using namespace test;
using testing::ElementsAre;
using testing::HasSubstr;

constexpr double unknown = std::numeric_limits<double>::quiet_NaN();

/// Down to a fold at 50 and back.
SavedBranch folded(const std::vector<double>& growth) {
  SavedBranch b{{"numbers.rayleigh", "", true}, {}};
  for (std::size_t k = 0; k < growth.size(); ++k) {
    BranchRow r;
    r.parameter = std::abs(static_cast<double>(k) - 2) * 400 + 50;
    r.asked_for = k % 2 == 0;
    r.backwards = k > 2;
    r.row.nusselt_outer = 3 - 0.3 * static_cast<double>(k);
    r.row.nusselt_inner = r.row.nusselt_outer;
    r.row.velocity_rms = 100 * r.row.nusselt_outer;
    r.leading.growth = growth[k];
    b.rows.push_back(r);
  }
  return b;
}

TEST(FigureBranch, StretchesChangeWhereTheGrowthIsZero) {
  const auto pieces = pieces_of(folded({-2, -1, 3, 4}).rows);
  ASSERT_EQ(pieces.size(), 2u);
  EXPECT_EQ(pieces[0].stability, Stability::Stable);
  EXPECT_THAT(pieces[0].place, ElementsAre(0, 1, 1.25));
  EXPECT_EQ(pieces[1].stability, Stability::Unstable);
  EXPECT_THAT(pieces[1].place, ElementsAre(1.25, 2, 3));
}

TEST(FigureBranch, WithoutGrowthRatesItIsOneSolidStretch) {
  const auto pieces = pieces_of(folded({unknown, unknown, unknown}).rows);
  ASSERT_EQ(pieces.size(), 1u);
  EXPECT_EQ(pattern_of(pieces[0].stability, false), plot::Pattern::Solid);
}

TEST(FigureBranch, WhatIsUnstableIsDashed) {
  EXPECT_EQ(pattern_of(Stability::Unstable, true), plot::Pattern::Dashed);
  EXPECT_EQ(pattern_of(Stability::Stable, true), plot::Pattern::Solid);
  EXPECT_EQ(pattern_of(Stability::Unknown, true), plot::Pattern::Dotted);
}

TEST(FigureBranch, FoldsAreWhereTheParameterTurns) {
  EXPECT_THAT(folds_of(folded({-1, -1, 1, 1, 1}).rows), ElementsAre(2));
  EXPECT_TRUE(folds_of(folded({-1, -1, 1}).rows).empty());
}

TEST(FigureBranch, ATableIsReadBack) {
  const SavedBranch b = folded({-1, -1, 1, 1, unknown});
  const SavedBranch back = read_branch(branch_table(b.parameter, b.rows), "branch.csv");
  EXPECT_EQ(back.parameter.key, "numbers.rayleigh");
  EXPECT_TRUE(back.parameter.logarithmic) << "50 to 850 asked for";
  ASSERT_EQ(back.rows.size(), b.rows.size());
  for (std::size_t k = 0; k < b.rows.size(); ++k) {
    EXPECT_EQ(back.rows[k].parameter, b.rows[k].parameter);
    EXPECT_EQ(back.rows[k].asked_for, b.rows[k].asked_for);
    EXPECT_EQ(back.rows[k].backwards, b.rows[k].backwards);
    EXPECT_EQ(back.rows[k].row.velocity_rms, b.rows[k].row.velocity_rms);
  }
  EXPECT_EQ(back.rows[3].leading.growth, 1);
  EXPECT_TRUE(std::isnan(back.rows[4].leading.growth));
  const SavedBranch in_units =
      read_branch(branch_table({"body.reference_viscosity", "Pa s", true}, b.rows), "branch.csv");
  EXPECT_EQ(in_units.parameter.unit, "Pa s");
}

TEST(FigureBranch, BadTablesAreNamed) {
  const SavedBranch b = folded({-1, 1, 1});
  EXPECT_THAT(message_of<InputError>([] { read_branch("x\n1\n", "b.csv"); }),
              HasSubstr("b.csv: not a branch"));
  EXPECT_THAT(message_of<InputError>([&] { read_branch(branch_table(b.parameter, {}), "b.csv"); }),
              HasSubstr("holds no steady state"));
  SavedRun run;
  run.paths.folder = "nowhere";
  EXPECT_THAT(message_of<InputError>([&] { branch_figure(run, {}); }),
              HasSubstr("nowhere: holds no branch.csv"));
}

class DrawnBranch : public testing::TestWithParam<std::vector<double>> {};

TEST_P(DrawnBranch, IsDrawnAtEverySizeAndNothingIsCut) {
  SavedBranch b = folded(GetParam());
  for (const bool walls_differ : {false, true}) {
    if (walls_differ)
      for (BranchRow& r : b.rows) r.row.nusselt_inner *= r.backwards ? unknown : 1.4;
    for (const FigureStyle& style : all_sizes()) {
      const PngImage image(branch_figure(b, long_title, style));
      ASSERT_TRUE(image.sound());
      EXPECT_TRUE(white_margins(image, 3)) << walls_differ << ' ' << image.width();
    }
  }
}

INSTANTIATE_TEST_SUITE_P(All, DrawnBranch,
                         testing::Values(std::vector<double>{-1}, std::vector<double>{-1, 1},
                                         std::vector<double>{-3, -1, 2, 1, -1, unknown},
                                         std::vector<double>(5, unknown)));

}  // namespace
}  // namespace lidwright
