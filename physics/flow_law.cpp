#include "physics/flow_law.hpp"

namespace lidwright {

/// Solves x/q + x^n = 1 for x = tau/by_dislocation, where q = by_diffusion/by_dislocation is the
/// ratio of the stresses at which either mechanism alone would creep at this rate: that is
/// e = tau/(2 eta_d) + tau^n/(2 B). Newton's method comes down to the root without overshooting, as
/// the left-hand side is convex and either mechanism alone needs the higher stress.
LocalFlowLaw::Shares LocalFlowLaw::shares(double by_diffusion, double by_dislocation) const {
  constexpr double last_step = 1e-8;  // the error left is less than exponent * last_step^2
  constexpr int most_steps = 60;
  const double q = by_diffusion / by_dislocation;
  if (q == 0) return {1, 0};
  double x = std::min(1., q);
  for (int k = 0; k < most_steps; ++k) {
    const double linear = x / q, power = std::pow(x, exponent);
    const double down = (linear + power - 1) / (linear + exponent * power);
    x -= down * x;
    if (down < last_step) break;
  }
  return {std::min(x / q, 1.), x};
}

LocalFlowLaw::Response LocalFlowLaw::creep(double rate) const {
  if (dislocation == none) return {diffusion, 0, false};
  if (exponent == 1) return {1 / (1 / diffusion + 1 / dislocation), 0, false};
  const double power_law = 1 / exponent - 1;  // slope where dislocations alone creep
  if (rate == 0) return {diffusion, diffusion == none ? power_law : 0, false};
  const double by_dislocation = std::pow(2 * dislocation * rate, 1 / exponent);
  if (by_dislocation == 0) return {0, power_law, false};
  if (by_dislocation == none) return {diffusion, 0, false};  // beyond the largest number
  if (diffusion == none) return {by_dislocation / (2 * rate), power_law, false};
  const auto [linear, stress] = shares(2 * diffusion * rate, by_dislocation);
  // The first form does not lose a viscosity at rates that underflow.
  const double eta = linear > 0.5 ? diffusion * linear : stress * by_dislocation / (2 * rate);
  return {eta, 1 / (linear + exponent * (1 - linear)) - 1, false};
}

double LocalFlowLaw::creep_stress(double rate) const {
  return rate > 0 ? 2 * creep(rate).viscosity * rate : 0;
}

LocalFlowLaw::Response LocalFlowLaw::with_yielding(const Response& creep, double rate) const {
  const double plastic = floor + (yield_stress > 0 ? yield_stress / (2 * rate) : 0);
  const double plastic_slope = plastic > 0 ? floor / plastic - 1 : 0;
  const bool yields = plastic < creep.viscosity;
  if (yielding == YieldingLaw::Minimum)
    return yields ? Response{plastic, plastic_slope, true} : creep;
  const double softness = 1 / creep.viscosity + 1 / plastic;
  if (softness == 0) return creep;  // both rigid
  if (softness == none) return {0, 0, yields};
  const double plastic_share = 1 / plastic / softness;
  return {2 / softness, plastic_share * plastic_slope + (1 - plastic_share) * creep.slope, yields};
}

LocalFlowLaw::Response LocalFlowLaw::operator()(double rate) const {
  Response r = creep(rate);
  if (yield_stress < none) r = with_yielding(r, rate);
  if (r.viscosity < lowest) return {lowest, 0, r.yields};
  if (r.viscosity > highest) return {highest, 0, false};
  return r;
}

LocalFlowLaw local_flow_law(const ViscosityLaw& diffusion, const DislocationCreep* dislocation,
                            const Yielding* yielding, const Point& p, double yield_stress) {
  LocalFlowLaw law;
  law.diffusion = diffusion.without_cuts(p);
  law.lowest = diffusion.lowest;
  law.highest = diffusion.highest;
  if (dislocation) {
    if (dislocation->alone) law.diffusion = LocalFlowLaw::none;
    law.dislocation = dislocation->viscosity.without_cuts(p) *
                      std::pow(dislocation->reference_stress, dislocation->exponent - 1);
    law.exponent = dislocation->exponent;
  }
  if (yielding) {
    law.yield_stress = yield_stress;
    law.yielding = yielding->law;
    law.floor = yielding->floor;
  }
  return law;
}

}  // namespace lidwright
