#pragma once

#include <cmath>

namespace lidwright {

/// Order of convergence seen between two grids, the finer one with half the spacing. Judge the
/// finest pair, not a mean over pairs.
inline double observed_order(double coarse_error, double fine_error) {
  return std::log2(coarse_error / fine_error);
}

/// Limit of a second-order quantity from two grids, the finer one with half the spacing.
inline double richardson(double coarse, double fine) { return fine + (fine - coarse) / 3; }

}  // namespace lidwright
