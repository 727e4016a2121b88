#pragma once

#include <string>
#include <vector>

#include "study/benchmark.hpp"

/// What `lidwright verify` shows: docs/verify.md says how to read it.
namespace lidwright {

/// The line over a benchmark's table, and the names of its columns.
std::string verify_head(const Benchmark&);
/// One line.
std::string verify_row(const Comparison&);
/// How many agree, how honest the bars are, how wide.
std::string verify_close(const Tally&, double seconds);

/// The same table for programs.
std::string verify_csv(const std::vector<Comparison>&);

/// A value with its uncertainty, as many digits as it deserves: "4.8844 +- 0.0025".
std::string with_uncertainty(double value, double half_width);

}  // namespace lidwright
