#include "solver/flow.hpp"

#include <cmath>

namespace lidwright {

FlowSolver::FlowSolver(std::shared_ptr<const Decomposition> d, const Walls& walls,
                       const FlowSettings& settings)
    : settings_(settings),
      power_(d, walls),
      factor_(power_),
      gradients_(
          *d, [this](Vec x, Vec y) { apply_operator(x, y); }, factor_),
      work_psi_(d),
      work_force_(d),
      former_(d, settings.memory),
      age_(settings.refactor_cost) {}

void FlowSolver::apply_operator(Vec x, Vec y) {
  power_.from_unknowns(x, work_psi_);
  power_.apply(work_psi_, work_force_);
  power_.to_unknowns(work_force_, y);
}

void FlowSolver::refactor() {
  factor_.factorise(power_);
  ++factorisations_;
  age_.renewed();
}

FlowReport FlowSolver::solve(const CellField& eta, const RadialFaceField& b, CornerField& psi) {
  const bool changed_here = eta.values() != power_.viscosity().values();
  if (changed_here) power_.set_viscosity(eta);
  const bool changed = power_.decomposition().max(changed_here ? 1 : 0) > 0;
  const long before = factorisations_;
  if (!factor_.ready() || (changed && age_.stale())) refactor();

  const Handle<Vec, VecDestroy> f = unknown_vector(power_.decomposition());
  std::fill(work_force_.values().begin(), work_force_.values().end(), 0.0);
  power_.add_buoyancy(b, work_force_);
  power_.to_unknowns(work_force_, f);
  psi = former_.combine(
      [this](const CornerField& x, CornerField& force) { power_.apply(x, force); }, f);

  FlowReport report = conjugate_gradients(f, psi);
  if (!report.converged && factorisations_ == before) {
    refactor();
    report = conjugate_gradients(f, psi);
  }
  age_.used(report.applications);
  former_.remember(psi);
  return report;
}

/// Stops when sqrt(r . M^-1 r) <= tolerance * sqrt(psi . K psi): the relative velocity error in the
/// dissipation norm, as far as M is K. The reference is f . psi of the start (psi . K psi at the
/// minimum), or the first residual if that is larger, as it is from a start at rest.
FlowReport FlowSolver::conjugate_gradients(Vec f, CornerField& psi) {
  const Handle<Vec, VecDestroy> x = unknown_vector(power_.decomposition());
  power_.flow_to_unknowns(psi, x);
  const double reference = std::sqrt(std::max(0.0, dot(f, x)));
  const long before = applications();
  const auto report = gradients_.solve(
      f, x, {settings_.tolerance, settings_.tolerance * reference, settings_.most_iterations});
  const double scale = std::max(reference, report.first_norm);
  error_ = scale > 0 ? report.norm / scale : 0;
  scale_to_least_power(f, x);
  power_.from_unknowns(x, psi);
  return {report.converged, report.iterations, static_cast<int>(applications() - before), error_};
}

/// The multiple of a flow with the least power: for it, dissipation equals the work of buoyancy to
/// round-off. Conjugate gradients alone reach that only from a start at rest.
void FlowSolver::scale_to_least_power(Vec f, Vec x) {
  const Handle<Vec, VecDestroy> kx = unknown_vector(power_.decomposition());
  apply_operator(x, kx);
  const double twice_power = dot(x, kx);
  if (twice_power > 0) check(VecScale(x, dot(f, x) / twice_power));
}

void FlowSolver::save(Archive& archive) const {
  former_.save(archive);
  if (factor_.ready()) store_viscosity(factor_.viscosity(), "flow.factor_viscosity", archive);
  store_viscosity(power_.viscosity_field(), "flow.viscosity", archive);
  archive.numbers["flow.applications"] = static_cast<double>(applications());
  archive.numbers["flow.factorisations"] = static_cast<double>(factorisations_);
  archive.numbers["flow.error"] = error_;
  age_.save(archive);
}

void FlowSolver::restore(const Archive& archive) {
  former_.restore(archive);
  if (ViscosityField eta = restore_viscosity("flow.factor_viscosity", archive); !eta.empty()) {
    power_.set_viscosity(std::move(eta));
    factor_.factorise(power_);
  }
  power_.set_viscosity(restore_viscosity("flow.viscosity", archive));
  gradients_.set_applications(static_cast<long>(archive.numbers.at("flow.applications")));
  factorisations_ = static_cast<long>(archive.numbers.at("flow.factorisations"));
  error_ = archive.numbers.at("flow.error");
  age_.restore(archive);
}

}  // namespace lidwright
