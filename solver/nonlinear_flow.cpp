#include "solver/nonlinear_flow.hpp"

#include <algorithm>
#include <cmath>

namespace lidwright {

NonlinearFlow::NonlinearFlow(std::shared_ptr<const Decomposition> d, const Walls& walls,
                             const FlowSettings& settings)
    : settings_(settings),
      power_(d, walls),
      functional_(power_),
      factor_(power_),
      gradients_(
          *d,
          [this](Vec x, Vec y) {
            power_.from_unknowns(x, work_psi_);
            functional_.tangent(work_psi_, work_force_);
            power_.to_unknowns(work_force_, y);
          },
          factor_),
      work_psi_(d),
      work_force_(d),
      former_(d, settings.memory),
      age_(settings.refactor_cost) {}

void NonlinearFlow::refactor() {
  power_.set_viscosity(functional_.viscosity());
  factor_.factorise(power_);
  ++factorisations_;
  age_.renewed();
  factor_fresh_ = true;
}

/// f less the gradient of the functional.
void NonlinearFlow::gradient(Vec f, Vec downhill) {
  functional_.gradient(work_force_);
  power_.to_unknowns(work_force_, downhill);
  check(VecAYPX(downhill, -1, f));
}

double NonlinearFlow::work(Vec f, const CornerField& psi) const {
  const Handle<Vec, VecDestroy> x = unknown_vector(power_.decomposition());
  power_.flow_to_unknowns(psi, x);
  return dot(f, x);
}

/// A Newton step as exact as it pays: the next one starts from about the square of this one's error
/// (Eisenstat & Walker 1996, SIAM J. Sci. Comput. 17, 16).
ConjugateGradients::Report NonlinearFlow::direction(Vec downhill, double forcing, double absolute,
                                                    Vec change) {
  check(VecSet(change, 0));
  auto report = gradients_.solve(downhill, change, {forcing, absolute, settings_.most_iterations});
  if (report.iterations > settings_.refactor_cost && !factor_fresh_) {
    refactor();
    if (!report.converged) {
      check(VecSet(change, 0));
      report = gradients_.solve(downhill, change, {forcing, absolute, settings_.most_iterations});
    }
  }
  return report;
}

/// The length of a step for which the change of power along it has all but vanished, from below: as
/// the functional is convex, it then falls all the way. `start` is its change at the state; where
/// it does not fall there, the length is 0.
double NonlinearFlow::line_search(double start, double force_along) {
  if (!(start < 0)) {
    functional_.go(0);
    return 0;
  }
  const auto at = [&](double s) { return (functional_.go(s) - force_along) / -start; };
  double low = 0, at_low = -1, high = 1, at_high = at(1);
  while (at_high < -0.5 && high < 64) {
    low = high;
    at_low = at_high;
    high *= 2;
    at_high = at(high);
  }
  if (at_high <= 0.1) return high;
  for (int n = 0; n < 20 && at_low < -0.1; ++n) {
    // Regula falsi, kept away from the ends.
    const double share = std::clamp(at_low / (at_low - at_high), 0.1, 0.9);
    const double middle = low + share * (high - low), at_middle = at(middle);
    (at_middle <= 0 ? low : high) = middle;
    (at_middle <= 0 ? at_low : at_high) = at_middle;
  }
  functional_.go(low);
  return low;
}

/// A step along a direction; downhill is f less the gradient.
double NonlinearFlow::go_down(Vec f, Vec downhill, const CornerField& direction, CornerField& psi) {
  functional_.set_direction(direction);
  const double length = line_search(-work(downhill, direction), work(f, direction));
  functional_.accept();
  for (std::size_t k = 0; k < psi.values().size(); ++k)
    psi.values()[k] += length * direction.values()[k];
  return length;
}

/// A Newton step in the span of the former flows: extrapolation in time with the weights that give
/// the least power.
void NonlinearFlow::step_among_former_flows(Vec f, CornerField& psi) {
  const Handle<Vec, VecDestroy> downhill = unknown_vector(power_.decomposition());
  gradient(f, downhill);
  go_down(f, downhill,
          former_.combine(
              [this](const CornerField& x, CornerField& force) { functional_.tangent(x, force); },
              downhill),
          psi);
}

/// One Newton step; true when none was needed.
bool NonlinearFlow::step(Vec f, CornerField& psi) {
  const Handle<Vec, VecDestroy> downhill = unknown_vector(power_.decomposition()),
                                change = unknown_vector(power_.decomposition());
  gradient(f, downhill);
  const double reference = std::sqrt(std::max(0.0, work(f, psi)));
  const double target = settings_.tolerance * reference;
  const double forcing = 0.03;
  const auto report = direction(downhill, forcing, 0.3 * target, change);
  const double scale = std::max(reference, last_.newton_steps == 0 ? report.first_norm : 0);
  last_.error = scale > 0 ? report.first_norm / scale : 0;
  last_.iterations += report.iterations;
  age_.used(report.iterations + 1);
  if (last_.error <= settings_.tolerance) return true;

  power_.from_unknowns(change, work_psi_);
  const double length = go_down(f, downhill, CornerField(work_psi_), psi);
  ++last_.newton_steps;
  const bool stuck = length < 0.02;
  if (stuck) ++last_.fixed_point_steps;
  functional_.use_secant(stuck);
  if (on_step_)
    on_step_(
        {last_.newton_steps, last_.error, report.iterations, length, work(f, psi), functional_});
  return false;
}

FlowReport NonlinearFlow::solve(std::vector<LocalFlowLaw> laws, const RadialFaceField& b,
                                CornerField& psi) {
  CornerField force(power_.decomposition_pointer());
  power_.add_buoyancy(b, force);
  return solve(std::move(laws), force, psi);
}

FlowReport NonlinearFlow::solve(std::vector<LocalFlowLaw> laws, const CornerField& force,
                                CornerField& psi) {
  last_ = {};
  functional_.set_laws(std::move(laws));
  functional_.use_secant(false);
  bool shear_shared = factor_.ready();
  functional_.begin(psi, shear_shared ? power_.viscosity_field() : ViscosityField{});
  if (!factor_.ready() || age_.stale()) refactor();
  const Handle<Vec, VecDestroy> f = unknown_vector(power_.decomposition());
  work_force_ = force;
  power_.to_unknowns(work_force_, f);
  step_among_former_flows(f, psi);
  const long before = applications();
  while (!last_.converged && last_.newton_steps <= settings_.most_newton_steps) {
    last_.converged = step(f, psi);
    factor_fresh_ = false;
    if (age_.stale()) refactor();
    if (!shear_shared && last_.converged) {
      // The first flow's own viscosities: by these shares, the power falls again. On the way there
      // the flow depends on round-off, and the shares would keep that.
      functional_.begin(psi, functional_.viscosity());
      shear_shared = true;
      last_.converged = false;
    }
  }
  power_.set_viscosity(functional_.viscosity());
  former_.remember(psi);
  last_.yielding_share = functional_.yielding_share();
  last_.applications = static_cast<int>(applications() - before);
  return last_;
}

void NonlinearFlow::save(Archive& archive) const {
  former_.save(archive);
  store_viscosity(factor_.viscosity(), "flow.factor_viscosity", archive);
  store_viscosity(power_.viscosity_field(), "flow.viscosity", archive);
  archive.numbers["flow.applications"] = static_cast<double>(applications());
  archive.numbers["flow.factorisations"] = static_cast<double>(factorisations_);
  archive.numbers["flow.error"] = last_.error;
  age_.save(archive);
}

void NonlinearFlow::restore(const Archive& archive) {
  former_.restore(archive);
  power_.set_viscosity(restore_viscosity("flow.factor_viscosity", archive));
  factor_.factorise(power_);
  power_.set_viscosity(restore_viscosity("flow.viscosity", archive));
  gradients_.set_applications(static_cast<long>(archive.numbers.at("flow.applications")));
  factorisations_ = static_cast<long>(archive.numbers.at("flow.factorisations"));
  last_.error = archive.numbers.at("flow.error");
  age_.restore(archive);
}

}  // namespace lidwright
