#pragma once

#include <vector>

#include "mesh/field.hpp"

/// Whole fields on rank 0. As every rank owns a contiguous range of columns, the ranks' parts in
/// order are the field in natural order.
namespace lidwright {

/// Concatenates the ranks' parts on rank 0 (empty elsewhere). Collective.
std::vector<double> gather_to_first(const Decomposition&, const double* part, std::size_t size);
/// The reverse: each rank receives `size` numbers in rank order. Collective.
void scatter_from_first(const Decomposition&, const std::vector<double>& whole, double* part,
                        std::size_t size);

template <At at>
std::vector<double> gather_to_first(const Field<at>& f) {
  return gather_to_first(f.decomposition(), f.owned_data(), f.owned_size());
}
/// Also brings ghosts up to date.
template <At at>
void scatter_from_first(const std::vector<double>& whole, Field<at>& f) {
  scatter_from_first(f.decomposition(), whole, f.owned_data(), f.owned_size());
  f.exchange();
}

}  // namespace lidwright
