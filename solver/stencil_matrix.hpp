#pragma once

#include <array>
#include <vector>

#include "solver/power.hpp"

/// K = G^T W G of a whole mesh as a sparse matrix, for its factorisation only. One unknown a free
/// corner, and one for the common value on the outer wall when there is a through-flow.
namespace lidwright {

/// Lower triangle, compressed by columns, rows sorted.
struct SparseLower {
  long size = 0;
  std::vector<long> column_start, row;
  std::vector<double> value;
};

class StencilMatrix {
 public:
  /// `serial`: the functional of the whole mesh, on one rank.
  explicit StencilMatrix(const Power& serial);

  const SparseLower& matrix() const { return matrix_; }
  /// Sets the values for the viscosity of `serial`.
  void assemble(const Power& serial);

  long unknowns() const { return matrix_.size; }
  /// Unknown of a place in natural order (radial index fastest), -1 where psi is fixed.
  const std::vector<long>& unknown_of_place() const { return unknown_; }

 private:
  struct Neighbour {
    int di, dj;
  };
  /// Half of the 13-point stencil.
  static constexpr std::array<Neighbour, 7> half_{
      {{0, 0}, {1, 0}, {2, 0}, {-1, 1}, {0, 1}, {1, 1}, {0, 2}}};

  struct Entry {  ///< one corner of a row of G
    Corner corner;
    double weight;
  };
  void add_row(const Entry* entries, int count, double weight);
  void add_pair(const Entry&, const Entry&, double weight);
  long unknown(Corner) const;
  long slot(Corner a, Corner b) const;
  void build_pattern(const Power&);

  int rows_ = 0, columns_ = 0;
  bool periodic_ = false;
  int common_row_ = -1;  ///< face row of the outer wall when psi is common there
  std::vector<long> unknown_;
  std::vector<std::array<long, 7>> stencil_slot_;  ///< per unknown: place in matrix_.value
  std::vector<long> common_slot_;  ///< per unknown: place of its coupling to the common value
  SparseLower matrix_;
};

}  // namespace lidwright
