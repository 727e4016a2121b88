#pragma once

#include <mpi.h>

namespace lidwright {

/// SIGINT and SIGTERM set a flag instead of ending the program; a second one ends it at once.
void catch_stop_signals();
/// Has any rank been asked to stop? Collective.
bool stop_requested(MPI_Comm);

}  // namespace lidwright
