#pragma once

#include <string>

#include "study/benchmark.hpp"

/// benchmark.toml: what a benchmark is and how it is run. Keys: docs/verify.md.
namespace lidwright {

struct BenchmarkFile {
  std::string title, reference;
  How how = How::Settle;
  int grids = 3;
  bool quick = false;
  int cycles = 9;
  Forcing forcing;
};

/// Throws InputError.
BenchmarkFile read_benchmark_file(const std::string& path);

/// Applies a setting "forcing.KEY=VALUE"; false: it is none of the forcing's. Throws InputError,
/// with `place`.
bool set_forcing(Forcing&, const std::string& setting, const std::string& place);

}  // namespace lidwright
