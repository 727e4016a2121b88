#include "app/peak_memory.hpp"

#include <sys/resource.h>

namespace lidwright {

PeakMemory peak_memory(MPI_Comm comm) {
  rusage use{};
  getrusage(RUSAGE_SELF, &use);
  const double mine = 1024.0 * static_cast<double>(use.ru_maxrss);
  PeakMemory peak;
  MPI_Allreduce(&mine, &peak.all_ranks, 1, MPI_DOUBLE, MPI_SUM, comm);
  MPI_Allreduce(&mine, &peak.largest, 1, MPI_DOUBLE, MPI_MAX, comm);
  return peak;
}

}  // namespace lidwright
