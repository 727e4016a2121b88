#pragma once

#include <memory>
#include <vector>

#include "solver/power.hpp"

/// Sparse Cholesky factor of K = G^T W G at one viscosity, the lagged preconditioner of the flow.
///
/// It lives on rank 0 whatever the number of ranks: residuals are gathered, solved and scattered.
/// A solve there is faster than a distributed one at the sizes that fit a node, and the
/// preconditioner, so the number of iterations, is the same on any number of ranks
/// (docs/decisions/factor-on-one-rank.md).
namespace lidwright {

class Factor {
 public:
  /// Collective. Analyses the pattern once (on rank 0).
  explicit Factor(const Power& shape);
  ~Factor();
  Factor(const Factor&) = delete;
  Factor& operator=(const Factor&) = delete;

  /// Collective. Factorises K for the viscosity of `power`. Throws SolveError on all ranks
  /// when K is not positive definite to working precision.
  void factorise(const Power& power);
  /// z = M^-1 r on global corner vectors. Collective.
  void apply(Vec r, Vec z);

  /// Viscosity at the last factorisation.
  const ViscosityField& viscosity() const { return viscosity_; }
  bool ready() const { return !viscosity_.empty(); }
  /// Bytes of the factor as stored (with the zeros that make its columns into dense blocks), on
  /// rank 0.
  double stored_bytes() const;
  /// Wall time spent so far in `factorise` and in `apply`, s. For measurements; nothing depends on
  /// it.
  double seconds_factorising() const { return seconds_factorising_; }
  double seconds_applying() const { return seconds_applying_; }

 private:
  struct Impl;
  std::shared_ptr<const Decomposition> decomposition_;
  std::unique_ptr<Impl> impl_;  ///< rank 0 only
  ViscosityField viscosity_;
  double seconds_factorising_ = 0, seconds_applying_ = 0;
};

}  // namespace lidwright
