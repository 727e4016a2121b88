#pragma once

#include <mpi.h>

namespace lidwright {

/// MPI and PETSc, from the start of a program to its end. Takes nothing from PETSc's option files
/// and environment, and leaves signals alone; failing PETSc calls return their code
/// (mesh/petsc.hpp) and print nothing.
class Session {
 public:
  Session(int argc, char** argv);
  ~Session();
  Session(const Session&) = delete;
  Session& operator=(const Session&) = delete;

  MPI_Comm comm() const { return MPI_COMM_WORLD; }
  int rank() const { return rank_; }
  bool first() const { return rank_ == 0; }

 private:
  int rank_ = 0;
};

}  // namespace lidwright
