#include "solver/flow.hpp"

#include <Eigen/Dense>
#include <cmath>

namespace lidwright {
namespace {

Handle<Vec, VecDestroy> unknown_vector(const Decomposition& d) {
  Handle<Vec, VecDestroy> v;
  check(DMCreateGlobalVector(d.dm(At::Corner), v.put()));
  return v;
}

double dot(Vec a, Vec b) {
  double x = 0;
  check(VecDot(a, b, &x));
  return x;
}

}  // namespace

FlowSolver::FlowSolver(std::shared_ptr<const Decomposition> d, const Walls& walls,
                       const FlowSettings& settings)
    : settings_(settings), power_(d, walls), factor_(power_), work_psi_(d), work_force_(d) {
  const Handle<Vec, VecDestroy> shape = unknown_vector(*d);
  PetscInt local = 0, global = 0;
  check(VecGetLocalSize(shape, &local));
  check(VecGetSize(shape, &global));
  check(MatCreateShell(d->comm(), local, local, global, global, this, operator_.put()));
  check(
      MatShellSetOperation(operator_, MATOP_MULT, reinterpret_cast<void (*)()>(operator_callback)));
  check(KSPCreate(d->comm(), ksp_.put()));
  check(KSPSetOperators(ksp_, operator_, operator_));
  check(KSPSetType(ksp_, KSPCG));
  check(KSPSetNormType(ksp_, KSP_NORM_NATURAL));
  check(KSPSetInitialGuessNonzero(ksp_, PETSC_TRUE));
  // Our own test decides; PETSc's limit only has to be out of its way.
  check(KSPSetTolerances(ksp_, PETSC_DEFAULT, PETSC_DEFAULT, PETSC_DEFAULT,
                         settings.most_iterations + 1));
  check(KSPSetConvergenceTest(ksp_, convergence_callback, this, nullptr));
  PC pc = nullptr;
  check(KSPGetPC(ksp_, &pc));
  check(PCSetType(pc, PCSHELL));
  check(PCShellSetContext(pc, this));
  check(PCShellSetApply(pc, factor_callback));
}

PetscErrorCode FlowSolver::operator_callback(Mat a, Vec x, Vec y) {
  FlowSolver* self = nullptr;
  PetscCall(MatShellGetContext(a, &self));
  self->apply_operator(x, y);
  return 0;
}

PetscErrorCode FlowSolver::factor_callback(PC pc, Vec r, Vec z) {
  FlowSolver* self = nullptr;
  PetscCall(PCShellGetContext(pc, &self));
  self->factor_.apply(r, z);
  ++self->applications_;
  return 0;
}

/// Stops when sqrt(r . M^-1 r) <= tolerance * sqrt(psi . K psi): the relative velocity error in the
/// dissipation norm, as far as M is K. The reference is f . psi of the start (psi . K psi at the
/// minimum), or the first residual if that is larger, as it is from a start at rest.
PetscErrorCode FlowSolver::convergence_callback(KSP, PetscInt n, PetscReal norm,
                                                KSPConvergedReason* reason, void* context) {
  FlowSolver* self = static_cast<FlowSolver*>(context);
  if (n == 0) self->reference_ = std::max(self->reference_, norm);
  self->error_ = self->reference_ > 0 ? norm / self->reference_ : 0;
  *reason = KSP_CONVERGED_ITERATING;
  if (!std::isfinite(norm))
    *reason = KSP_DIVERGED_NANORINF;
  else if (self->error_ <= self->settings_.tolerance)
    *reason = KSP_CONVERGED_RTOL;
  else if (n >= self->settings_.most_iterations)
    *reason = KSP_DIVERGED_ITS;
  return 0;
}

void FlowSolver::apply_operator(Vec x, Vec y) {
  power_.from_unknowns(x, work_psi_);
  power_.apply(work_psi_, work_force_);
  power_.to_unknowns(work_force_, y);
}

void FlowSolver::refactor() {
  factor_.factorise(power_);
  ++factorisations_;
  spent_ = 0;
  last_cost_ = 0;
  solves_ = 0;
}

/// A new factor pays as soon as a solve costs more than the mean cost of a solve since the last
/// factorisation, that factorisation included: the mean is then at its minimum.
bool FlowSolver::factor_is_stale() const {
  if (!factor_.ready()) return true;
  if (!viscosity_changed_ || solves_ < 2) return false;
  return last_cost_ > (settings_.refactor_cost + spent_) / static_cast<double>(solves_);
}

FlowReport FlowSolver::solve(const CellField& eta, const RadialFaceField& b, CornerField& psi) {
  viscosity_changed_ = eta.values() != power_.viscosity().values();
  if (viscosity_changed_) power_.set_viscosity(eta);
  const bool changed_anywhere = power_.decomposition().max(viscosity_changed_ ? 1 : 0) > 0;
  viscosity_changed_ = changed_anywhere;
  const long before = factorisations_;
  if (factor_is_stale()) refactor();

  const Handle<Vec, VecDestroy> f = unknown_vector(power_.decomposition());
  std::fill(work_force_.values().begin(), work_force_.values().end(), 0.0);
  power_.add_buoyancy(b, work_force_);
  power_.to_unknowns(work_force_, f);
  start_from_former_flows(f, psi);

  FlowReport report = conjugate_gradients(f, psi);
  if (!report.converged && factorisations_ == before) {
    refactor();
    report = conjugate_gradients(f, psi);
  }
  last_cost_ = solves_ == 0 ? report.applications : 0.7 * last_cost_ + 0.3 * report.applications;
  spent_ += report.applications;
  ++solves_;
  remember(psi);
  return report;
}

FlowReport FlowSolver::conjugate_gradients(Vec f, CornerField& psi) {
  const Handle<Vec, VecDestroy> x = unknown_vector(power_.decomposition());
  CornerField start = psi;
  // `to_unknowns` sums the outer wall: leave the common value in one place only.
  for (int j = start.owned().begin; j < start.owned().end; ++j)
    if (power_.through_flow() && j != 0) start[{start.rows() - 1, j}] = 0;
  power_.to_unknowns(start, x);
  reference_ = std::sqrt(std::max(0.0, dot(f, x)));
  const long before = applications_;
  check(KSPSolve(ksp_, f, x));
  KSPConvergedReason reason = KSP_CONVERGED_ITERATING;
  PetscInt iterations = 0;
  check(KSPGetConvergedReason(ksp_, &reason));
  check(KSPGetIterationNumber(ksp_, &iterations));
  scale_to_least_power(f, x);
  power_.from_unknowns(x, psi);
  return {reason > 0, static_cast<int>(iterations), static_cast<int>(applications_ - before),
          error_};
}

/// The multiple of a flow with the least power: for it, dissipation equals the work of buoyancy to
/// round-off. Conjugate gradients alone reach that only from a start at rest.
void FlowSolver::scale_to_least_power(Vec f, Vec x) {
  const Handle<Vec, VecDestroy> kx = unknown_vector(power_.decomposition());
  apply_operator(x, kx);
  const double twice_power = dot(x, kx);
  if (twice_power > 0) check(VecScale(x, dot(f, x) / twice_power));
}

/// The combination of former flows with the least power: a Galerkin projection on their span (after
/// Fischer 1998, Comput. Methods Appl. Mech. Eng. 163, 193), at one product with K each and no
/// application of the factor. Newest flow and its successive differences as basis, which
/// extrapolation in time would combine by fixed weights.
void FlowSolver::start_from_former_flows(Vec f, CornerField& psi) {
  const auto count = static_cast<Eigen::Index>(former_.size());
  std::fill(psi.values().begin(), psi.values().end(), 0.0);
  if (count == 0) return;
  std::vector<CornerField> basis(former_.begin(), former_.end());
  for (std::size_t order = 1; order < basis.size(); ++order)
    for (std::size_t n = basis.size() - 1; n >= order; --n)
      for (std::size_t k = 0; k < basis[n].values().size(); ++k)
        basis[n].values()[k] = basis[n - 1].values()[k] - basis[n].values()[k];

  Eigen::MatrixXd gram(count, count);
  Eigen::VectorXd right(count);
  std::vector<double> products;
  const auto owned_dot = [](const CornerField& a, const CornerField& b) {
    double s = 0;
    for (std::size_t k = 0; k < a.owned_size(); ++k) s += a.owned_data()[k] * b.owned_data()[k];
    return s;
  };
  const double* f_raw = nullptr;
  check(VecGetArrayRead(f, &f_raw));
  const auto force_dot = [&](const CornerField& a) {
    double s = 0;
    for (std::size_t k = 0; k < a.owned_size(); ++k) s += a.owned_data()[k] * f_raw[k];
    return s;
  };
  for (Eigen::Index a = 0; a < count; ++a) {
    const CornerField& flow = basis[static_cast<std::size_t>(a)];
    power_.apply(flow, work_force_);
    for (Eigen::Index b = 0; b <= a; ++b)
      products.push_back(owned_dot(basis[static_cast<std::size_t>(b)], work_force_));
    products.push_back(force_dot(flow));
  }
  check(VecRestoreArrayRead(f, &f_raw));
  power_.decomposition().sum_in_place(products);
  std::size_t next = 0;
  for (Eigen::Index a = 0; a < count; ++a) {
    for (Eigen::Index b = 0; b <= a; ++b) gram(a, b) = gram(b, a) = products[next++];
    right(a) = products[next++];
  }
  // Scaled to unit diagonal; directions that former flows do not resolve are left out.
  const Eigen::VectorXd scale = gram.diagonal().cwiseMax(0).cwiseSqrt().unaryExpr(
      [](double x) { return x > 0 ? 1 / x : 0.0; });
  const Eigen::MatrixXd scaled = scale.asDiagonal() * gram * scale.asDiagonal();
  Eigen::CompleteOrthogonalDecomposition<Eigen::MatrixXd> solver;
  solver.setThreshold(1e-8);
  solver.compute(scaled);
  const Eigen::VectorXd weight =
      scale.asDiagonal() * Eigen::VectorXd(solver.solve(scale.asDiagonal() * right));
  for (Eigen::Index a = 0; a < count; ++a)
    for (std::size_t k = 0; k < psi.values().size(); ++k)
      psi.values()[k] += weight(a) * basis[static_cast<std::size_t>(a)].values()[k];
}

void FlowSolver::remember(const CornerField& psi) {
  former_.push_front(psi);
  if (former_.size() > static_cast<std::size_t>(settings_.memory)) former_.pop_back();
}

void FlowSolver::save(Archive& archive) const {
  archive.numbers["flow.former"] = static_cast<double>(former_.size());
  for (std::size_t n = 0; n < former_.size(); ++n)
    archive.corners["flow.former." + std::to_string(n)] = former_[n];
  if (factor_.ready()) archive.cells["flow.factor_viscosity"] = factor_.viscosity();
  archive.cells["flow.viscosity"] = power_.viscosity();
  archive.numbers["flow.applications"] = static_cast<double>(applications_);
  archive.numbers["flow.factorisations"] = static_cast<double>(factorisations_);
  archive.numbers["flow.spent"] = spent_;
  archive.numbers["flow.last_cost"] = last_cost_;
  archive.numbers["flow.error"] = error_;
  archive.numbers["flow.solves"] = static_cast<double>(solves_);
}

void FlowSolver::restore(const Archive& archive) {
  former_.clear();
  const auto count = static_cast<std::size_t>(archive.numbers.at("flow.former"));
  for (std::size_t n = 0; n < count; ++n)
    former_.push_back(archive.corners.at("flow.former." + std::to_string(n)));
  if (const auto eta = archive.cells.find("flow.factor_viscosity"); eta != archive.cells.end()) {
    power_.set_viscosity(eta->second);
    factor_.factorise(power_);
  }
  power_.set_viscosity(archive.cells.at("flow.viscosity"));
  applications_ = static_cast<long>(archive.numbers.at("flow.applications"));
  factorisations_ = static_cast<long>(archive.numbers.at("flow.factorisations"));
  spent_ = archive.numbers.at("flow.spent");
  last_cost_ = archive.numbers.at("flow.last_cost");
  error_ = archive.numbers.at("flow.error");
  solves_ = static_cast<long>(archive.numbers.at("flow.solves"));
}

}  // namespace lidwright
