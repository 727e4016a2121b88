#pragma once

#include <mpi.h>

namespace lidwright {

/// Largest resident memory so far, bytes.
struct PeakMemory {
  double all_ranks = 0, largest = 0;
};
/// Of all ranks together and of the one that has most; 0 where the system does not say. Collective.
PeakMemory peak_memory(MPI_Comm);

}  // namespace lidwright
