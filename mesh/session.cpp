#include "mesh/session.hpp"

#include <petscsys.h>

#include <cstdlib>

#include "mesh/petsc.hpp"

#ifdef __SANITIZE_ADDRESS__
#include <sanitizer/lsan_interface.h>
#endif

namespace lidwright {
namespace {

/// Leaks of the MPI library's start are not ours; what leaks later is, and is looked for before MPI
/// ends.
void watch_leaks([[maybe_unused]] bool on) {
#ifdef __SANITIZE_ADDRESS__
  on ? __lsan_enable() : __lsan_disable();
#endif
}

void report_leaks() {
#ifdef __SANITIZE_ADDRESS__
  __lsan_do_leak_check();
#endif
}

}  // namespace

Session::Session(int argc, char** argv) {
  watch_leaks(false);
  MPI_Init(&argc, &argv);
  MPI_Comm_rank(MPI_COMM_WORLD, &rank_);
  unsetenv("PETSC_OPTIONS");
  PetscOptionsSetValue(nullptr, "-skip_petscrc", nullptr);
  PetscOptionsSetValue(nullptr, "-no_signal_handler", nullptr);
  check(PetscInitializeNoArguments());
  check(PetscPushErrorHandler(PetscReturnErrorHandler, nullptr));
  watch_leaks(true);
}

Session::~Session() {
  report_leaks();
  PetscFinalize();
  MPI_Finalize();
}

}  // namespace lidwright
