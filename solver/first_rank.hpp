#pragma once

#include <mpi.h>

#include <new>
#include <stdexcept>
#include <string>

#include "solver/solve_error.hpp"

/// Work that only the first rank does.
namespace lidwright {

/// Runs `action` on the first rank; a SolveError or lack of memory there is thrown on all ranks as
/// a SolveError. Collective.
template <class Action>
void on_first_rank_or_throw(MPI_Comm comm, const char* no_memory, Action&& action) {
  int rank = 0;
  MPI_Comm_rank(comm, &rank);
  std::string message;
  if (rank == 0) {
    try {
      action();
    } catch (const std::bad_alloc&) {
      message = no_memory;
    } catch (const std::exception& e) {
      message = e.what();
    }
  }
  unsigned long length = message.size();
  MPI_Bcast(&length, 1, MPI_UNSIGNED_LONG, 0, comm);
  message.resize(length);
  MPI_Bcast(message.data(), static_cast<int>(length), MPI_CHAR, 0, comm);
  if (!message.empty()) throw SolveError(message);
}

}  // namespace lidwright
