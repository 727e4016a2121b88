#pragma once

#include <cstddef>
#include <vector>

/// Substitution with a supernodal Cholesky factor L as CHOLMOD stores it, for one right-hand side.
///
/// A supernode is a run of columns with the same rows below the diagonal, held as one dense
/// column-major block: its diagonal part first, then the rows below. Substitution streams the
/// factor from memory twice, once down and once up. The library's own does so through BLAS, one
/// small call a block; this one runs at 1.5 to 1.8 times its speed, because it takes four columns
/// at a time and asks for the columns to come before it needs them (docs/performance.md).
namespace lidwright {

/// A view of the factor; CHOLMOD's names in brackets.
struct Supernodes {
  std::size_t count = 0;               ///< [nsuper]
  const long* first_column = nullptr;  ///< of each, and one more [super]
  const long* row_start = nullptr;     ///< into row, of each, and one more [pi]
  const long* value_start = nullptr;   ///< into value, of each, and one more [px]
  const long* row = nullptr;           ///< rows of each block, its own columns first [s]
  const double* value = nullptr;       ///< [x]
};

class Substitution {
 public:
  explicit Substitution(const Supernodes& l) : l_(l) {}
  /// x = (L L^T)^-1 x, in the factor's order.
  void solve(double* x);

 private:
  void down(std::size_t supernode, double* x);
  void up(std::size_t supernode, double* x);

  Supernodes l_;
  std::vector<double>
      below_;  ///< of one supernode: the part of x, or what to take from it, in the rows below
};

}  // namespace lidwright
