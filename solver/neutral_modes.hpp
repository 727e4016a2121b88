#pragma once

#include <Eigen/SparseCore>
#include <vector>

/// Disturbances of a state of rest that neither grow nor decay:
///     K psi = -Ra F theta,    A theta = -C psi,
/// so psi = Ra B psi with B = K^-1 F A^-1 C: the neutral Ra are the inverses of the real positive
/// eigenvalues of B, which is not symmetric. Largest eigenvalues by the Krylov-Schur method
/// (Stewart 2001, SIAM J. Matrix Anal. Appl. 23, 601; SLEPc).
namespace lidwright {

using SparseBlock = Eigen::SparseMatrix<double, Eigen::ColMajor, long>;

/// Derivatives of the residuals of flow and heat about a state of rest, at Ra = 1. K and A are
/// symmetric and positive definite.
struct RestBlocks {
  SparseBlock flow_by_psi;          ///< K
  SparseBlock flow_by_temperature;  ///< F, per Ra
  SparseBlock heat_by_psi;          ///< C
  SparseBlock heat_by_temperature;  ///< A
};

struct NeutralMode {
  double rayleigh = 0;              ///< > 0
  std::vector<double> psi;          ///< of the unknowns, in arbitrary scale
  std::vector<double> temperature;  ///< in the same scale
};

/// At most `count` neutral modes, the least Ra first; none when no Ra > 0 is neutral. On one rank,
/// without communication. Throws SolveError when K or A cannot be factorised or the iteration does
/// not converge.
std::vector<NeutralMode> neutral_modes(const RestBlocks&, int count);

}  // namespace lidwright
