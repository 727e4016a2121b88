#pragma once

#include <petscksp.h>

#include <functional>

#include "solver/factor.hpp"

namespace lidwright {

/// A vector of unknown psi (global, corners), values unset.
Handle<Vec, VecDestroy> unknown_vector(const Decomposition&);
double dot(Vec, Vec);

/// Conjugate gradients on unknown psi, preconditioned by a factor. Norms are sqrt(r . M^-1 r): the
/// velocity error in the dissipation norm, as far as the factor's M is the operator.
class ConjugateGradients {
 public:
  using Operator = std::function<void(Vec x, Vec y)>;

  /// Both must outlive this.
  ConjugateGradients(const Decomposition&, Operator, Factor&);
  ConjugateGradients(const ConjugateGradients&) = delete;
  ConjugateGradients& operator=(const ConjugateGradients&) = delete;

  /// At the larger of `relative` times the first norm and `absolute`.
  struct Stop {
    double relative;
    double absolute;
    int most_iterations;
  };
  struct [[nodiscard]] Report {
    bool converged;
    int iterations;
    double first_norm, norm;
  };
  /// From the x given. Collective.
  Report solve(Vec f, Vec x, const Stop&);

  long applications() const { return applications_; }  ///< of the factor, so far
  void set_applications(long n) { applications_ = n; }

 private:
  static PetscErrorCode operator_callback(Mat, Vec, Vec);
  static PetscErrorCode factor_callback(PC, Vec, Vec);
  static PetscErrorCode convergence_callback(KSP, PetscInt, PetscReal, KSPConvergedReason*, void*);

  Operator apply_;
  Factor& factor_;
  Handle<Mat, MatDestroy> operator_;
  Handle<KSP, KSPDestroy> ksp_;
  long applications_ = 0;
  Stop stop_{};
  double first_norm_ = 0, norm_ = 0;
};

}  // namespace lidwright
