#include <gtest/gtest.h>

#include <cstdio>

#include "mesh/session.hpp"

/// The main function of every test program: MPI and PETSc live as long as the tests run.
namespace {

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
  const lidwright::Session session(argc, argv);
  return run_tests(session.rank());
}
