#include "io/run_folder.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "io/case_file.hpp"
#include "io/provenance.hpp"
#include "tests/io/scratch.hpp"

namespace lidwright {
namespace {

namespace fs = std::filesystem;
using test::message_of;
using testing::AllOf;
using testing::HasSubstr;

RunFolder create(const std::string& path, ExistingRun existing = ExistingRun::Refuse) {
  return RunFolder::create(MPI_COMM_WORLD, path, existing);
}

/// A finished run with one file of each kind and foreign ones among them.
void make_run(const std::string& path) {
  const RunFolder run = create(path);
  Provenance provenance(MPI_COMM_WORLD, run.paths().provenance(), 0);
  int rank = 0;
  MPI_Comm_rank(MPI_COMM_WORLD, &rank);
  for (const std::string name :
       {"case_as_read.toml", "summary.toml", "history.csv", "fields.pvd", "walls.pvd",
        "fields/fields_0000.pvts", "fields/fields_0000_piece_0.vts", "walls/walls_0000.csv",
        "walls/walls_0000.vtp", "profiles/profiles_0000.csv", "checkpoints/step_000000200.h5",
        "checkpoints/step_000000400.h5.partial", "notes.txt", "fields/picture.png",
        "checkpoints/step_1.h5.copy"})
    if (rank == 0) test::write_text(path + "/" + name, "x");
  MPI_Barrier(MPI_COMM_WORLD);
}

TEST(ParallelRunFolder, IsMadeWithItsParents) {
  const test::Scratch scratch;
  const RunFolder run = create(scratch / "a/b/run/");
  EXPECT_EQ(run.paths().history(), scratch / "a/b/run/history.csv");
  for (const std::string& sub : {run.paths().fields(), run.paths().walls(), run.paths().profiles(),
                                 run.paths().checkpoints()})
    EXPECT_TRUE(fs::is_directory(sub)) << sub;
}

TEST(ParallelRunFolder, ARunIsNotOverwrittenUnlessAsked) {
  const test::Scratch scratch;
  make_run(scratch / "run");
  EXPECT_THAT(message_of<InputError>([&] { create(scratch / "run"); }),
              AllOf(HasSubstr("holds a run already"), HasSubstr("--into"), HasSubstr("--resume")));
  EXPECT_TRUE(fs::exists(scratch / "run/history.csv"));
}

TEST(ParallelRunFolder, OverwritingRemovesOwnFilesOnly) {
  const test::Scratch scratch;
  make_run(scratch / "run");
  const RunFolder run = create(scratch / "run", ExistingRun::Overwrite);
  std::vector<std::string> left;
  for (const auto& entry : fs::recursive_directory_iterator(run.paths().folder))
    if (entry.is_regular_file()) left.push_back(entry.path().filename().string());
  EXPECT_THAT(left, testing::UnorderedElementsAre("notes.txt", "picture.png", "step_1.h5.copy"));
}

TEST(RunFolder, ForeignFilesWithOurNamesAreNeverOverwritten) {
  const test::Scratch scratch;
  test::write_text(scratch / "history.csv", "year,event\n");
  for (const ExistingRun existing : {ExistingRun::Refuse, ExistingRun::Overwrite})
    EXPECT_THAT(message_of<InputError>([&] { create(scratch.path(), existing); }),
                AllOf(HasSubstr("history.csv"), HasSubstr("--into")));
  EXPECT_EQ(test::entries(scratch.path()), 1);
}

TEST(RunFolder, AFolderWithForeignFilesIsUsed) {
  const test::Scratch scratch;
  test::write_text(scratch / "my_case.toml", "title = 'x'\n");
  EXPECT_NO_THROW(create(scratch.path()));
}

TEST(RunFolder, AFileInItsPlaceIsRefused) {
  const test::Scratch scratch;
  test::write_text(scratch / "run", "x");
  EXPECT_THAT(message_of<InputError>([&] { create(scratch / "run"); }),
              HasSubstr("is not a folder"));
}

TEST(ParallelRunFolder, NothingIsLeftWhenTheParentCannotBeWritten) {
  const test::Scratch scratch;
  EXPECT_THAT(message_of<OutputError>([] { create("/proc/lidwright/run"); }),
              HasSubstr("/proc/lidwright"));
  if (scratch.first_rank()) {
    test::write_text(scratch / "file", "x");
  }
  MPI_Barrier(MPI_COMM_WORLD);
  EXPECT_NE(message_of<OutputError>([&] { create(scratch / "file/run"); }), "");
  EXPECT_EQ(test::entries(scratch.path()), 1);
}

TEST(RunFolder, NothingIsLeftOnAFullOrReadOnlyDisk) {
  const test::Scratch scratch;
  const test::SmallDisk read_only(scratch / "ro", "size=64k", MS_RDONLY);
  // Room for the root and two folders: the run's own folder and the next succeed, the rest does
  // not.
  const test::SmallDisk full(scratch / "full", "size=64k,nr_inodes=4");
  if (!read_only.mounted() || !full.mounted())
    GTEST_SKIP() << "mounting a tmpfs is not permitted here";
  EXPECT_THAT(message_of<OutputError>([&] { create(scratch / "ro/run"); }), HasSubstr("Read-only"));
  EXPECT_THAT(message_of<OutputError>([&] { create(scratch / "full/run"); }),
              HasSubstr("No space left"));
  EXPECT_EQ(test::entries(scratch / "full"), 0);
}

TEST(RunFolder, TwoProcessesDoNotWriteOneRun) {
  const test::Scratch scratch;
  make_run(scratch / "run");
  const RunFolder held = RunFolder::resume(MPI_COMM_WORLD, scratch / "run");
  EXPECT_THAT(message_of<InputError>([&] { RunFolder::resume(MPI_COMM_WORLD, scratch / "run"); }),
              HasSubstr("another process"));
}

TEST(RunFolder, IsKnownToGoOnWhileItIsHeld) {
  const test::Scratch scratch;
  make_run(scratch / "run");
  EXPECT_FALSE(run_goes_on(scratch / "run"));
  {
    const RunFolder held = RunFolder::resume(MPI_COMM_WORLD, scratch / "run");
    EXPECT_TRUE(run_goes_on(scratch / "run"));
  }
  EXPECT_FALSE(run_goes_on(scratch / "run"));
  EXPECT_FALSE(run_goes_on(scratch / "no such folder"));
}

TEST(RunFolder, TheReportIsTheRunsOwn) {
  const test::Scratch scratch;
  make_run(scratch / "run");
  test::write_text(scratch / "run/report.html", "x");
  EXPECT_THAT(own_files(RunPaths{scratch / "run"}), testing::Contains("report.html"));
}

TEST(ParallelRunFolder, ResumingClearsWhatWasNeverCompleted) {
  const test::Scratch scratch;
  make_run(scratch / "run");
  const RunFolder run = RunFolder::resume(MPI_COMM_WORLD, scratch / "run");
  EXPECT_FALSE(fs::exists(scratch / "run/checkpoints/step_000000400.h5.partial"));
  EXPECT_TRUE(fs::exists(scratch / "run/checkpoints/step_000000200.h5"));
}

TEST(RunFolder, OnlyARunIsResumed) {
  const test::Scratch scratch;
  EXPECT_THAT(message_of<InputError>([&] { RunFolder::resume(MPI_COMM_WORLD, scratch.path()); }),
              HasSubstr("holds no run to resume"));
}

}  // namespace
}  // namespace lidwright
