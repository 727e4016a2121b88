#include "mesh/decomposition.hpp"

#include <stdexcept>
#include <string>

namespace lidwright {
namespace {

std::vector<PetscInt> columns_of_ranks(int columns, int ranks) {
  std::vector<PetscInt> share(static_cast<std::size_t>(ranks), columns / ranks);
  for (int r = 0; r < columns % ranks; ++r) ++share[static_cast<std::size_t>(r)];
  return share;
}

DM create_dm(MPI_Comm comm, bool periodic, int rows, std::vector<PetscInt> share) {
  DM dm = nullptr;
  PetscInt columns = 0;
  for (const PetscInt n : share) columns += n;
  const PetscInt all_rows = rows;
  check(DMDACreate2d(comm, DM_BOUNDARY_NONE, periodic ? DM_BOUNDARY_PERIODIC : DM_BOUNDARY_NONE,
                     DMDA_STENCIL_BOX, rows, columns, 1, static_cast<PetscInt>(share.size()), 1,
                     Decomposition::ghosts, &all_rows, share.data(), &dm));
  check(DMSetUp(dm));
  return dm;
}

}  // namespace

Decomposition::Decomposition(std::shared_ptr<const Geometry> geometry, MPI_Comm comm)
    : geometry_(std::move(geometry)), comm_(comm) {
  MPI_Comm_rank(comm, &rank_);
  MPI_Comm_size(comm, &ranks_);
  const int columns = geometry_->lateral_cells();
  if (columns / ranks_ < least_columns)
    throw std::invalid_argument(std::to_string(columns) + " lateral cells on " +
                                std::to_string(ranks_) + " ranks: each rank needs " +
                                std::to_string(least_columns) +
                                " or more; use fewer ranks or more lateral cells");
  std::vector<PetscInt> share = columns_of_ranks(columns, ranks_);
  cells_ = Handle<DM, DMDestroy>(
      create_dm(comm, geometry_->periodic(), geometry_->radial_cells(), share));
  if (!geometry_->periodic()) ++share.back();
  corners_ = Handle<DM, DMDestroy>(
      create_dm(comm, geometry_->periodic(), geometry_->radial_cells() + 1, share));
}

DM Decomposition::dm(At at) const {
  return at == At::Cell || at == At::RadialFace ? cells_ : corners_;
}

Range Decomposition::owned(At at) const {
  PetscInt first = 0, count = 0;
  check(DMDAGetCorners(dm(at), nullptr, &first, nullptr, nullptr, &count, nullptr));
  return {static_cast<int>(first), static_cast<int>(first + count)};
}

Range Decomposition::held(At at) const {
  PetscInt first = 0, count = 0;
  check(DMDAGetGhostCorners(dm(at), nullptr, &first, nullptr, nullptr, &count, nullptr));
  return {static_cast<int>(first), static_cast<int>(first + count)};
}

double Decomposition::sum(double x) const {
  double total = 0;
  MPI_Allreduce(&x, &total, 1, MPI_DOUBLE, MPI_SUM, comm_);
  return total;
}

double Decomposition::max(double x) const {
  double most = 0;
  MPI_Allreduce(&x, &most, 1, MPI_DOUBLE, MPI_MAX, comm_);
  return most;
}

double Decomposition::min(double x) const {
  double least = 0;
  MPI_Allreduce(&x, &least, 1, MPI_DOUBLE, MPI_MIN, comm_);
  return least;
}

void Decomposition::sum_in_place(std::vector<double>& x) const {
  MPI_Allreduce(MPI_IN_PLACE, x.data(), static_cast<int>(x.size()), MPI_DOUBLE, MPI_SUM, comm_);
}

}  // namespace lidwright
