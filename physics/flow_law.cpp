#include "physics/flow_law.hpp"

namespace lidwright {

/// Solves e = tau / (2 eta_d) + tau^n / (2 B). Either mechanism alone would need a higher stress,
/// so that Newton's method comes down to the root from the smaller of the two without overshooting:
/// the right-hand side is convex.
double LocalFlowLaw::creep_stress(double rate) const {
  if (dislocation == none) return 2 * diffusion * rate;
  const double by_dislocation = std::pow(2 * dislocation * rate, 1 / exponent);
  if (diffusion == none) return by_dislocation;
  double tau = std::min(2 * diffusion * rate, by_dislocation);
  for (int n = 0; n < 60 && tau > 0; ++n) {
    const double linear = tau / (2 * diffusion);
    const double power = std::pow(tau, exponent) / (2 * dislocation);
    const double down = (linear + power - rate) / (linear + exponent * power);
    tau *= 1 - down;
    if (down < 1e-14) break;
  }
  return tau;
}

LocalFlowLaw::Response LocalFlowLaw::creep(double rate) const {
  if (dislocation == none) return {diffusion, 0, false};
  const double tau = creep_stress(rate);
  if (!(tau > 0)) return {diffusion, diffusion == none ? 1 / exponent - 1 : 0, false};
  const double linear = tau / (2 * diffusion), power = std::pow(tau, exponent) / (2 * dislocation);
  return {tau / (2 * rate), (linear + power) / (linear + exponent * power) - 1, false};
}

LocalFlowLaw::Response LocalFlowLaw::operator()(double rate) const {
  Response r = creep(rate);
  if (yield_stress < none && rate > 0) {
    const double plastic = floor + yield_stress / (2 * rate);
    const double plastic_slope = plastic > 0 ? floor / plastic - 1 : 0;
    r.yields = plastic < r.viscosity;
    if (yielding == YieldingLaw::HarmonicMean) {
      const double creep_share = r.viscosity == none ? 1 : r.viscosity / (r.viscosity + plastic);
      r.slope = creep_share * plastic_slope + (1 - creep_share) * r.slope;
      r.viscosity = 2 * creep_share * plastic;
    } else if (r.yields) {
      r.viscosity = plastic;
      r.slope = plastic_slope;
    }
  } else if (yield_stress < none && yielding == YieldingLaw::HarmonicMean) {
    r.viscosity *= 2;  // Plastic viscosity grows without bound.
  }
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
