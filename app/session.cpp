#include "app/session.hpp"

#include <petscsys.h>

#include <csignal>
#include <cstdlib>

#include "mesh/petsc.hpp"

namespace lidwright {
namespace {

volatile std::sig_atomic_t asked_to_stop = 0;

void ask_to_stop(int signal) {
  if (asked_to_stop) {
    std::signal(signal, SIG_DFL);
    std::raise(signal);
  }
  asked_to_stop = 1;
}

}  // namespace

Session::Session(int argc, char** argv) {
  MPI_Init(&argc, &argv);
  unsetenv("PETSC_OPTIONS");
  PetscOptionsSetValue(nullptr, "-skip_petscrc", nullptr);
  PetscOptionsSetValue(nullptr, "-no_signal_handler", nullptr);
  check(PetscInitializeNoArguments());
  check(PetscPushErrorHandler(PetscReturnErrorHandler, nullptr));
}

Session::~Session() {
  PetscFinalize();
  MPI_Finalize();
}

MPI_Comm Session::comm() const { return MPI_COMM_WORLD; }

bool Session::first() const {
  int rank = 0;
  MPI_Comm_rank(comm(), &rank);
  return rank == 0;
}

void catch_stop_signals() {
  std::signal(SIGINT, ask_to_stop);
  std::signal(SIGTERM, ask_to_stop);
}

bool stop_requested(MPI_Comm comm) {
  int mine = asked_to_stop, any = 0;
  MPI_Allreduce(&mine, &any, 1, MPI_INT, MPI_MAX, comm);
  return any != 0;
}

}  // namespace lidwright
