#include "solver/conjugate_gradients.hpp"

#include <cmath>
#include <limits>

namespace lidwright {

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

ConjugateGradients::ConjugateGradients(const Decomposition& d, Operator apply, Factor& factor)
    : apply_(std::move(apply)), factor_(factor) {
  const Handle<Vec, VecDestroy> shape = unknown_vector(d);
  PetscInt local = 0, global = 0;
  check(VecGetLocalSize(shape, &local));
  check(VecGetSize(shape, &global));
  check(MatCreateShell(d.comm(), local, local, global, global, this, operator_.put()));
  check(
      MatShellSetOperation(operator_, MATOP_MULT, reinterpret_cast<void (*)()>(operator_callback)));
  check(KSPCreate(d.comm(), ksp_.put()));
  check(KSPSetOperators(ksp_, operator_, operator_));
  check(KSPSetType(ksp_, KSPCG));
  check(KSPSetNormType(ksp_, KSP_NORM_NATURAL));
  check(KSPSetInitialGuessNonzero(ksp_, PETSC_TRUE));
  check(KSPSetConvergenceTest(ksp_, convergence_callback, this, nullptr));
  PC pc = nullptr;
  check(KSPGetPC(ksp_, &pc));
  check(PCSetType(pc, PCSHELL));
  check(PCShellSetContext(pc, this));
  check(PCShellSetApply(pc, factor_callback));
}

PetscErrorCode ConjugateGradients::operator_callback(Mat a, Vec x, Vec y) {
  ConjugateGradients* self = nullptr;
  PetscCall(MatShellGetContext(a, &self));
  self->apply_(x, y);
  return 0;
}

PetscErrorCode ConjugateGradients::factor_callback(PC pc, Vec r, Vec z) {
  ConjugateGradients* self = nullptr;
  PetscCall(PCShellGetContext(pc, &self));
  self->factor_.apply(r, z);
  ++self->applications_;
  return 0;
}

PetscErrorCode ConjugateGradients::convergence_callback(KSP, PetscInt n, PetscReal norm,
                                                        KSPConvergedReason* reason, void* context) {
  ConjugateGradients* self = static_cast<ConjugateGradients*>(context);
  if (n == 0) self->first_norm_ = norm;
  self->norm_ = norm;
  *reason = KSP_CONVERGED_ITERATING;
  if (!std::isfinite(norm))
    *reason = KSP_DIVERGED_NANORINF;
  else if (norm <= std::max(self->stop_.relative * self->first_norm_, self->stop_.absolute))
    *reason = KSP_CONVERGED_RTOL;
  else if (n >= self->stop_.most_iterations)
    *reason = KSP_DIVERGED_ITS;
  return 0;
}

ConjugateGradients::Report ConjugateGradients::solve(Vec f, Vec x, const Stop& stop) {
  stop_ = stop;
  first_norm_ = norm_ = std::numeric_limits<double>::quiet_NaN();  // should PETSc give up before us
  // Our own test decides; PETSc's limit only has to be out of its way.
  check(KSPSetTolerances(ksp_, PETSC_DEFAULT, PETSC_DEFAULT, PETSC_DEFAULT,
                         stop.most_iterations + 1));
  check(KSPSolve(ksp_, f, x));
  KSPConvergedReason reason = KSP_CONVERGED_ITERATING;
  PetscInt iterations = 0;
  check(KSPGetConvergedReason(ksp_, &reason));
  check(KSPGetIterationNumber(ksp_, &iterations));
  return {reason > 0, static_cast<int>(iterations), first_norm_, norm_};
}

}  // namespace lidwright
