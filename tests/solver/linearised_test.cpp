#include "solver/linearised.hpp"

#include <gtest/gtest.h>

#include "solver/measure.hpp"
#include "tests/support/random.hpp"
#include "tests/support/shells.hpp"

/// The Jacobian against differences of the residuals it is the derivative of.
namespace lidwright {
namespace {

struct Choice {
  const char* name;
  HeatFlux flux;
  bool compressible;
};

class Jacobian : public testing::TestWithParam<std::tuple<NamedShell, Choice>> {
 protected:
  static Model model() {
    const auto& [shell, choice] = GetParam();
    Model m;
    m.shell = shell.shell;
    m.grid = shell.grid;
    m.rayleigh = 50;
    m.walls.inner.slip = Slip::None;
    m.viscosity.exponential = ExponentialViscosity{1e3, 5, 0.5};
    m.heat.uniform = 1;
    if (!choice.compressible) return m;
    m.walls.inner.thermal = FixedHeatFlux{0.7};
    m.reference.dissipation_number = 0.6;
    m.reference.surface_temperature = 0.1;
    m.reference.density.rise = 1.8;
    m.reference.expansivity.rise = 0.5;
    m.reference.conductivity.rise = 3;
    m.reference.heat_capacity.rise = 1.4;
    return m;
  }

  /// Both residuals of a state given by its unknowns.
  Eigen::VectorXd residual(const Eigen::VectorXd& x) {
    unknowns.set_flow(x.head(unknowns.flow()), psi);
    unknowns.set_temperature(x.tail(unknowns.cells()), t);
    power.set_viscosity(viscosity_of(m.viscosity, t));
    CornerField force(d);
    power.apply(psi, force);
    CornerField push(d);
    power.add_buoyancy(buoyancy(heat, t, m.rayleigh), push);
    Eigen::VectorXd r(unknowns.size());
    r.head(unknowns.flow()) = unknowns.flow_force(force) - unknowns.flow_force(push);
    r.tail(unknowns.cells()) = -unknowns.temperature_vector(heat_gain(m, power, heat, t, psi));
    return r;
  }

  Model m = model();
  HeatFlux flux = std::get<1>(GetParam()).flux;
  std::shared_ptr<const Decomposition> d = decompose(m, PETSC_COMM_SELF);
  Power power{d, m.walls};
  HeatOperator heat{d, m.walls, m.heat, flux, m.reference};
  Unknowns unknowns{power};
  CellField t{d};
  CornerField psi{d};
};

TEST_P(Jacobian, IsTheDerivativeOfTheResiduals) {
  Eigen::VectorXd x(unknowns.size()), direction(unknowns.size());
  for (long n = 0; n < x.size(); ++n) {
    const double scale = n < unknowns.flow() ? 0.1 : 0.5;
    x[n] = scale * random_at(static_cast<int>(n), 1, 3);
    direction[n] = scale * random_at(static_cast<int>(n), 2, 3);
  }
  const double h = 1e-6;
  const Eigen::VectorXd difference =
      (residual(x + h * direction) - residual(x - h * direction)) / (2 * h);
  (void)residual(x);
  const Linearised j = linearise(m, power, heat, flux, unknowns, t, psi);
  const auto by_psi = direction.head(unknowns.flow());
  const auto by_t = direction.tail(unknowns.cells());
  const Eigen::VectorXd flow = j.flow_by_psi * by_psi + j.flow_by_temperature * by_t;
  const Eigen::VectorXd gain = j.heat_by_psi * by_psi + j.heat_by_temperature * by_t;
  EXPECT_LT((flow - difference.head(unknowns.flow())).norm(), 1e-7 * flow.norm());
  EXPECT_LT((gain - difference.tail(unknowns.cells())).norm(), 1e-7 * gain.norm());
}

INSTANTIATE_TEST_SUITE_P(
    Shells, Jacobian,
    testing::Combine(testing::ValuesIn(all_shells(6, 8)),
                     testing::Values(Choice{"central", HeatFlux::Central, false},
                                     Choice{"limited", HeatFlux::Limited, true},
                                     Choice{"compressible", HeatFlux::Central, true})),
    [](const auto& tested) {
      return std::get<0>(tested.param).name + "_" + std::get<1>(tested.param).name;
    });

}  // namespace
}  // namespace lidwright
