#include "mesh/geometry.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "tests/support/observed_order.hpp"
#include "tests/support/shells.hpp"

namespace lidwright {
namespace {

using std::numbers::pi;

// A number at one place is not taken for one at another.
static_assert(!std::is_convertible_v<RadialFace, Cell>);
static_assert(!std::is_convertible_v<LateralFace, RadialFace>);
static_assert(!std::is_convertible_v<Corner, Cell>);
static_assert(std::is_same_v<decltype(outer(Cell{})), RadialFace>);
static_assert(std::is_same_v<decltype(right(Cell{})), LateralFace>);
static_assert(std::is_same_v<decltype(right(RadialFace{})), Corner>);
static_assert(std::is_same_v<decltype(outer(LateralFace{})), Corner>);

/// Three uniform cells from radius 1 to 2 (box: height 0 to 1), four along the lateral coordinate.
Geometry small(Shape shape, double lateral_end) {
  return Geometry({shape, shape == Shape::Box ? 0.0 : 1.0, 0, lateral_end, Sides::Reflecting},
                  {3, 4, {}, {}});
}

TEST(SmallBox, MeasuresByHand) {
  const Geometry g = small(Shape::Box, 2);  // cells 1/3 high, 1/2 long
  EXPECT_DOUBLE_EQ(g.area(RadialFace{1, 2}), 0.5);
  EXPECT_DOUBLE_EQ(g.area(LateralFace{1, 2}), 1.0 / 3);
  EXPECT_DOUBLE_EQ(g.volume({1, 2}), 1.0 / 6);
  EXPECT_DOUBLE_EQ(g.stretch(1), 1);
  EXPECT_DOUBLE_EQ(g.curvature(1), 0);
  EXPECT_DOUBLE_EQ(g.radial_distance(0), 1.0 / 6);
  EXPECT_DOUBLE_EQ(g.radial_distance(1), 1.0 / 3);
  EXPECT_DOUBLE_EQ(g.lateral_distance(0), 0.25);
  EXPECT_DOUBLE_EQ(g.lateral_distance(2), 0.5);
  EXPECT_DOUBLE_EQ(g.depth(0), 5.0 / 6);
  EXPECT_DOUBLE_EQ(g.conductive_heat_flow(), 2);
}

TEST(SmallAnnulus, MeasuresByHand) {
  const Geometry g = small(Shape::Annulus, pi / 2);  // faces at 1, 4/3, 5/3, 2; cells of pi/8
  EXPECT_DOUBLE_EQ(g.area(RadialFace{1, 2}), 4.0 / 3 * pi / 8);
  EXPECT_DOUBLE_EQ(g.area(LateralFace{1, 2}), 1.0 / 3);
  EXPECT_DOUBLE_EQ(g.volume({1, 2}), 0.5 * pi / 8);  // (25 - 16)/9/2
  EXPECT_DOUBLE_EQ(g.stretch(1), 1.5);
  EXPECT_DOUBLE_EQ(g.curvature(1), 1 / 1.5);
  EXPECT_DOUBLE_EQ(g.conductive_heat_flow(), pi / 2 / std::log(2.0));
}

TEST(SmallSphericalAnnulus, MeasuresByHand) {
  const Geometry g = small(Shape::SphericalAnnulus, pi / 2);
  EXPECT_DOUBLE_EQ(g.area(RadialFace{1, 2}), 16.0 / 9 * pi / 8);
  EXPECT_DOUBLE_EQ(g.area(LateralFace{1, 2}), 0.5);        // (25 - 16)/9/2
  EXPECT_DOUBLE_EQ(g.volume({1, 2}), 61.0 / 81 * pi / 8);  // (125 - 64)/27/3
  EXPECT_DOUBLE_EQ(g.stretch(1), 122.0 / 81);              // volume over side
  EXPECT_DOUBLE_EQ(g.curvature(1), 81.0 / 122);
  EXPECT_DOUBLE_EQ(g.conductive_heat_flow(), 2 * pi / 2);  // r_i r_o times the angle
}

TEST(SmallAxisymmetricShell, MeasuresByHand) {
  const Geometry g = small(Shape::AxisymmetricShell, pi);  // cells of pi/4
  const double ring = 2 * pi * std::cos(pi / 4);           // from pi/4 to pi/2
  EXPECT_DOUBLE_EQ(g.area(RadialFace{1, 1}), 16.0 / 9 * ring);
  EXPECT_DOUBLE_EQ(g.area(LateralFace{1, 1}), 0.5 * 2 * pi * std::sin(pi / 4));
  EXPECT_EQ(g.area(LateralFace{1, 0}), 0);  // the axis
  EXPECT_EQ(g.area(LateralFace{1, 4}), 0);
  EXPECT_EQ(g.inverse_area(LateralFace{1, 4}), 0);
  EXPECT_DOUBLE_EQ(g.volume({1, 1}), 61.0 / 81 * ring);
  EXPECT_DOUBLE_EQ(g.conductive_heat_flow(), 4 * pi * 2);
}

class AnyGeometry : public testing::TestWithParam<NamedShell> {
 protected:
  Geometry g{GetParam().shell, GetParam().grid};
};

double exact_volume(const Shell& s) {
  const double a = s.inner_radius, b = a + 1, angle = s.lateral_end - s.lateral_begin;
  switch (s.shape) {
    case Shape::Box:
      return angle;
    case Shape::Annulus:
      return angle * (b * b - a * a) / 2;
    case Shape::SphericalAnnulus:
      return angle * (b * b * b - a * a * a) / 3;
    case Shape::AxisymmetricShell:
      break;
  }
  return 2 * pi * (std::cos(s.lateral_begin) - std::cos(s.lateral_end)) * (b * b * b - a * a * a) /
         3;
}

TEST_P(AnyGeometry, CellsFillTheShellExactly) {
  double cells = 0;
  for (int j = 0; j < g.lateral_cells(); ++j)
    for (int i = 0; i < g.radial_cells(); ++i) cells += g.volume({i, j});
  EXPECT_NEAR(cells / exact_volume(g.shell()), 1, 1e-14);
  EXPECT_NEAR(g.total_volume() / exact_volume(g.shell()), 1, 1e-14);
}

TEST_P(AnyGeometry, StaggeredVolumesAddUpToTheTotal) {
  double radial = 0, lateral = 0, quarters = 0;
  for (int j = 0; j < g.lateral_cells(); ++j)
    for (int i = 0; i <= g.radial_cells(); ++i) radial += g.dual_volume(RadialFace{i, j});
  for (int j = 0; j < g.corner_columns(); ++j)
    for (int i = 0; i < g.radial_cells(); ++i) lateral += g.dual_volume(LateralFace{i, j});
  for (int j = 0; j < g.lateral_cells(); ++j)
    for (int i = 0; i < g.radial_cells(); ++i)
      for (const bool upper : {false, true})
        for (const bool right : {false, true}) quarters += g.quarter_volume({i, j}, upper, right);
  EXPECT_NEAR(radial / g.total_volume(), 1, 1e-14);
  EXPECT_NEAR(lateral / g.total_volume(), 1, 1e-14);
  EXPECT_NEAR(quarters / g.total_volume(), 1, 1e-14);
}

TEST_P(AnyGeometry, WallsHaveTheAreaOfTheirFaces) {
  for (const int face : {0, g.radial_cells()}) {
    double sum = 0;
    for (int j = 0; j < g.lateral_cells(); ++j) sum += g.area(RadialFace{face, j});
    EXPECT_NEAR(sum / g.wall_area(face), 1, 1e-14);
  }
}

INSTANTIATE_TEST_SUITE_P(All, AnyGeometry, testing::ValuesIn(all_shells(7, 9)), shell_name);

TEST(GradedFaces, HaveTheStatedRatios) {
  const int n = 400;
  const std::vector<double> x = graded_faces(2, 3, n, {5, 3});
  const double middle = x[n / 2 + 1] - x[n / 2];
  EXPECT_NEAR(middle / (x[1] - x[0]), 5, 1e-3);
  EXPECT_NEAR(middle / (x[n] - x[n - 1]), 3, 1e-3);
  EXPECT_DOUBLE_EQ(x.front(), 2);
  EXPECT_DOUBLE_EQ(x.back(), 3);
}

TEST(GradedFaces, AreSymmetricForEqualRatios) {
  const std::vector<double> x = graded_faces(0, 1, 17, {4, 4});
  for (std::size_t k = 0; k < x.size(); ++k) EXPECT_NEAR(x[k], 1 - x[x.size() - 1 - k], 1e-15);
}

TEST(GradedFaces, AreUniformWithoutGrading) {
  const std::vector<double> x = graded_faces(0, 2, 4, {});
  EXPECT_EQ(x, (std::vector<double>{0, 0.5, 1, 1.5, 2}));
}

/// Largest move of a face when the cells are halved.
double move_on_refinement(int n) {
  const std::vector<double> coarse = graded_faces(0, 1, n, {4, 2});
  const std::vector<double> fine = graded_faces(0, 1, 2 * n, {4, 2});
  double most = 0;
  for (std::size_t k = 0; k < coarse.size(); ++k)
    most = std::max(most, std::abs(coarse[k] - fine[2 * k]));
  return most;
}

TEST(GradedFaces, KeepTheMapOnRefinement) {
  EXPECT_NEAR(observed_order(move_on_refinement(40), move_on_refinement(80)), 2, 0.1);
}

}  // namespace
}  // namespace lidwright
