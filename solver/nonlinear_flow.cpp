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

/// A Newton step, inexact (Dembo, Eisenstat & Steihaug 1982, SIAM J. Numer. Anal. 19, 400): solved
/// to a thirtieth, as the kinks of the laws leave no more to be gained (docs/performance.md).
ConjugateGradients::Report NonlinearFlow::direction(Vec downhill, double absolute, Vec change) {
  constexpr double forcing = 0.03;
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

/// Tests the state and takes one step, Newton's or, where the former one made no way, of
/// fixed-point iteration.
NonlinearFlow::Progress NonlinearFlow::step(Vec f, bool may_move, CornerField& psi) {
  const Handle<Vec, VecDestroy> downhill = unknown_vector(power_.decomposition()),
                                change = unknown_vector(power_.decomposition());
  gradient(f, downhill);
  const double reference = std::sqrt(std::max(0.0, work(f, psi)));
  const auto report = direction(downhill, 0.3 * settings_.tolerance * reference, change);
  const double scale = std::max(reference, last_.newton_steps == 0 ? report.first_norm : 0);
  last_.error = report.first_norm == 0 ? 0 : report.first_norm / scale;
  last_.iterations += report.iterations;
  age_.used(report.iterations + 1);
  if (last_.error <= settings_.tolerance) {
    scale_to_least_power(downhill, psi);
    return Progress::There;
  }
  if (!may_move || !std::isfinite(last_.error)) return Progress::Lost;

  power_.from_unknowns(change, work_psi_);
  const double length = go_down(f, downhill, CornerField(work_psi_), psi);
  ++last_.newton_steps;
  if (fixed_point_) ++last_.fixed_point_steps;
  if (length == 0 && fixed_point_) return Progress::Lost;
  fixed_point_ = length < 0.02;
  functional_.use_secant(fixed_point_);
  const double force_work = work(f, psi);
  if (on_step_)
    on_step_({last_.newton_steps, last_.error, report.iterations, length, force_work, functional_});
  return Progress::Moved;
}

/// The multiple of a flow with the least power, by one Newton step along it: dissipation then
/// equals the work of the force to the square of the error.
void NonlinearFlow::scale_to_least_power(Vec downhill, CornerField& psi) {
  functional_.tangent(psi, work_force_);
  const Handle<Vec, VecDestroy> stiff = unknown_vector(power_.decomposition());
  power_.to_unknowns(work_force_, stiff);
  const double curvature = work(stiff, psi);
  if (!(curvature > 0)) return;
  const double length = work(downhill, psi) / curvature;
  functional_.set_direction(psi);
  functional_.go(length);
  functional_.accept();
  for (double& x : psi.values()) x *= 1 + length;
}

bool NonlinearFlow::descend(Vec f, CornerField& psi) {
  Progress progress = Progress::Moved;
  for (int n = 0; progress == Progress::Moved; ++n) {
    progress = step(f, n < settings_.most_newton_steps, psi);
    factor_fresh_ = false;
    if (age_.stale()) refactor();
  }
  return progress == Progress::There;
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
  factor_fresh_ = fixed_point_ = false;
  functional_.set_laws(std::move(laws));
  functional_.use_secant(false);
  const bool first = !factor_.ready();
  functional_.begin(psi, first ? ViscosityField{} : power_.viscosity_field());
  if (first || age_.stale()) refactor();
  const Handle<Vec, VecDestroy> f = unknown_vector(power_.decomposition());
  work_force_ = force;
  power_.to_unknowns(work_force_, f);
  step_among_former_flows(f, psi);
  const long before = applications();
  last_.converged = descend(f, psi);
  if (first && last_.converged) {
    // The first flow's own viscosities: by these shares, the power falls again. On the way there
    // the flow depends on round-off, and the shares would keep that.
    functional_.begin(psi, functional_.viscosity());
    last_.converged = descend(f, psi);
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
  age_.save(archive);
}

void NonlinearFlow::restore(const Archive& archive) {
  former_.restore(archive);
  power_.set_viscosity(restore_viscosity("flow.factor_viscosity", archive));
  factor_.factorise(power_);
  power_.set_viscosity(restore_viscosity("flow.viscosity", archive));
  gradients_.set_applications(static_cast<long>(archive.numbers.at("flow.applications")));
  factorisations_ = static_cast<long>(archive.numbers.at("flow.factorisations"));
  age_.restore(archive);
}

}  // namespace lidwright
