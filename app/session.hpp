#pragma once

#include <mpi.h>

/// MPI and PETSc from start to end of the program, and the signals that ask it to stop.
namespace lidwright {

class Session {
 public:
  /// Starts MPI and PETSc; takes nothing from PETSc's option files, environment or signal handlers.
  Session(int argc, char** argv);
  ~Session();
  Session(const Session&) = delete;
  Session& operator=(const Session&) = delete;

  MPI_Comm comm() const;
  bool first() const;
};

/// SIGINT and SIGTERM set a flag instead of ending the program; a second one ends it at once.
void catch_stop_signals();
/// Has any rank been asked to stop? Collective.
bool stop_requested(MPI_Comm);

}  // namespace lidwright
