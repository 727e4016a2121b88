#include "io/checkpoint.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <cstring>
#include <limits>
#include <numbers>

#include "io/atomic_file.hpp"
#include "io/case_file.hpp"
#include "io/run_folder.hpp"
#include "io/seal.hpp"
#include "tests/io/scratch.hpp"

namespace lidwright {
namespace {

using test::message_of;
using testing::AllOf;
using testing::HasSubstr;

const Shell circle{Shape::Annulus, 1.2, 0, 2 * std::numbers::pi, Sides::Periodic};
const Shell wedge{Shape::AxisymmetricShell, 1.2, 0, std::numbers::pi, Sides::Reflecting};

std::shared_ptr<const Decomposition> share_out(const Shell& shell, int lateral = 19) {
  const Grid grid{5, lateral, {3, 2}, {}};
  return std::make_shared<Decomposition>(std::make_shared<Geometry>(shell, grid), MPI_COMM_WORLD);
}

/// A number whose last bits matter, of a place and a field's number.
double value_at(int i, int j, double field) { return std::sin(field + 3.7 * i + 0.31 * j) / 3; }

template <At at>
Field<at> filled(const std::shared_ptr<const Decomposition>& d, double number) {
  Field<at> field(d);
  for (int j = field.owned().begin; j < field.owned().end; ++j)
    for (int i = 0; i < field.rows(); ++i) field[{i, j}] = value_at(i, j, number);
  field.exchange();
  return field;
}

Archive example(const std::shared_ptr<const Decomposition>& d) {
  Archive archive;
  archive.numbers = {{"time", 0.1 / 3},
                     {"step", 9007199254740992.0},
                     {"least", 5e-324},
                     {"minus_zero", -0.0},
                     {"none", std::numeric_limits<double>::infinity()}};
  archive.cells.emplace("temperature", filled<At::Cell>(d, 1));
  archive.cells.emplace("heat_before", filled<At::Cell>(d, 2));
  archive.corners.emplace("flow", filled<At::Corner>(d, 3));
  return archive;
}

bool same_bits(const std::vector<double>& a, const std::vector<double>& b) {
  return a.size() == b.size() && std::memcmp(a.data(), b.data(), a.size() * sizeof(double)) == 0;
}

void expect_round_trip(const Shell& shell) {
  const test::Scratch scratch;
  const auto d = share_out(shell);
  const Archive before = example(d);
  write_checkpoint(scratch / "c.h5", before, *d, "case 1");
  const Archive after = read_checkpoint(scratch / "c.h5", d, "case 1");
  ASSERT_EQ(after.numbers.size(), before.numbers.size());
  for (const auto& [name, value] : before.numbers)
    EXPECT_TRUE(same_bits({after.numbers.at(name)}, {value})) << name;
  ASSERT_EQ(after.cells.size(), 2U);
  for (const auto& [name, field] : before.cells)
    EXPECT_TRUE(same_bits(after.cells.at(name).values(), field.values()));
  EXPECT_TRUE(same_bits(after.corners.at("flow").values(), before.corners.at("flow").values()));
}

TEST(ParallelCheckpoint, RoundTripIsBitForBit) {
  expect_round_trip(circle);
  expect_round_trip(wedge);
}

TEST(ParallelCheckpoint, TheFileDoesNotDependOnTheRanks) {
  const test::Scratch scratch;
  const auto d = share_out(circle);
  write_checkpoint(scratch / "all.h5", example(d), *d, "case 1");
  if (!scratch.first_rank()) return;
  const auto alone = std::make_shared<Decomposition>(d->geometry_pointer(), MPI_COMM_SELF);
  write_checkpoint(scratch / "one.h5", example(alone), *alone, "case 1");
  EXPECT_EQ(read_whole_file(scratch / "one.h5"), read_whole_file(scratch / "all.h5"));
}

TEST(Checkpoint, AnEmptyArchiveIsKept) {
  const test::Scratch scratch;
  const auto d = share_out(circle);
  write_checkpoint(scratch / "c.h5", {}, *d, "");
  EXPECT_TRUE(read_checkpoint(scratch / "c.h5", d, "").numbers.empty());
}

TEST(ParallelCheckpoint, AnotherCaseOrMeshIsRefusedOnAllRanks) {
  const test::Scratch scratch;
  const auto d = share_out(circle);
  write_checkpoint(scratch / "c.h5", example(d), *d, "case 1");
  EXPECT_THAT(message_of<InputError>([&] { read_checkpoint(scratch / "c.h5", d, "case 2"); }),
              AllOf(HasSubstr("c.h5"), HasSubstr("another case"), HasSubstr("--into")));
  EXPECT_THAT(message_of<InputError>(
                  [&] { read_checkpoint(scratch / "c.h5", share_out(circle, 20), "case 1"); }),
              AllOf(HasSubstr("5 x 19 cells"), HasSubstr("5 x 20 cells")));
  EXPECT_THAT(message_of<InputError>(
                  [&] { read_checkpoint(scratch / "c.h5", share_out(wedge), "case 1"); }),
              AllOf(HasSubstr("annulus"), HasSubstr("axisymmetric shell")));
}

TEST(ParallelCheckpoint, ForeignAndMissingFilesAreRefusedOnAllRanks) {
  const test::Scratch scratch;
  if (scratch.first_rank()) {
    test::write_text(scratch / "text.h5", "something else");
    test::write_text(scratch / "empty.h5", "");
  }
  MPI_Barrier(MPI_COMM_WORLD);
  const auto d = share_out(circle);
  for (const std::string name : {"text.h5", "empty.h5"})
    EXPECT_THAT(
        message_of<InputError>([&] { read_checkpoint(scratch / name, d, "case 1"); }),
        AllOf(HasSubstr(name), HasSubstr("not a checkpoint"), HasSubstr("--resume-from-previous")));
  EXPECT_THAT(message_of<InputError>([&] { read_checkpoint(scratch / "none.h5", d, "case 1"); }),
              HasSubstr("No such file"));
}

TEST(Checkpoint, AnyTruncationIsRefused) {
  const test::Scratch scratch;
  const auto d = share_out(circle);
  write_checkpoint(scratch / "c.h5", example(d), *d, "case 1");
  const std::string whole = read_whole_file(scratch / "c.h5");
  for (std::size_t size = 0; size < whole.size(); size += 97) {
    test::write_text(scratch / "cut.h5", whole.substr(0, size));
    ASSERT_NE(message_of<InputError>([&] { read_checkpoint(scratch / "cut.h5", d, "case 1"); }), "")
        << size;
  }
}

TEST(Checkpoint, AnyFlippedBitIsRefused) {
  const test::Scratch scratch;
  const auto d = share_out(circle);
  write_checkpoint(scratch / "c.h5", example(d), *d, "case 1");
  const std::string whole = read_whole_file(scratch / "c.h5");
  for (std::size_t at = 0; at < whole.size(); at += 41) {
    std::string damaged = whole;
    damaged[at] = static_cast<char>(damaged[at] ^ 0x10);
    test::write_text(scratch / "bad.h5", damaged);
    ASSERT_NE(message_of<InputError>([&] { read_checkpoint(scratch / "bad.h5", d, "case 1"); }), "")
        << at;
  }
}

TEST(Checkpoint, AnotherFormatIsNamed) {
  std::string file = seal("contents");
  file.replace(file.find("format 1"), 8, "format 9");
  EXPECT_THAT(message_of<std::runtime_error>([&] { open_seal(file); }), HasSubstr("of format 9"));
}

TEST(Checkpoint, ASealAroundSomethingElseIsRefused) {
  const test::Scratch scratch;
  write_atomically(scratch / "c.h5", seal("no HDF5 at all"));
  EXPECT_THAT(message_of<InputError>(
                  [&] { read_checkpoint(scratch / "c.h5", share_out(circle), "case 1"); }),
              HasSubstr("--resume-from-previous"));
}

TEST(Checkpoint, ChecksumIsTheUsualOne) {
  EXPECT_EQ(crc32("123456789"),
            0xCBF43926U);  // check value of CRC-32 (ISO-HDLC) in the catalogue of CRCs
}

TEST(ParallelCheckpoint, ListedNewestFirstAndOldOnesRemoved) {
  const test::Scratch scratch;
  const auto d = share_out(circle);
  for (const long step : {200L, 1000L, 400L, 12345678901L})
    write_checkpoint(checkpoint_path(scratch.path(), step), {}, *d, "");
  if (scratch.first_rank()) test::write_text(scratch / "step_000000400.h5.partial", "x");
  MPI_Barrier(MPI_COMM_WORLD);
  const auto steps = [&] {
    std::vector<long> list;
    for (const CheckpointFile& file : list_checkpoints(MPI_COMM_WORLD, scratch.path()))
      list.push_back(file.step);
    return list;
  };
  EXPECT_THAT(steps(), testing::ElementsAre(12345678901L, 1000, 400, 200));
  remove_checkpoints_after(MPI_COMM_WORLD, scratch.path(), 1000);
  EXPECT_THAT(steps(), testing::ElementsAre(1000, 400, 200));
  remove_old_checkpoints(MPI_COMM_WORLD, scratch.path(), 2);
  EXPECT_THAT(steps(), testing::ElementsAre(1000, 400));
  EXPECT_TRUE(list_checkpoints(MPI_COMM_WORLD, scratch / "none").empty());
}

TEST(ParallelCheckpoint, TemperatureOfTheNewestIsReadOnAllRanks) {
  const test::Scratch scratch;
  const auto d = share_out(wedge);
  const RunFolder run = RunFolder::create(MPI_COMM_WORLD, scratch / "run", ExistingRun::Refuse);
  write_checkpoint(checkpoint_path(run.paths().checkpoints(), 1), {}, *d, "");
  write_checkpoint(checkpoint_path(run.paths().checkpoints(), 2), example(d), *d, "");
  const StoredTemperature t = read_temperature(MPI_COMM_WORLD, scratch / "run");
  EXPECT_EQ(t.shell.shape, wedge.shape);
  EXPECT_EQ(t.shell.sides, wedge.sides);
  EXPECT_EQ(t.shell.lateral_end, wedge.lateral_end);
  ASSERT_EQ(t.radial_cells(), 5U);
  ASSERT_EQ(t.lateral_cells(), 19U);
  EXPECT_EQ(t.face_radius[2], d->geometry().face_radius(2));
  EXPECT_EQ(t.values[7 * 5 + 3], value_at(3, 7, 1));
  EXPECT_THAT(message_of<InputError>([&] { read_temperature(MPI_COMM_WORLD, scratch.path()); }),
              HasSubstr("holds no checkpoint"));
}

TEST(Checkpoint, AFullDiskLeavesTheOneBefore) {
  const test::Scratch scratch;
  const test::SmallDisk disk(scratch / "disk", "size=40k");
  if (!disk.mounted()) GTEST_SKIP() << "mounting a tmpfs is not permitted here";
  const auto d = share_out(circle);
  write_checkpoint(scratch / "disk/a.h5", example(d), *d, "");
  EXPECT_THAT(message_of<OutputError>([&] {
                for (const char* name : {"b.h5", "c.h5", "e.h5"})
                  write_checkpoint(scratch / "disk" + std::string("/") + name, example(d), *d, "");
              }),
              HasSubstr("No space left"));
  EXPECT_NO_THROW(read_checkpoint(scratch / "disk/a.h5", d, ""));
}

}  // namespace
}  // namespace lidwright
