#pragma once

#include <cstdint>

#include "mesh/location.hpp"

namespace lidwright {

/// A number in [-1, 1] that looks random and depends on its place and stream only (SplitMix64:
/// Steele, Lea & Flood 2014, OOPSLA).
inline double random_at(int i, int j, std::uint64_t stream) {
  std::uint64_t z = (static_cast<std::uint64_t>(i) * 1000003u + static_cast<std::uint64_t>(j)) *
                        0x9E3779B97F4A7C15ULL +
                    (stream + 1) * 0xD1342543DE82EF95ULL;
  z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9ULL;
  z = (z ^ (z >> 27)) * 0x94D049BB133111EBULL;
  z ^= z >> 31;
  return static_cast<double>(z >> 11) * 0x1p-52 - 1;
}

/// A random stream function, defined everywhere (not repeated on a full circle).
struct RandomPsi {
  std::uint64_t stream = 1;
  double operator[](Corner k) const { return random_at(k.i + 50, k.j + 50, stream); }
};

}  // namespace lidwright
