#pragma once

#include <mpi.h>
#include <petscdmda.h>

#include <memory>
#include <vector>

#include "mesh/geometry.hpp"
#include "mesh/petsc.hpp"

/// The mesh shared out among the ranks: every rank owns whole radial columns, a contiguous range of
/// them. A column never crosses ranks, so radial profiles, pressure and radial recurrences need no
/// communication, and PETSc's global numbering is the natural one (radial index fastest) on any
/// number of ranks.
namespace lidwright {

class Decomposition {
 public:
  static constexpr int ghosts = 2;         ///< columns of neighbours held on either side
  static constexpr int least_columns = 4;  ///< per rank

  /// Collective. Throws std::invalid_argument on all ranks when a rank would get too few columns.
  Decomposition(std::shared_ptr<const Geometry>, MPI_Comm);

  MPI_Comm comm() const { return comm_; }
  int rank() const { return rank_; }
  int ranks() const { return ranks_; }
  const Geometry& geometry() const { return *geometry_; }
  std::shared_ptr<const Geometry> geometry_pointer() const { return geometry_; }

  /// Owned columns at a location (lateral faces as corners, radial faces as cells).
  Range owned(At) const;
  /// Owned columns and those of the neighbours that are held (indices run past [0, n) when
  /// periodic).
  Range held(At) const;
  int rows(At at) const {
    return geometry_->radial_cells() + (at == At::Corner || at == At::RadialFace ? 1 : 0);
  }
  /// PETSc's description of cells or corners; its global vectors have one number a place.
  DM dm(At) const;

  double sum(double) const;  ///< over ranks, same result on all
  double max(double) const;
  double min(double) const;
  void sum_in_place(std::vector<double>&) const;

 private:
  std::shared_ptr<const Geometry> geometry_;
  MPI_Comm comm_;
  int rank_ = 0, ranks_ = 1;
  Handle<DM, DMDestroy> cells_, corners_;
};

}  // namespace lidwright
