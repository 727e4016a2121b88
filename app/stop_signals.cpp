#include "app/stop_signals.hpp"

#include <csignal>

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
