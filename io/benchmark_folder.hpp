#pragma once

#include <string>
#include <vector>

#include "study/benchmark.hpp"

/// Benchmarks as folders NAME/{benchmark.toml, case.toml, expected.csv, README.md}: docs/verify.md.
namespace lidwright {

/// How much of the benchmarks is wanted.
enum class Rows { Quick, All };

/// A line of `verify --list`.
struct BenchmarkHead {
  std::string name, title, reference;
  int quick_values = 0, values = 0;  ///< rows of expected.csv
};

/// Names of the folders in `folder` that hold a benchmark.toml, sorted. Throws InputError when
/// there are none.
std::vector<std::string> benchmark_names(const std::string& folder);

/// " (did you mean 'x'?)" with the name that is spelt most alike, or "".
std::string nearest_name(const std::string& name, const std::vector<std::string>& known);

BenchmarkHead read_benchmark_head(const std::string& folder, const std::string& name);

/// Every case, value and name in it is checked. With Rows::Quick only rows marked quick. Throws
/// InputError.
Benchmark read_benchmark(const std::string& folder, const std::string& name, Rows);

}  // namespace lidwright
