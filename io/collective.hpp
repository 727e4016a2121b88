#pragma once

#include <mpi.h>

#include <exception>
#include <string>
#include <utility>
#include <vector>

/// What goes wrong on one rank is thrown on all of them: no rank waits for one that has given up.
namespace lidwright {

/// The message of the first rank that has one (not empty), on all ranks; empty when none has.
/// Collective.
std::string agreed_message(MPI_Comm, const std::string& mine);

/// Throws `Error` on all ranks when any rank has a message. Collective.
template <class Error>
void agree(MPI_Comm comm, const std::string& mine) {
  const std::string message = agreed_message(comm, mine);
  if (!message.empty()) throw Error(message);
}

/// Runs `action` on every rank; an exception on any becomes `Error` on all. Collective; `action`
/// itself may not communicate, since it may fail on one rank only.
template <class Error, class Action>
void on_all_ranks(MPI_Comm comm, Action&& action) {
  std::string message;
  try {
    std::forward<Action>(action)();
  } catch (const std::exception& e) {
    message = *e.what() ? e.what() : "unknown error";
  }
  agree<Error>(comm, message);
}

/// The same, but only the first rank acts.
template <class Error, class Action>
void on_first_rank(MPI_Comm comm, Action&& action) {
  int rank = 0;
  MPI_Comm_rank(comm, &rank);
  on_all_ranks<Error>(comm, [&] {
    if (rank == 0) action();
  });
}

/// The first rank's value on all ranks. Collective.
void broadcast(MPI_Comm, std::string&);
void broadcast(MPI_Comm, std::vector<double>&);

}  // namespace lidwright
