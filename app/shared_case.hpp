#pragma once

#include <mpi.h>

#include <stdexcept>
#include <string>
#include <vector>

#include "io/case_file.hpp"

namespace lidwright {

/// A case read on the first rank, so that all ranks see the same file; InputError on all ranks.
/// Collective.
Case shared_case(MPI_Comm, const std::string& path, const std::vector<std::string>& settings);

/// Runs `make`; what only shows when the mesh is made or the ranks share it is bad input.
template <class Make>
auto or_bad_input(Make&& make) {
  try {
    return make();
  } catch (const std::invalid_argument& e) {
    throw InputError(e.what());
  }
}

}  // namespace lidwright
