#include <gtest/gtest.h>

#include <cmath>
#include <numbers>
#include <optional>

#include "solver/linearised.hpp"
#include "solver/measure.hpp"
#include "solver/solve_error.hpp"
#include "tests/support/onset_cases.hpp"
#include "tests/support/shells.hpp"

/// Neutral Rayleigh numbers against linear theory: tests/reference/onset_*.csv, within 1e-4 after
/// extrapolation.
namespace lidwright {
namespace {

using std::numbers::pi;

constexpr double close_enough = 1e-4;

Model layer(double wavenumber, Slip inner, Slip outer) {
  Model m;
  m.shell = {Shape::Box, 0, 0, pi / wavenumber, Sides::Reflecting};
  m.walls.inner.slip = inner;
  m.walls.outer.slip = outer;
  return m;
}

double deviation(const Model& m, int number, double expected, int radial_cells = 96) {
  return std::abs(Extrapolated(m, radial_cells)(number) / expected - 1);
}

/// Chandrasekhar 1961, Hydrodynamic and Hydromagnetic Stability, ch. II: 27 pi^4/4 at k = pi/sqrt 2
/// (exact), 1707.762 at 3.117, 1100.65 at 2.682; more digits from tests/reference/onset_plane.csv.
TEST(OnsetPlane, IsThatOfChandrasekhar) {
  EXPECT_LT(
      deviation(layer(pi / std::sqrt(2.0), Slip::Free, Slip::Free), 1, 27 * std::pow(pi, 4) / 4),
      close_enough);
  EXPECT_LT(deviation(layer(3.116324, Slip::None, Slip::None), 1, 1707.7617771), close_enough);
  EXPECT_LT(deviation(layer(2.682322, Slip::None, Slip::Free), 1, 1100.6496069), close_enough);
}

/// (pi^2 + k^2)^3/k^2 for any wave (Rayleigh 1916), here the third of a periodic box.
TEST(OnsetPlane, CountsWavesOfAPeriodicBox) {
  Model m = layer(1, Slip::Free, Slip::Free);
  m.shell = {Shape::Box, 0, 0, 5, Sides::Periodic};
  const double k = 2 * pi * 3 / 5;
  EXPECT_DOUBLE_EQ(wave_of(m.shell, 3).wavenumber, k);
  EXPECT_LT(deviation(m, 3, std::pow(pi * pi + k * k, 3) / (k * k)), close_enough);
}

TEST(OnsetPlane, HasSecondOrder) {
  const Model m = layer(3.116324, Slip::None, Slip::None);
  const auto error = [&](int n) { return NeutralModes(m, n)(1)->rayleigh - 1707.7617771047; };
  EXPECT_NEAR(std::log2(error(64) / error(128)), 2, 0.05);
}

TEST(OnsetNone, WhereTheStateIsStable) {
  Model cooled_below = layer(2, Slip::Free, Slip::Free), even = cooled_below;
  cooled_below.walls.inner.thermal = FixedTemperature{-1};
  even.walls.inner.thermal = FixedTemperature{0};
  for (const int cells : {16, 64, 128}) {
    EXPECT_FALSE(NeutralModes(cooled_below, cells)(1).has_value()) << cells;
    EXPECT_FALSE(NeutralModes(even, cells)(1).has_value()) << cells;
  }
}

/// A hemisphere has the even degrees, a sector of the circle some of its waves.
TEST(OnsetPart, IsThatOfTheWhole) {
  Model whole;
  whole.shell = {Shape::AxisymmetricShell, 0.55 / 0.45, 0, pi, Sides::Reflecting};
  Model half = whole;
  half.shell.lateral_end = pi / 2;
  EXPECT_EQ(wave_of(half.shell, 2).order, 4);
  EXPECT_NEAR(Extrapolated(half, 96)(2) / Extrapolated(whole, 96)(4), 1, 1e-5);
  whole.shell = {Shape::Annulus, 0.55 / 0.45, 0, 2 * pi, Sides::Periodic};
  half.shell = {Shape::Annulus, 0.55 / 0.45, 0.3, 0.3 + pi / 2, Sides::Reflecting};
  EXPECT_NEAR(wave_of(half.shell, 2).order, 4, 1e-12);
  EXPECT_NEAR(NeutralModes(half, 24)(2)->rayleigh / NeutralModes(whole, 24)(4)->rayleigh, 1, 1e-9);
}

/// A degree that is no whole number: between those of its neighbours.
TEST(OnsetPart, HasDegreesOfItsOwn) {
  const Shell sector{Shape::AxisymmetricShell, 1, pi / 3, pi * 0.8, Sides::Reflecting};
  const Wave w = wave_of(sector, 2);
  EXPECT_GT(w.order, 2 / (0.8 - 1.0 / 3) - 1);
  EXPECT_LT(w.order, 2 / (0.8 - 1.0 / 3));
}

RestBlocks whole_blocks(const Model& m) {
  const auto d = decompose(m, MPI_COMM_SELF);
  const HeatOperator heat(d, m.walls, m.heat, HeatFlux::Central, m.reference);
  const CellField t = temperature_at_rest(heat);
  Power power(d, m.walls);
  power.set_viscosity(viscosity_of(m.viscosity, t));
  Linearised l = linearise(m, power, heat, HeatFlux::Central, Unknowns(power), t, CornerField(d));
  return {l.flow_by_psi, l.flow_by_temperature, l.heat_by_psi, l.heat_by_temperature};
}

/// Rayleigh number of one degree in the spectrum of the whole shell, all modes coupled: that of the
/// eigenvector most like the lateral mode.
double in_whole_shell(const RestBlocks& blocks, const LateralMode& lateral, int radial_cells) {
  double best = 0, rayleigh = 0;
  for (const NeutralMode& mode : neutral_modes(blocks, 6)) {
    double along = 0, all = 0;
    for (std::size_t k = 0; k < mode.temperature.size(); ++k)
      if (static_cast<int>(k) % radial_cells == radial_cells / 2) {
        const double y = lateral.cells[k / static_cast<std::size_t>(radial_cells)];
        const double weight = std::sin(pi * (static_cast<double>(k / radial_cells) + 0.5) /
                                       static_cast<double>(lateral.cells.size()));
        along += weight * y * mode.temperature[k];
        all += weight * mode.temperature[k] * mode.temperature[k];
      }
    const double share = std::abs(along) / std::sqrt(all);
    if (share > best) best = share, rayleigh = mode.rayleigh;
  }
  return rayleigh;
}

/// Taking one lateral mode at a time changes the eigenvalues of the discrete axisymmetric shell at
/// fourth order only.
TEST(OnsetAxisymmetric, ModesDecoupleToFourthOrder) {
  Model m;
  m.shell = {Shape::AxisymmetricShell, 0.55 / 0.45, 0, pi, Sides::Reflecting};
  m.rayleigh = 1;
  const auto difference = [&](int radial) {
    m.grid.radial = radial;
    m.grid.lateral = 6 * radial;
    const LateralMode lateral = lateral_mode(*make_geometry(m), 3);
    const RestBlocks blocks = whole_blocks(m);
    const double alone = neutral_modes(projected(blocks, lateral, radial), 1).front().rayleigh;
    return std::abs(in_whole_shell(blocks, lateral, radial) / alone - 1);
  };
  const double coarse = difference(8), fine = difference(16);
  EXPECT_LT(fine, 1e-4);
  EXPECT_GT(std::log2(coarse / fine), 3) << coarse << " " << fine;
}

TEST(OnsetAxisymmetric, LateralModesAreLegendrePolynomials) {
  const Geometry g({Shape::AxisymmetricShell, 1, 0, pi, Sides::Reflecting}, {4, 400, {}, {}});
  const LateralMode mode = lateral_mode(g, 7);
  EXPECT_NEAR(mode.eigenvalue / 56, 1, 1e-3);
  for (int j = 0; j < 400; j += 7)
    EXPECT_NEAR(mode.cells[static_cast<std::size_t>(j)],
                std::legendre(7U, std::cos(g.cell_lateral(j))), 2e-3);
}

/// The critical rows of every table, and some others: all geometries, walls and heatings, radius
/// ratios from 0.2 to 0.9. Of the longest table, every fifth problem, which meets all of its walls.
class Onset : public testing::TestWithParam<std::string> {};

bool selected(const std::string& table, std::size_t row, int problem, const OnsetCase& c) {
  const bool thin = c.model.shell.inner_radius > 5;
  if (table == "sphere_gr") return c.critical && problem % 5 == 0;
  if (table == "sphere_internal" && thin) return false;  // it takes long, and sphere_bottom has it
  return c.critical || row % 29 == 3;
}

/// The thin layers of a varying viscosity need more.
int fast_cells(const std::string& table) { return table == "expvisc" ? 128 : 96; }

TEST_P(Onset, AgreesWithLinearTheory) {
  const std::vector<OnsetCase> cases = onset_cases(GetParam());
  double worst = 0;
  int problem = 0;
  for (std::size_t row = 0; row < cases.size(); ++row) {
    const OnsetCase& c = cases[row];
    if (row > 0 && cases[row - 1].name != c.name) ++problem;
    if (!selected(GetParam(), row, problem, c)) continue;
    const double off = deviation(c.model, c.number, c.rayleigh, fast_cells(GetParam()));
    EXPECT_LT(off, close_enough) << testing::PrintToString(c);
    worst = std::max(worst, off);
  }
  RecordProperty("worst", std::to_string(worst));
}

const auto all_tables = testing::Values("plane", "expvisc", "annulus_bottom", "annulus_internal",
                                        "sphericalannulus_bottom", "sphericalannulus_internal",
                                        "sphere_bottom", "sphere_internal", "sphere_gr");

std::string table_name(const testing::TestParamInfo<std::string>& info) { return info.param; }

INSTANTIATE_TEST_SUITE_P(Table, Onset, all_tables, table_name);

/// Where a table holds the critical rows alone, their neighbours need more: modes of shells, waves
/// 3% longer and shorter in the plane layer.
class OnsetCritical : public testing::TestWithParam<std::string> {};

double on_one_grid(const Model& m, int number) { return NeutralModes(m, 64)(number)->rayleigh; }

double of_longer_wave(Model m, double ratio) {
  m.shell.lateral_end *= ratio;
  return on_one_grid(m, 1);
}

TEST_P(OnsetCritical, IsTheLeast) {
  for (const OnsetCase& c : onset_cases(GetParam())) {
    const bool plane = c.model.shell.shape == Shape::Box;
    const double least = on_one_grid(c.model, c.number);
    for (const int step : {-1, 1}) {
      const double other =
          plane ? of_longer_wave(c.model, 1 + 0.03 * step) : on_one_grid(c.model, c.number + step);
      EXPECT_GT(other, least) << testing::PrintToString(c) << (step < 0 ? " -" : " +");
    }
  }
}

INSTANTIATE_TEST_SUITE_P(Table, OnsetCritical, testing::Values("plane", "expvisc"), table_name);

/// Every row, and the critical mode of every problem.
class LongOnset : public testing::TestWithParam<std::string> {};

struct Problem {
  explicit Problem(const OnsetCase& c) : rayleigh(c.model, 128) {}
  Extrapolated rayleigh;
  double least = 1e300;
  int critical = 0, published = 0;
};

TEST_P(LongOnset, AgreesWithLinearTheory) {
  double worst = 0;
  std::string name;
  std::optional<Problem> problem;
  const auto check_critical = [&] {
    if (problem) {
      EXPECT_EQ(problem->critical, problem->published) << name;
    }
  };
  for (const OnsetCase& c : onset_cases(GetParam())) {
    if (c.name != name) {
      check_critical();
      problem.emplace(c);
      name = c.name;
    }
    const double rayleigh = problem->rayleigh(c.number);
    const double off = std::abs(rayleigh / c.rayleigh - 1);
    EXPECT_LT(off, close_enough) << testing::PrintToString(c);
    worst = std::max(worst, off);
    if (rayleigh < problem->least) problem->least = rayleigh, problem->critical = c.number;
    if (c.critical) problem->published = c.number;
  }
  check_critical();
  RecordProperty("worst", std::to_string(worst));
}

INSTANTIATE_TEST_SUITE_P(Table, LongOnset, all_tables, table_name);

}  // namespace
}  // namespace lidwright
