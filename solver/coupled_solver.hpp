#pragma once

#include <petscksp.h>

#include <memory>

#include "mesh/petsc.hpp"
#include "solver/linearised.hpp"

/// Linear systems of the steady equations, both fields together, on one rank:
///     [ K   F              ] [ psi ]   [ r_flow ]
///     [ C   A + M/dt       ] [  T  ] = [ r_heat ]
/// by GMRES. Where memory allows, the preconditioner is a sparse LU factor of the whole (MUMPS) at
/// this or an earlier state; beyond, the heat block's own factor followed by the flow's.
namespace lidwright {

struct LinearReport {
  int iterations = 0;
  double residual = 0;  ///< relative, in the Euclidean norm
};

class CoupledSolver {
 public:
  explicit CoupledSolver(LinearSolver kind);
  ~CoupledSolver();
  CoupledSolver(const CoupledSolver&) = delete;
  CoupledSolver& operator=(const CoupledSolver&) = delete;

  /// The matrix of the next solves; `shift` is 1/dt, 0 for none.
  void set_matrix(const Linearised&, double shift);
  /// Adds rate * (M v)(M v)^T, with v . M v = 1, to the heat block of the next solves (an empty v:
  /// nothing). Where the pattern may turn round a full circle or slide along a periodic box, v is
  /// that turning: the matrix alone is singular then, and the sum picks the state that does not
  /// turn.
  void hold(const Eigen::VectorXd& v, double rate);
  /// Makes the next solve factorise anew, whatever the old factor would do.
  void drop_factor() { ready_ = false; }
  /// x with |b - A x| <= tolerance |b|, or what round-off leaves of it: the report says. Throws
  /// SolveError when even a new factor does not reach 1e-2.
  LinearReport solve(const Eigen::VectorXd& b, double tolerance, Eigen::VectorXd& x);

  /// y = A x.
  Eigen::VectorXd multiply(const Eigen::VectorXd& x) const;

 private:
  struct Preconditioner;
  struct WholeFactor;
  struct BlockFactors;
  void choose_preconditioner();
  void factorise();
  static PetscErrorCode multiply_callback(Mat, Vec, Vec);
  static PetscErrorCode precondition_callback(PC, Vec, Vec);
  int iterate(const Eigen::VectorXd& b, double tolerance, Eigen::VectorXd& x);

  LinearSolver kind_;   ///< Automatic until the first factorisation
  bool ready_ = false;  ///< is the factor fit to be tried
  long flow_ = 0;
  SparseMatrix matrix_;
  Eigen::VectorXd capacity_;
  Eigen::VectorXd held_;  ///< M v
  double hold_rate_ = 0;
  std::unique_ptr<Preconditioner> factor_;
  Handle<Mat, MatDestroy> operator_;
  Handle<KSP, KSPDestroy> ksp_;
};

}  // namespace lidwright
