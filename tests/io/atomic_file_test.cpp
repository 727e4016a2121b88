#include "io/atomic_file.hpp"

#include <fcntl.h>
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cerrno>

#include "tests/io/scratch.hpp"

namespace lidwright {
namespace {

using test::message_of;
using testing::AllOf;
using testing::HasSubstr;

TEST(AtomicFile, WritesAndReplacesBytes) {
  const test::Scratch scratch;
  const std::string path = scratch / "a", bytes("one\0two\n", 8);
  write_atomically(path, "what was there before, and longer");
  write_atomically(path, bytes);
  EXPECT_EQ(read_whole_file(path), bytes);
  EXPECT_EQ(test::entries(scratch.path()), 1);
}

TEST(AtomicFile, WritesWithoutAFolderInTheName) {
  const test::Scratch scratch;
  const auto before = std::filesystem::current_path();
  std::filesystem::current_path(scratch.path());
  write_atomically("plain", "x");
  std::filesystem::current_path(before);
  EXPECT_EQ(read_whole_file(scratch / "plain"), "x");
}

TEST(AtomicFile, AFullDiskLeavesTheOldFileAndNoPartialOne) {
  const test::Scratch scratch;
  const test::SmallDisk disk(scratch / "disk", "size=64k");
  if (!disk.mounted()) GTEST_SKIP() << "mounting a tmpfs is not permitted here";
  const std::string path = scratch / "disk/a";
  write_atomically(path, "old");
  const std::string message =
      message_of<OutputError>([&] { write_atomically(path, std::string(200000, 'x')); });
  EXPECT_THAT(message, AllOf(HasSubstr(path), HasSubstr("No space left"), HasSubstr("free space")));
  EXPECT_EQ(read_whole_file(path), "old");
  EXPECT_EQ(test::entries(scratch / "disk"), 1);
}

TEST(AtomicFile, AReadOnlyDiskIsNamed) {
  const test::Scratch scratch;
  const test::SmallDisk disk(scratch / "disk", "size=64k", MS_RDONLY);
  if (!disk.mounted()) GTEST_SKIP() << "mounting a tmpfs is not permitted here";
  const std::string message =
      message_of<OutputError>([&] { write_atomically(scratch / "disk/a", "x"); });
  EXPECT_THAT(message,
              AllOf(HasSubstr("disk/a"), HasSubstr("Read-only"), HasSubstr("another folder")));
}

TEST(AtomicFile, AMissingFolderIsNamed) {
  const test::Scratch scratch;
  const std::string message =
      message_of<OutputError>([&] { write_atomically(scratch / "none/a", "x"); });
  EXPECT_THAT(message, AllOf(HasSubstr("none/a"), HasSubstr("No such file"),
                             HasSubstr("folder is not there")));
}

TEST(AtomicFile, AFolderOfThatNameIsNotReplaced) {
  const test::Scratch scratch;
  std::filesystem::create_directory(scratch / "a");
  EXPECT_NE(message_of<OutputError>([&] { write_atomically(scratch / "a", "x"); }), "");
  EXPECT_EQ(test::entries(scratch.path()), 1) << "the partial file was left";
}

TEST(AtomicFile, WriteAllReportsADeviceWithoutSpace) {
  const int full = ::open("/dev/full", O_WRONLY);
  ASSERT_GE(full, 0);
  EXPECT_EQ(write_all(Descriptor(full), "x"), ENOSPC);
}

TEST(AtomicFile, AMissingFileCannotBeRead) {
  EXPECT_THAT(message_of<std::runtime_error>([] { read_whole_file("/nowhere/x"); }),
              AllOf(HasSubstr("/nowhere/x"), HasSubstr("No such file")));
}

TEST(ParallelCollective, AFailureOnOneRankIsThrownOnAll) {
  int rank = 0, ranks = 1;
  MPI_Comm_rank(MPI_COMM_WORLD, &rank);
  MPI_Comm_size(MPI_COMM_WORLD, &ranks);
  const auto fail_on_last = [&] {
    on_all_ranks<OutputError>(MPI_COMM_WORLD, [&] {
      if (rank == ranks - 1) throw std::runtime_error("the last rank's disk is full");
    });
  };
  EXPECT_EQ(message_of<OutputError>(fail_on_last), "the last rank's disk is full");
  EXPECT_NO_THROW(on_all_ranks<OutputError>(MPI_COMM_WORLD, [] {}));
}

}  // namespace
}  // namespace lidwright
