#include "mesh/gather.hpp"

#include <algorithm>

namespace lidwright {
namespace {

struct Parts {
  std::vector<int> sizes, starts;
  std::size_t total = 0;
};

/// Sizes and starts of the ranks' parts, on all ranks.
Parts parts_of_ranks(const Decomposition& d, std::size_t size) {
  Parts p;
  p.sizes.resize(static_cast<std::size_t>(d.ranks()));
  const int mine = static_cast<int>(size);
  MPI_Allgather(&mine, 1, MPI_INT, p.sizes.data(), 1, MPI_INT, d.comm());
  for (const int n : p.sizes) {
    p.starts.push_back(static_cast<int>(p.total));
    p.total += static_cast<std::size_t>(n);
  }
  return p;
}

}  // namespace

std::vector<double> gather_to_first(const Decomposition& d, const double* part, std::size_t size) {
  if (d.ranks() == 1) return {part, part + size};
  const Parts p = parts_of_ranks(d, size);
  std::vector<double> whole(d.rank() == 0 ? p.total : 0);
  MPI_Gatherv(part, static_cast<int>(size), MPI_DOUBLE, whole.data(), p.sizes.data(),
              p.starts.data(), MPI_DOUBLE, 0, d.comm());
  return whole;
}

void scatter_from_first(const Decomposition& d, const std::vector<double>& whole, double* part,
                        std::size_t size) {
  if (d.ranks() == 1) {
    std::copy_n(whole.data(), size, part);
    return;
  }
  const Parts p = parts_of_ranks(d, size);
  MPI_Scatterv(whole.data(), p.sizes.data(), p.starts.data(), MPI_DOUBLE, part,
               static_cast<int>(size), MPI_DOUBLE, 0, d.comm());
}

}  // namespace lidwright
