#pragma once

#include <stdexcept>

namespace lidwright {

/// Numerics that failed, with place and remedy. `what()` is the whole message; thrown on all ranks.
struct SolveError : std::runtime_error {
  using std::runtime_error::runtime_error;
};

}  // namespace lidwright
