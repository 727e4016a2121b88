#include "mesh/operators.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <map>

#include "tests/support/random.hpp"
#include "tests/support/shells.hpp"

namespace lidwright {
namespace {

class Operators : public testing::TestWithParam<NamedShell> {
 protected:
  Geometry g{GetParam().shell, GetParam().grid};

  template <class Body>
  void each_cell(Body&& body) const {
    for (int j = 0; j < g.lateral_cells(); ++j)
      for (int i = 0; i < g.radial_cells(); ++i) body(Cell{i, j});
  }
};

/// Sums at corners, as a force on psi.
class CornerSums {
 public:
  double& operator[](Corner k) { return sums_[{k.i, k.j}]; }
  double times(const RandomPsi& psi) const {
    double s = 0;
    for (const auto& [at, x] : sums_) s += x * psi[{at.first, at.second}];
    return s;
  }

 private:
  std::map<std::pair<int, int>, double> sums_;
};

TEST_P(Operators, NoCellGainsMass) {
  const RandomPsi psi;
  each_cell([&](Cell c) {
    const double net = flow_through(psi, outer(c)) - flow_through(psi, inner(c)) +
                       flow_through(psi, right(c)) - flow_through(psi, left(c));
    EXPECT_NEAR(net, 0, 1e-15);
  });
}

TEST_P(Operators, VelocitiesAreFlowsOverAreas) {
  const RandomPsi psi;
  each_cell([&](Cell c) {
    const OnFaces w = face_velocities(g, psi, c);
    EXPECT_NEAR(w.outer * g.area(outer(c)), flow_through(psi, outer(c)), 1e-14);
    if (g.area(right(c)) > 0) {
      EXPECT_NEAR(w.right * g.area(right(c)), flow_through(psi, right(c)), 1e-14);
    }
  });
}

TEST_P(Operators, StrainOfAStreamFunctionNeedsNoDivergence) {
  struct ClosedSides {  // psi is constant on the axis, where faces have no area
    const Geometry& g;
    double operator[](Corner k) const { return g.on_side(k.j) ? 0 : RandomPsi{}[k]; }
  } psi{g};
  each_cell([&](Cell c) {
    const OnFaces w = face_velocities(g, psi, c);
    const Normal a = strain(g, w, c), b = deviatoric_strain(g, w, c);
    const double size = std::abs(a.rr) + std::abs(a.tt) + g.inverse_volume(c);
    EXPECT_NEAR(a.pp, b.pp, 1e-13 * size);
    EXPECT_EQ(a.rr, b.rr);
    EXPECT_EQ(a.tt, b.tt);
  });
}

TEST_P(Operators, HoopRateIsZeroInThePlane) {
  if (g.shell().shape != Shape::Box && g.shell().shape != Shape::Annulus) return;
  each_cell([&](Cell c) {
    const OnFaces w{random_at(c.i, c.j, 1), random_at(c.i, c.j, 2), random_at(c.i, c.j, 3),
                    random_at(c.i, c.j, 4)};
    const Normal e = strain(g, w, c);
    EXPECT_NEAR(e.pp, 0, 1e-13 * (std::abs(e.rr) + std::abs(e.tt)));
  });
}

TEST_P(Operators, ForcesAreTheTransposeOfStrain) {
  each_cell([&](Cell c) {
    const OnFaces w{random_at(c.i, c.j, 1), random_at(c.i, c.j, 2), random_at(c.i, c.j, 3),
                    random_at(c.i, c.j, 4)};
    const Normal s{random_at(c.i, c.j, 5), random_at(c.i, c.j, 6), random_at(c.i, c.j, 7)};
    const auto along = [](const OnFaces& a, const OnFaces& b) {
      return a.inner * b.inner + a.outer * b.outer + a.left * b.left + a.right * b.right;
    };
    const auto product = [&](const Normal& e) { return e.rr * s.rr + e.tt * s.tt + e.pp * s.pp; };
    const Normal e = strain(g, w, c), d = deviatoric_strain(g, w, c);
    const double size = std::abs(e.rr) + std::abs(e.tt) + std::abs(e.pp) + 100;
    EXPECT_NEAR(product(e), along(w, forces(g, s, c)), 1e-13 * size);
    EXPECT_NEAR(product(d), along(w, deviatoric_forces(g, s, c)), 1e-13 * size);
  });
}

TEST_P(Operators, CornerForcesAreTheTransposeOfVelocities) {
  const RandomPsi psi;
  each_cell([&](Cell c) {
    CornerSums force;
    const double a = random_at(c.i, c.j, 1), b = random_at(c.i, c.j, 2);
    add_to_corners(g, force, outer(c), a);
    add_to_corners(g, force, left(c), b);
    const double direct = a * velocity(g, psi, outer(c)) + b * velocity(g, psi, left(c));
    EXPECT_NEAR(force.times(psi), direct, 1e-13 * (1 + std::abs(direct)));
  });
}

TEST_P(Operators, RigidRotationIsFreeOfStrain) {
  if (!g.periodic() || g.box()) return;
  struct Rotation {
    std::vector<double> psi;
    double operator[](Corner k) const { return psi[static_cast<std::size_t>(k.i)]; }
  } rotation{{0}};
  for (int i = 0; i < g.radial_cells(); ++i)  // v = stretch, so v/h = 1
    rotation.psi.push_back(rotation.psi.back() - g.stretch(i) * g.area(LateralFace{i, 0}));
  ASSERT_LT(rotation.psi.back(), -1);  // the walls' values differ: a net flow
  each_cell([&](Cell c) {
    const Normal e = deviatoric_strain(g, face_velocities(g, rotation, c), c);
    EXPECT_NEAR(std::abs(e.rr) + std::abs(e.tt) + std::abs(e.pp), 0, 1e-13);
    if (c.i == 0) return;
    EXPECT_NEAR(shear(g, rotation, shear_row_inside(g, {c.i, c.j})), 0, 1e-13);
  });
}

TEST_P(Operators, TranslationInTheBoxIsFreeOfStrain) {
  if (!g.box()) return;
  struct Translation {
    const Geometry& g;
    double operator[](Corner k) const { return 3 * g.face_lateral(k.j) - 2 * g.face_radius(k.i); }
  } translation{g};
  each_cell([&](Cell c) {
    const OnFaces w = face_velocities(g, translation, c);
    EXPECT_NEAR(w.outer, 3, 1e-13);
    EXPECT_NEAR(w.right, 2, 1e-13);
    const Normal e = deviatoric_strain(g, w, c);
    EXPECT_NEAR(std::abs(e.rr) + std::abs(e.tt), 0, 1e-12);
    if (c.i == 0 || g.on_side(c.j)) return;
    EXPECT_NEAR(shear(g, translation, shear_row_inside(g, {c.i, c.j})), 0, 1e-12);
  });
}

INSTANTIATE_TEST_SUITE_P(All, Operators, testing::ValuesIn(all_shells(6, 8)), shell_name);

/// Couette flow between a gripping wall and the middle of the cell next to it, by hand.
TEST(GrippingRow, IsThatOfTheHalfCell) {
  const Geometry g({Shape::Annulus, 1, 0, 1, Sides::Reflecting}, {4, 4, {}, {}});
  const ShearRow row = shear_row_gripping(g, {0, 2});
  // First lateral face at 1.125: e = (1/2) * 1.0625 * (v / 1.125) / 0.125.
  EXPECT_DOUBLE_EQ(row.near_weight, 0.5 * 1.0625 / 1.125 / 0.125);
  EXPECT_EQ(row.near.i, 0);
  EXPECT_EQ(row.far_weight, 0);
  const ShearRow top = shear_row_gripping(g, {4, 2});
  EXPECT_DOUBLE_EQ(top.near_weight, -0.5 * 1.9375 / 1.875 / 0.125);
  EXPECT_EQ(top.near.i, 3);
}

}  // namespace
}  // namespace lidwright
