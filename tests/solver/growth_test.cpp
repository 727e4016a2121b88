#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "tests/support/marches.hpp"
#include "tests/support/reference_table.hpp"
#include "tests/support/shells.hpp"

/// Growth and decay of small perturbations by `March` against linear theory:
/// tests/reference/growth_rates.csv (collocation, 12 digits), radius ratio 0.55, within 0.5% on
/// 48 radial cells.
namespace lidwright {
namespace {

using std::numbers::pi;

constexpr int radial_cells = 48;

struct Case {
  std::string geometry, heating, walls;
  double rayleigh;
  int k;
};
void PrintTo(const Case& c, std::ostream* out) {
  *out << c.geometry << " " << c.heating << " " << c.walls << " Ra " << c.rayleigh << " k " << c.k;
}
std::string case_name(const testing::TestParamInfo<Case>& info) {
  const Case& c = info.param;
  return c.geometry + "_" + c.heating + "_" + c.walls + "_" +
         std::to_string(static_cast<int>(c.rayleigh)) + "_" + std::to_string(c.k);
}

double published_rate(const Case& c) {
  for (const ReferenceRow& row : reference_table("growth_rates.csv"))
    if (row.text("geometry") == c.geometry && row.text("heating") == c.heating &&
        row.text("inner_bc") == c.walls && row.number("Ra") == c.rayleigh && row.number("k") == c.k)
      return row.number("sigma");
  throw std::out_of_range("no such growth rate");
}

/// P_l needs the whole meridian; cos(k phi) fits a sector of half a wave.
Shell shell_of(const Case& c) {
  const double inner = 0.55 / 0.45;
  if (c.geometry == "sphere") return {Shape::AxisymmetricShell, inner, 0, pi, Sides::Reflecting};
  const Shape shape = c.geometry == "annulus" ? Shape::Annulus : Shape::SphericalAnnulus;
  return {shape, inner, 0, pi / c.k, Sides::Reflecting};
}

Model model_of(const Case& c) {
  Model m;
  m.shell = shell_of(c);
  m.grid.radial = radial_cells;
  m.grid.lateral = std::max(24, static_cast<int>(1.7 * m.shell.lateral_end * radial_cells / 2) * 2);
  m.rayleigh = c.rayleigh;
  m.walls.inner.slip = m.walls.outer.slip = c.walls == "free" ? Slip::Free : Slip::None;
  if (c.heating == "internal") {  // T in units of Q d^2/k: the source is 1
    m.walls.inner.thermal = FixedHeatFlux{0};
    m.heat.uniform = 1;
  }
  return m;
}

double harmonic(const Case& c, double lateral) {
  return c.geometry == "sphere" ? std::legendre(static_cast<unsigned>(c.k), std::cos(lateral))
                                : std::cos(c.k * lateral);
}

/// Nearly the radial shape of the slowest mode: flat at an insulating inner wall.
double radial_shape(const Case& c, double height) {
  return c.heating == "internal" ? std::cos(pi * height / 2) : std::sin(pi * height);
}

/// The conductive profile and 1e-4 of the mode.
StoredTemperature start_of(const Case& c, const Model& m) {
  const auto d = decompose(m.shell, m.grid);
  const Geometry& g = d->geometry();
  const std::vector<double> profile =
      conductive_profile(HeatOperator(d, m.walls, m.heat, HeatFlux::Central));
  StoredTemperature s;
  s.shell = m.shell;
  for (int i = 0; i <= m.grid.radial; ++i) s.face_radius.push_back(g.face_radius(i));
  for (int j = 0; j <= m.grid.lateral; ++j) s.face_lateral.push_back(g.face_lateral(j));
  for (int j = 0; j < m.grid.lateral; ++j)
    for (int i = 0; i < m.grid.radial; ++i)
      s.values.push_back(profile[static_cast<std::size_t>(i)] +
                         1e-4 * radial_shape(c, g.cell_radius(i) - g.inner_radius()) *
                             harmonic(c, g.cell_lateral(j)));
  return s;
}

/// Amplitude of the mode: the temperature projected on it.
double amplitude(const Case& c, const CellField& t) {
  const Geometry& g = t.decomposition().geometry();
  double sum = 0, mean = 0;
  for_each_owned<At::Cell>(t.decomposition(), [&](Cell at) {
    mean += g.volume(at) * harmonic(c, g.cell_lateral(at.j)) / g.total_volume();
  });
  for_each_owned<At::Cell>(t.decomposition(), [&](Cell at) {
    sum += g.volume(at) * radial_shape(c, g.cell_radius(at.i) - g.inner_radius()) * t[at] *
           (harmonic(c, g.cell_lateral(at.j)) - mean);
  });
  return sum;
}

/// Once the faster decaying radial shapes have died out; those of an insulated shell live longer.
double measured_rate(const Case& c) {
  const Model m = model_of(c);
  FlowSettings flow;
  flow.tolerance = 1e-9;
  March march(m, {}, start_of(c, m), flow, equal_steps(2e-3), PETSC_COMM_SELF);
  const auto amplitude_at = [&](double time) {
    while (march.time() < time - 1e-9) march.step(time);
    return amplitude(c, march.temperature());
  };
  const double early = c.heating == "internal" ? 0.3 : 0.16, late = early + 0.08;
  const double before = amplitude_at(early), after = amplitude_at(late);
  return std::log(after / before) / (late - early);
}

class GrowthRate : public testing::TestWithParam<Case> {};

TEST_P(GrowthRate, IsThatOfLinearTheory) {
  const double published = published_rate(GetParam()), measured = measured_rate(GetParam());
  EXPECT_NEAR(measured / published, 1, 0.005) << measured << " for " << published;
}

INSTANTIATE_TEST_SUITE_P(Annulus, GrowthRate,
                         testing::Values(Case{"annulus", "bottom", "free", 1000, 4},
                                         Case{"annulus", "bottom", "free", 500, 2},
                                         Case{"annulus", "bottom", "rigid", 1000, 3},
                                         Case{"annulus", "internal", "free", 1000, 4},
                                         Case{"annulus", "internal", "rigid", 1000, 6}),
                         case_name);
INSTANTIATE_TEST_SUITE_P(SphericalAnnulus, GrowthRate,
                         testing::Values(Case{"sphericalannulus", "bottom", "free", 1000, 4},
                                         Case{"sphericalannulus", "bottom", "free", 500, 2},
                                         Case{"sphericalannulus", "bottom", "rigid", 1000, 3},
                                         Case{"sphericalannulus", "internal", "free", 1000, 4},
                                         Case{"sphericalannulus", "internal", "rigid", 1000, 6}),
                         case_name);
INSTANTIATE_TEST_SUITE_P(AxisymmetricShell, GrowthRate,
                         testing::Values(Case{"sphere", "bottom", "free", 1000, 3},
                                         Case{"sphere", "bottom", "free", 500, 2},
                                         Case{"sphere", "bottom", "rigid", 1000, 4},
                                         Case{"sphere", "internal", "free", 1000, 2},
                                         Case{"sphere", "internal", "rigid", 1000, 1}),
                         case_name);

}  // namespace
}  // namespace lidwright
