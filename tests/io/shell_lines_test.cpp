#include "io/shell_lines.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "io/contours.hpp"
#include "io/isotherms.hpp"
#include "tests/support/shells.hpp"

namespace lidwright {
namespace {

using std::numbers::pi;

TEST(Contours, ALineRunsWhereTheLevelLies) {
  const std::vector<double> rising{0, 1, 2, 0, 1, 2};  // value = i on 3 x 2 places
  const auto line = plot::contour({3, 2, rising}, 1.25);
  ASSERT_EQ(line.size(), 1u);
  EXPECT_DOUBLE_EQ(line[0][0][0], 1.25);
  EXPECT_DOUBLE_EQ(line[0][1][0], 1.25);
}

/// Around a peak in the middle of 5 x 5 places.
TEST(Contours, PiecesBecomeOneClosedLine) {
  std::vector<double> peak(25, 0.0);
  peak[12] = 1;
  const auto lines = plot::joined(plot::contour({5, 5, peak}, 0.4));
  ASSERT_EQ(lines.size(), 1u);
  EXPECT_EQ(lines[0].size(), 5u) << "four sides, and the first place once more";
  EXPECT_EQ(lines[0].front(), lines[0].back());
}

TEST(Contours, TwoLinesStayTwo) {
  const std::vector<double> valley{1, 0, 1, 1, 0, 1, 1, 0, 1};  // along j, at i = 0.5 and 1.5
  const auto lines = plot::joined(plot::contour({3, 3, valley}, 0.5));
  ASSERT_EQ(lines.size(), 2u);
  EXPECT_EQ(lines[0].size(), 3u);
}

/// A hot patch astride longitude 0 of a full circle is one line, and none of its pieces crosses the
/// circle; in a periodic box it comes apart at the sides.
std::vector<plot::ShellLine> patch_astride(const Shell& shell) {
  const Geometry g(shell, {12, 40, {}, {}});
  std::vector<double> corners;
  for (int j = 0; j < g.corner_columns(); ++j)
    for (int i = 0; i <= g.radial_cells(); ++i) {
      const double along = (j + 20) % 40 - 20;
      corners.push_back(std::exp(-std::pow(along / 4, 2) - std::pow((i - 6) / 3.0, 2)));
    }
  return plot::contour_lines(g, corners, 0.4);
}

TEST(ShellLines, GoOnOverTheSeamOfACircle) {
  const Shell circle{Shape::Annulus, 1.2, 0, 2 * pi, Sides::Periodic};
  const auto lines = patch_astride(circle);
  ASSERT_EQ(lines.size(), 1u);
  const Geometry g(circle, {12, 40, {}, {}});
  const plot::ShellMap map(g, {0, 0, 440, 440});
  const auto places = plot::on_page(map, lines[0]);
  EXPECT_NEAR(places.front().x, places.back().x, 1e-9);
  EXPECT_NEAR(places.front().y, places.back().y, 1e-9);
  for (std::size_t k = 1; k < places.size(); ++k)
    EXPECT_LT(std::hypot(places[k].x - places[k - 1].x, places[k].y - places[k - 1].y), 50);
}

TEST(ShellLines, EndAtTheSidesOfAPeriodicBox) {
  EXPECT_EQ(patch_astride({Shape::Box, 0, 0, 4, Sides::Periodic}).size(), 2u);
}

class CornersOfCells : public testing::TestWithParam<NamedShell> {};

/// A linear function of cell numbers is itself at corners within, and the outermost cells' value at
/// walls.
TEST_P(CornersOfCells, AreMeansOfTheirNeighbours) {
  const Geometry g(GetParam().shell, GetParam().grid);
  std::vector<double> cells;
  for (int j = 0; j < g.lateral_cells(); ++j)
    for (int i = 0; i < g.radial_cells(); ++i) cells.push_back(i);
  const auto corners = plot::corner_means(g, cells);
  ASSERT_EQ(corners.size(), static_cast<std::size_t>((g.radial_cells() + 1) * g.corner_columns()));
  EXPECT_DOUBLE_EQ(corners[0], 0);
  EXPECT_DOUBLE_EQ(corners[3], 2.5);
  EXPECT_DOUBLE_EQ(corners[static_cast<std::size_t>(g.radial_cells())], g.radial_cells() - 1);
}

INSTANTIATE_TEST_SUITE_P(AllShells, CornersOfCells, testing::ValuesIn(all_shells(6, 9)),
                         shell_name);

/// T = depth: any level is reached at that depth, but not below the lowest cell's middle.
TEST(LidBase, OfALinearProfileIsTheLevel) {
  const Geometry g({Shape::Box, 0, 0, 1, Sides::Reflecting}, {10, 4, {3, 2}, {}});
  std::vector<double> cells;
  for (int j = 0; j < 4; ++j)
    for (int i = 0; i < 10; ++i) cells.push_back(g.depth(i));
  for (const double depth : plot::depths_of(g, cells, 0.37)) EXPECT_NEAR(depth, 0.37, 1e-12);
  for (const double depth : plot::depths_of(g, cells, -0.1)) EXPECT_EQ(depth, 0);
  for (const double depth : plot::depths_of(g, cells, 1.1)) EXPECT_TRUE(std::isnan(depth));
}

TEST(Along, ALineHasItsPlacesByLength) {
  const std::vector<plot::Place> corner{{0, 0}, {3, 0}, {3, 4}};
  EXPECT_DOUBLE_EQ(plot::length_of(corner), 7);
  const plot::Along a = plot::along(corner, 5);
  EXPECT_DOUBLE_EQ(a.place.x, 3);
  EXPECT_DOUBLE_EQ(a.place.y, 2);
  EXPECT_DOUBLE_EQ(a.dx, 0);
  EXPECT_DOUBLE_EQ(a.dy, 1);
}

}  // namespace
}  // namespace lidwright
