#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "tests/support/marches.hpp"
#include "tests/support/observed_order.hpp"
#include "tests/support/reference_table.hpp"

/// Steady convection against an independent spectral code: tests/reference/spectral_values.csv
/// (10 digits), by `March` to steady on two grids and Richardson extrapolation, within 0.1%.
namespace lidwright {
namespace {

using std::numbers::pi;

HeatSettings central() {
  HeatSettings s;
  s.flux = HeatFlux::Central;
  s.courant = 1;
  s.accuracy = 1e-3;
  return s;
}

HistoryRow steady_row(const Model& m, const TemperatureMode& mode, double rate) {
  InitialSettings initial;
  initial.modes = {mode};
  FlowSettings flow;
  flow.tolerance = 1e-8;
  March march(m, initial, {}, flow, central(), PETSC_COMM_SELF);
  march_to_steady(march, rate, 20000);
  return march.row();
}

/// Integrating the heat equation times T, and the momentum equation times u (box, Boussinesq).
TEST(SteadyBox, DissipatesWhatTheNusseltNumberSays) {
  Model m;
  m.shell = {Shape::Box, 0, 0, 1, Sides::Reflecting};
  m.grid = {16, 16, {}, {}};
  m.rayleigh = 1e4;
  const HistoryRow row = steady_row(m, {1, 1, 0.1}, 1e-10);
  EXPECT_NEAR(row.dissipation / m.rayleigh / (row.nusselt_outer - 1), 1, 1e-11);
  EXPECT_NEAR(row.nusselt_inner / row.nusselt_outer, 1, 1e-11);
  EXPECT_NEAR(row.work_mismatch, 0, 1e-14);
  EXPECT_GT(row.nusselt_outer, 4);  // it convects
}

struct Case {
  std::string id;
  int lateral;  ///< cells for 16 radial ones
};
void PrintTo(const Case& c, std::ostream* out) { *out << c.id; }

ReferenceRow reference(const std::string& id) {
  for (const ReferenceRow& row : reference_table("spectral_values.csv"))
    if (row.text("id") == id) return row;
  throw std::out_of_range(id);
}

/// One convection cell between reflecting sides; pole to equator where the cells are even.
Model model_of(const ReferenceRow& row) {
  const double f = row.number("f_or_aspect"), m = row.number("m_or_l");
  const std::string g = row.text("geometry");
  Model model;
  const Shape shape = g == "A"   ? Shape::Annulus
                      : g == "S" ? Shape::SphericalAnnulus
                                 : Shape::AxisymmetricShell;
  const double end = g == "X" ? pi / 2 : pi / m;
  model.shell = {shape, f / (1 - f), 0, end, Sides::Reflecting};
  model.walls.inner.slip = row.text("inner_bc") == "free" ? Slip::Free : Slip::None;
  model.walls.outer.slip = row.text("outer_bc") == "free" ? Slip::Free : Slip::None;
  model.rayleigh = row.number("Ra_half");
  model.viscosity.exponential = ExponentialViscosity{row.number("contrast"), 1, 0.5};
  return model;
}

struct Found {
  double nusselt, velocity;
};

Found found(const ReferenceRow& row, int radial, int lateral) {
  Model m = model_of(row);
  m.grid.radial = radial;
  m.grid.lateral = lateral;
  const double cells = row.text("geometry") == "X" ? row.number("m_or_l") / 2 : 1;
  const double sign = row.text("flow_at_0") == "up" ? 1 : -1;
  const HistoryRow r = steady_row(m, {cells, 1, 0.12 * sign}, 1e-4);
  return {r.nusselt_outer, r.velocity_rms};
}

void expect_spectral_values(const Case& c, int radial) {
  const ReferenceRow row = reference(c.id);
  const int lateral = c.lateral * radial / 16;
  const Found coarse = found(row, radial, lateral), fine = found(row, 2 * radial, 2 * lateral);
  const double nusselt = richardson(coarse.nusselt, fine.nusselt);
  const double velocity = richardson(coarse.velocity, fine.velocity);
  EXPECT_NEAR(nusselt / row.number("Nu_weak"), 1, 1e-3)
      << coarse.nusselt << " " << fine.nusselt << " for " << row.number("Nu_weak");
  EXPECT_NEAR(velocity / row.number("v_rms"), 1, 1e-3)
      << coarse.velocity << " " << fine.velocity << " for " << row.number("v_rms");
}

TEST(SteadyShell, HasTheSpectralNusseltNumberAndVelocity) {
  expect_spectral_values({"A01", 20}, 16);
}

std::string case_id(const testing::TestParamInfo<Case>& info) { return info.param.id; }

class LongSteadyShell : public testing::TestWithParam<Case> {};

TEST_P(LongSteadyShell, HasTheSpectralNusseltNumberAndVelocity) {
  expect_spectral_values(GetParam(), 32);
}

INSTANTIATE_TEST_SUITE_P(All, LongSteadyShell,
                         testing::Values(Case{"A01", 20}, Case{"A05", 20}, Case{"S01", 20},
                                         Case{"S05", 20}, Case{"X01", 40}, Case{"X03", 40}),
                         case_id);

}  // namespace
}  // namespace lidwright
