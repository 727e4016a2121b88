#include "app/peak_memory.hpp"

#include <fstream>
#include <string>

namespace lidwright {
namespace {

/// The system's line for the process itself; what getrusage says begins with what started it.
double own_peak() {
  std::ifstream status("/proc/self/status");
  for (std::string line; std::getline(status, line);)
    if (line.starts_with("VmHWM:")) return 1024 * std::stod(line.substr(6));
  return 0;
}

}  // namespace

PeakMemory peak_memory(MPI_Comm comm) {
  const double mine = own_peak();
  PeakMemory peak;
  MPI_Allreduce(&mine, &peak.all_ranks, 1, MPI_DOUBLE, MPI_SUM, comm);
  MPI_Allreduce(&mine, &peak.largest, 1, MPI_DOUBLE, MPI_MAX, comm);
  return peak;
}

}  // namespace lidwright
