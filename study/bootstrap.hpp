#pragma once

#include <cstddef>
#include <cstdint>
#include <random>
#include <vector>

/// Resampling of correlated records with equal steps.
namespace lidwright {

/// Circular block bootstrap (H. R. Kuensch 1989, Ann. Statist. 17, 1217-1241; D. N. Politis & J. P.
/// Romano 1992, in Exploring the limits of bootstrap, 263-270; from memory): a resample is made of
/// blocks of consecutive rows that begin anywhere; after the last row comes the first. Resample
/// several series by the same rows, and what they have in common stays. The same seed gives the
/// same rows everywhere.
class BlockBootstrap {
 public:
  /// rows >= 1, 1 <= block <= rows.
  BlockBootstrap(std::size_t rows, std::size_t block, std::uint64_t seed)
      : rows_(rows), block_(block), random_(seed) {}

  /// Numbers of the rows of the next resample, as many as there are rows.
  std::vector<std::size_t> draw();

 private:
  std::size_t rows_, block_;
  std::mt19937_64 random_;
};

/// The length of blocks for a record of this correlation time and period (nan: none), all in steps:
/// five correlation times, so that what is lost between blocks is a tenth or so of the variance,
/// and a whole period; at most a fifth of the record (common practice, no source).
std::size_t block_length(std::size_t rows, double correlation_time, double period);

}  // namespace lidwright
