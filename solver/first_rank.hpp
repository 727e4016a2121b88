#pragma once

#include <mpi.h>

#include <new>
#include <stdexcept>
#include <string>

#include "solver/solve_error.hpp"

/// Work that only the first rank does.
namespace lidwright {

/// Runs `action` on the first rank. What it throws is thrown on all ranks: SolveError as such, lack
/// of memory as a SolveError, anything else as std::runtime_error. Collective.
template <class Action>
void on_first_rank_or_throw(MPI_Comm comm, const char* no_memory, Action&& action) {
  enum Outcome : int { Fine, NotSolved, Fault };
  int rank = 0, outcome = Fine;
  MPI_Comm_rank(comm, &rank);
  std::string message;
  const auto failed = [&](Outcome how, const char* what) {
    outcome = how;
    message = what;
  };
  if (rank == 0) {
    try {
      action();
    } catch (const SolveError& e) {
      failed(NotSolved, e.what());
    } catch (const std::bad_alloc&) {
      failed(NotSolved, no_memory);
    } catch (const std::exception& e) {
      failed(Fault, e.what());
    }
  }
  MPI_Bcast(&outcome, 1, MPI_INT, 0, comm);
  if (outcome == Fine) return;
  unsigned long length = message.size();
  MPI_Bcast(&length, 1, MPI_UNSIGNED_LONG, 0, comm);
  message.resize(length);
  MPI_Bcast(message.data(), static_cast<int>(length), MPI_CHAR, 0, comm);
  if (outcome == NotSolved) throw SolveError(message);
  throw std::runtime_error(message);
}

}  // namespace lidwright
