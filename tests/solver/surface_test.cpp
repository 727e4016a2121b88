#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "solver/currents.hpp"
#include "solver/topography.hpp"
#include "solver/wall_motion.hpp"
#include "tests/support/shells.hpp"

/// What is measured along the surface and along rows, on fields whose answers are known.
namespace lidwright {
namespace {

using std::numbers::pi;

/// v = h rate(lateral), the same at all depths, by its flow through lateral faces.
CornerField turning(const std::shared_ptr<const Decomposition>& d,
                    const std::function<double(double)>& rate) {
  const Geometry& g = d->geometry();
  CornerField psi(d);
  for (int j = psi.held().begin; j < psi.held().end; ++j)
    for (int i = 0; i < g.radial_cells(); ++i)
      psi[{i + 1, j}] =
          psi[{i, j}] - g.area(LateralFace{i, j}) * g.stretch(i) * rate(g.face_lateral(j));
  return psi;
}

TEST(WallMotion, TheShareThatDeformsIsLeastWhereOneCellDeforms) {
  EXPECT_NEAR(deforming_share({0, 3, 0, 0}, {1, 1, 1, 1}), 0.8 / 4, 1e-15);
  EXPECT_NEAR(deforming_share({2, 2, 2, 2}, {1, 3, 2, 2}), 0.8, 1e-15);
  // 8 of 10: all of the first 6, and two thirds of the next 3.
  EXPECT_NEAR(deforming_share({1, 6, 3, 0}, {1, 1, 1, 1}), (1 + 2.0 / 3) / 4, 1e-15);
  EXPECT_TRUE(std::isnan(deforming_share({0, 0}, {1, 1})));
}

/// |cos| holds 80 % of its integral where it is largest, within asin(0.8) of its crests.
TEST(WallMotion, PlatenessOfASineIsKnown) {
  const auto d =
      decompose({Shape::Annulus, 1.22, 0, 2 * pi, Sides::Periodic}, {6, 400, {2, 2}, {}});
  const Power power(d, {});
  const CornerField psi = turning(d, [](double x) { return 7 * std::sin(5 * x); });
  const double share = std::asin(0.8) / (pi / 2);
  EXPECT_NEAR(plateness(power, psi), 1 - share / 0.6, 1e-3);
  EXPECT_NEAR(wall_velocity_rms(power, psi, 6), 7 * 2.22 / std::sqrt(2), 1e-3);
}

/// On a sphere v = sin(colatitude) stretches along and across alike, by cos(colatitude).
TEST(WallMotion, TheWallOfASphereIsStretchedOutOfThePlaneToo) {
  const auto d =
      decompose({Shape::AxisymmetricShell, 1.22, 0, pi, Sides::Reflecting}, {6, 200, {}, {}});
  const Power power(d, {});
  const std::vector<double> rates =
      wall_strain_rates(power, turning(d, [](double x) { return std::sin(x); }), 6);
  for (int j = 0; j < 200; ++j)
    EXPECT_NEAR(rates[static_cast<std::size_t>(j)],
                std::abs(std::cos(d->geometry().cell_lateral(j))), 2e-4)
        << j;
}

/// u = -a y, v = a x: rates -a and a, second invariant a.
TEST(WallMotion, SurfaceStressIsTwiceViscosityTimesRate) {
  const auto d = decompose({Shape::Box, 0, 0, 1.5, Sides::Reflecting}, {8, 12, {}, {}});
  Power power(d, {});
  power.set_viscosity(CellField(d, 5));
  CornerField psi(d);
  for (int j = psi.held().begin; j < psi.held().end; ++j)
    for (int i = 0; i <= 8; ++i)
      psi[{i, j}] = -3 * d->geometry().face_lateral(j) * d->geometry().face_radius(i);
  EXPECT_NEAR(surface_stress_rms(power, psi), 2 * 5 * 3, 1e-12);
  // Stiffest at the wall: exp(-8 depth) is continued there without error.
  CellField eta(d);
  fill(eta, [&](Cell c) { return 5 * std::exp(-8 * d->geometry().depth(c.i)); });
  power.set_viscosity(eta);
  EXPECT_NEAR(surface_stress_rms(power, psi), 2 * 5 * 3, 1e-12);
}

/// T = T0 + cos(k x) rising where it is hot (or sinking, for a flow of the other sign).
Currents count(const Shell& shell, double k, double sign, MPI_Comm comm) {
  const auto d = decompose(shell, {6, 96, {}, {}}, comm);
  const Geometry& g = d->geometry();
  CellField t(d);
  fill(t, [&](Cell c) { return 0.4 + std::cos(k * g.cell_lateral(c.j)); });
  CornerField psi(d);
  for (int j = psi.held().begin; j < psi.held().end; ++j)
    for (int i = 0; i <= 6; ++i) psi[{i, j}] = sign * std::sin(k * g.face_lateral(j));
  return count_currents(t, psi, 3);
}

constexpr Shell circle{Shape::Annulus, 1.22, 0, 2 * pi, Sides::Periodic};
constexpr Shell sector{Shape::SphericalAnnulus, 1.22, 0, pi, Sides::Reflecting};

/// The plume at longitude 0 lies on both ends of the list of columns, that at pi on the border of
/// two ranks.
TEST(ParallelCurrents, AsManyAsWavesRoundTheCircle) {
  for (const int m : {1, 2, 5, 8}) {
    const Currents c = count(circle, m, 1, PETSC_COMM_WORLD);
    EXPECT_EQ(c.plumes, m);
    EXPECT_EQ(c.downwellings, m);
  }
}

TEST(ParallelCurrents, HalfAPlumeAtASideIsOne) {
  const Currents even = count(sector, 4, 1, PETSC_COMM_WORLD),
                 odd = count(sector, 3, 1, PETSC_COMM_WORLD);
  EXPECT_EQ(even.plumes, 3);
  EXPECT_EQ(even.downwellings, 2);
  EXPECT_EQ(odd.plumes, 2);
  EXPECT_EQ(odd.downwellings, 2);
}

TEST(ParallelCurrents, NoneWithoutFlowWithoutContrastOrTheOtherWay) {
  for (const double sign : {0.0, -1.0}) {
    const Currents c = count(circle, 3, sign, PETSC_COMM_WORLD);
    EXPECT_EQ(c.plumes + c.downwellings, 0);
  }
  const Currents uniform = count(circle, 0, 1, PETSC_COMM_WORLD);
  EXPECT_EQ(uniform.plumes + uniform.downwellings, 0);
}

TEST(Topography, OneWaveHasOneAmplitude) {
  const Geometry g(circle, {4, 48, {}, {}});
  std::vector<double> stress;
  for (int j = 0; j < 48; ++j)
    stress.push_back(-3 * std::cos(2 * g.cell_lateral(j)) + 4 * std::sin(2 * g.cell_lateral(j)));
  const TopographySpectrum s = topography_spectrum(g, stress);
  ASSERT_EQ(s.amplitude.size(), 24U);
  for (std::size_t m = 1; m <= 24; ++m) {
    EXPECT_NEAR(s.wave_number[m - 1], static_cast<double>(m), 1e-13);
    EXPECT_NEAR(s.amplitude[m - 1], m == 2 ? 5 : 0, 1e-13);
  }
  const Decomposition d(std::make_shared<Geometry>(g), PETSC_COMM_SELF);
  EXPECT_NEAR(topography_rms(d, stress), 5 / std::sqrt(2), 1e-13);
}

TEST(Topography, WavesBetweenSidesCountInHalves) {
  const Geometry g({Shape::Box, 0, 0, 1.5, Sides::Reflecting}, {4, 30, {}, {}});
  std::vector<double> stress;
  for (int j = 0; j < 30; ++j) stress.push_back(2 * std::cos(3 * pi * g.cell_lateral(j) / 1.5));
  const TopographySpectrum s = topography_spectrum(g, stress);
  for (std::size_t m = 1; m <= 15; ++m) EXPECT_NEAR(s.amplitude[m - 1], m == 3 ? 2 : 0, 1e-13);
  EXPECT_NEAR(s.wave_number[2], 3 * pi / 1.5, 1e-13);
}

}  // namespace
}  // namespace lidwright
