#include <gtest/gtest.h>
#include <petscsys.h>

#include <cstdio>
#include <stdexcept>

#ifdef __SANITIZE_ADDRESS__
#include <sanitizer/lsan_interface.h>
#endif

/// The main function of every test program: MPI and PETSc live as long as the tests run.
namespace {

/// Leaks of the MPI library's start are not ours; those of the tests are, and are looked for before
/// its end.
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

class Session {
 public:
  Session(int& argc, char**& argv) {
    watch_leaks(false);
    const PetscErrorCode code = PetscInitialize(&argc, &argv, nullptr, nullptr);
    watch_leaks(true);
    if (code != 0) throw std::runtime_error("PETSc did not start");
    PetscPopSignalHandler();  // a crash belongs to the debugger and to ctest
    MPI_Comm_rank(PETSC_COMM_WORLD, &rank_);
  }
  Session(const Session&) = delete;
  Session& operator=(const Session&) = delete;
  ~Session() {
    report_leaks();
    PetscFinalize();
  }
  int rank() const { return rank_; }

 private:
  int rank_ = 0;
};

/// Says what failed on a rank other than 0, and nothing else.
class FailuresOfRank : public testing::EmptyTestEventListener {
 public:
  explicit FailuresOfRank(int rank) : rank_(rank) {}

 private:
  void OnTestPartResult(const testing::TestPartResult& result) override {
    if (!result.failed()) return;
    const char* file = result.file_name() ? result.file_name() : "unknown file";
    std::fprintf(stderr, "rank %d: %s:%d: %s\n", rank_, file, result.line_number(),
                 result.message());
  }

  int rank_;
};

int run_tests(int rank) {
  auto& listeners = testing::UnitTest::GetInstance()->listeners();
  if (rank != 0) {
    delete listeners.Release(listeners.default_result_printer());
    listeners.Append(new FailuresOfRank(rank));  // GoogleTest owns it
  }
  return RUN_ALL_TESTS();
}

}  // namespace

int main(int argc, char** argv) {
  testing::InitGoogleTest(&argc, argv);
  if (GTEST_FLAG_GET(list_tests)) return RUN_ALL_TESTS();
  const Session session(argc, argv);
  return run_tests(session.rank());
}
