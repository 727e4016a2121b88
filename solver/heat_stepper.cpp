#include "solver/heat_stepper.hpp"

#include <cmath>
#include <numeric>

namespace lidwright {

HeatStepper::HeatStepper(std::shared_ptr<const Decomposition> d, const Walls& walls,
                         const HeatSources& sources, HeatFlux flux,
                         const ReferenceProfiles& reference)
    : heat_(std::move(d), walls, sources, flux, reference), implicit_(heat_) {}

namespace {

double owned_sum(const CellField& f) {
  return std::accumulate(f.owned_data(), f.owned_data() + f.owned_size(), 0.0);
}

}  // namespace

/// Gains of cells in one stage: A by all that is explicit, D by conduction.
struct HeatStepper::Stage {
  CellField advection, conduction;
  StepHeat heat;  ///< on this rank
};

HeatStepper::Stage HeatStepper::stage(const CellField& temperature, const Forcing& forcing) const {
  Stage s{CellField(temperature.decomposition_pointer()),
          CellField(temperature.decomposition_pointer()),
          {}};
  heat_.add_advection(temperature, forcing.psi, s.advection);
  if (!heat_.mantle().uniform_heat_capacity) s.heat.carried = owned_sum(s.advection);
  if (!forcing.viscous.empty()) {
    CellField work(temperature.decomposition_pointer());
    heat_.add_adiabatic_work(temperature, forcing.psi, work);
    s.heat.adiabatic = -owned_sum(work);
    s.heat.viscous = owned_sum(forcing.viscous);
    for (std::size_t k = 0; k < work.owned_size(); ++k)
      s.advection.owned_data()[k] += work.owned_data()[k] + forcing.viscous.owned_data()[k];
  }
  heat_.add_sources(s.advection);
  s.heat.through = heat_.add_conduction(temperature, s.conduction);
  return s;
}

/// With g = 1 - 1/sqrt(2) and b = 1/(2 sqrt(2)):
///     T2 = T + dt [2g A1 + g D1 + g D2]                         at t + 2g dt
///     T3 = T + dt [A1/2 + A2/2 + b D1 + b D2 + g D3]            at t + dt
///     T(t + dt) = T + dt [b (A1 + D1) + b (A2 + D2) + g (A3 + D3)]
/// The last line is in flux form, so heat is conserved whatever the implicit solves leave.
StepHeat HeatStepper::step(const CellField& temperature, const Forcing& now, const Forcing& then,
                           double dt, CellField& next) {
  const double g = 1 - 1 / std::sqrt(2.0), b = 1 / (2 * std::sqrt(2.0));
  const auto each = [&](auto&& body) {
    for (int j = temperature.owned().begin; j < temperature.owned().end; ++j)
      for (int i = 0; i < temperature.rows(); ++i) body(Cell{i, j});
  };
  Forcing between = now;
  for (std::size_t k = 0; k < now.psi.values().size(); ++k)
    between.psi.values()[k] += 2 * g * (then.psi.values()[k] - now.psi.values()[k]);
  for (std::size_t k = 0; k < now.viscous.values().size(); ++k)
    between.viscous.values()[k] += 2 * g * (then.viscous.values()[k] - now.viscous.values()[k]);
  CellField right(temperature.decomposition_pointer()), middle(temperature.decomposition_pointer());

  const Stage one = stage(temperature, now);
  each([&](Cell c) {
    right[c] = heat_.capacity(c) * temperature[c] +
               dt * (2 * g * one.advection[c] + g * one.conduction[c]);
    middle[c] =
        temperature[c] + 2 * g * dt * (one.advection[c] + one.conduction[c]) / heat_.capacity(c);
  });
  implicit_.solve(g * dt, right, middle);
  const Stage two = stage(middle, between);
  CellField last(temperature.decomposition_pointer());
  each([&](Cell c) {
    right[c] =
        heat_.capacity(c) * temperature[c] + dt * ((one.advection[c] + two.advection[c]) / 2 +
                                                   b * (one.conduction[c] + two.conduction[c]));
    last[c] = temperature[c] + (middle[c] - temperature[c]) / (2 * g);
  });
  implicit_.solve(g * dt, right, last);
  const Stage three = stage(last, then);
  next = temperature;
  each([&](Cell c) {
    const double gain =
        b * (one.advection[c] + one.conduction[c] + two.advection[c] + two.conduction[c]) +
        g * (three.advection[c] + three.conduction[c]);
    next[c] += dt * gain / heat_.capacity(c);
  });
  next.exchange();
  std::vector<double> mean;
  for (double StepHeat::*part : {&StepHeat::viscous, &StepHeat::adiabatic, &StepHeat::carried})
    mean.push_back(b * (one.heat.*part + two.heat.*part) + g * three.heat.*part);
  for (double WallHeat::*wall : {&WallHeat::inner, &WallHeat::outer})
    mean.push_back(b * (one.heat.through.*wall + two.heat.through.*wall) +
                   g * three.heat.through.*wall);
  heat_.decomposition().sum_in_place(mean);
  return {{mean[3], mean[4]}, mean[0], mean[1], mean[2]};
}

}  // namespace lidwright
