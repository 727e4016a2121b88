#include "io/snapshot.hpp"

#include <fmt/format.h>
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <cstdlib>

#include "io/case_file.hpp"
#include "tests/io/scratch.hpp"
#include "tests/io/snapshot_samples.hpp"

namespace lidwright {
namespace {

namespace fs = std::filesystem;
using testing::AllOf;
using testing::HasSubstr;

using namespace test;

/// Net flow through the middle circle, taken absolutely, and the exact area of the picture in its
/// plane.
std::string expectations(const Geometry& g) {
  const int middle = g.radial_cells() / 2;
  double flux = 0;
  for (int j = 0; j < g.lateral_cells(); ++j) {
    const Cell c{middle, j};
    flux += std::abs(upward_flux(g, inner(c)) * g.inverse_area(inner(c)) +
                     upward_flux(g, outer(c)) * g.inverse_area(outer(c))) /
            2 * g.lateral_width(j) * (g.box() ? 1 : g.cell_radius(middle));
  }
  const double a = g.inner_radius(), b = g.outer_radius(),
               width = g.shell().lateral_end - g.shell().lateral_begin;
  return fmt::format(
      "{{\"radial\": {}, \"lateral\": {}, \"row\": {}, \"flux\": {}, \"area\": {}, \"shape\": {}, "
      "\"periodic\": {}, \"angle\": {}, \"begin\": {}}}\n",
      g.radial_cells(), g.lateral_cells(), middle, flux,
      g.box() ? width : (b * b - a * a) / 2 * width, static_cast<int>(g.shell().shape),
      g.periodic(), width, g.shell().lateral_begin);
}

void write_sample(const Sample& sample, const std::string& folder) {
  const auto d = share_out(sample.shell);
  const RunFolder run =
      RunFolder::create(MPI_COMM_WORLD, folder + "/" + sample.name, ExistingRun::Refuse);
  SnapshotWriter writer(MPI_COMM_WORLD, run.paths());
  for (const double time : {0.0, 0.1 / 3}) writer.write(example(d, time));
  if (d->rank() == 0)
    write_atomically(run.paths().folder + "/expected.json", expectations(d->geometry()));
}

/// Also what tests/viewers/vtk_reader.py looks at: it names a folder in LIDWRIGHT_SAMPLES.
TEST(ParallelSnapshot, EveryGeometryIsWritten) {
  const test::Scratch scratch;
  const char* wanted = std::getenv("LIDWRIGHT_SAMPLES");
  const std::string folder = wanted ? wanted : scratch.path();
  for (const Sample& sample : samples) {
    write_sample(sample, folder);
    const std::string collection = read_whole_file(folder + "/" + sample.name + "/fields.pvd");
    EXPECT_EQ(read_collection(collection).size(), 2U) << sample.name;
    EXPECT_FALSE(fs::exists(folder + "/" + sample.name + "/fields/fields_0002.pvts"));
  }
}

std::vector<double> times_listed(const std::string& path) {
  std::vector<double> times;
  for (const CollectionEntry& e : read_collection(read_whole_file(path))) times.push_back(e.time);
  return times;
}

TEST(ParallelSnapshot, ResumingDropsLaterOnes) {
  const test::Scratch scratch;
  const auto d = share_out(samples[2].shell);
  const RunFolder run = RunFolder::create(MPI_COMM_WORLD, scratch / "run", ExistingRun::Refuse);
  SnapshotWriter first(MPI_COMM_WORLD, run.paths());
  for (const double time : {0.0, 0.1 / 3, 0.2, 0.3}) first.write(example(d, time));
  if (scratch.first_rank()) test::write_text(run.paths().fields() + "/fields_0003.png", "foreign");
  SnapshotWriter second(MPI_COMM_WORLD, run.paths(), 0.1 / 3);
  EXPECT_TRUE(fs::exists(run.paths().fields() + "/fields_0003.png"));
  EXPECT_EQ(second.count(), 2U);
  EXPECT_FALSE(fs::exists(run.paths().fields() + "/fields_0002.pvts"));
  EXPECT_FALSE(fs::exists(run.paths().fields() + "/fields_0003_piece_0.vts"));
  EXPECT_FALSE(fs::exists(run.paths().walls() + "/walls_0002.csv"));
  EXPECT_FALSE(fs::exists(run.paths().walls() + "/topography_0002.csv"));
  EXPECT_TRUE(fs::exists(run.paths().walls() + "/topography_0001.csv"));
  EXPECT_FALSE(fs::exists(run.paths().profiles() + "/profiles_0003.csv"));
  second.write(example(d, 0.1 / 3));  // the same time again replaces
  second.write(example(d, 0.25));
  for (const std::string& path : {run.paths().fields_collection(), run.paths().walls_collection()})
    EXPECT_THAT(times_listed(path), testing::ElementsAre(0.0, 0.1 / 3, 0.25));
}

TEST(ParallelSnapshot, AFailureIsThrownOnAllRanksAndNothingIsListed) {
  const test::Scratch scratch;
  const auto d = share_out(samples[0].shell);
  const RunFolder run = RunFolder::create(MPI_COMM_WORLD, scratch / "run", ExistingRun::Refuse);
  SnapshotWriter writer(MPI_COMM_WORLD, run.paths());
  const Snapshot s = example(d, 0);
  // Only the last rank cannot write its piece.
  const std::string piece =
      fmt::format("{}/fields_0000_piece_{}.vts", run.paths().fields(), d->ranks() - 1);
  if (scratch.first_rank()) fs::create_directory(piece);
  MPI_Barrier(MPI_COMM_WORLD);
  EXPECT_THAT(test::message_of<OutputError>([&] { writer.write(s); }), HasSubstr(piece));
  EXPECT_EQ(writer.count(), 0U);
  EXPECT_TRUE(times_listed(run.paths().fields_collection()).empty());
  EXPECT_FALSE(fs::exists(run.paths().fields() + "/fields_0000.pvts"));
}

TEST(SnapshotTables, WallsWithAndWithoutStress) {
  const WallTrace full{{0.5, 1.5}, {1, 2}, {3, 4}, {5, 6}};
  const std::string with = walls_table(full, full, "at time 0.25 d^2/kappa, step 9");
  EXPECT_THAT(with,
              AllOf(HasSubstr("time 0.25"), HasSubstr("step 9"),
                    HasSubstr("# inner_heat_flux [k DeltaT/d]"), HasSubstr("\n1.5,2,4,2,4,6,6\n")));
  WallTrace bare = full;
  bare.normal_stress.clear();
  EXPECT_THAT(walls_table(bare, bare, "at time 0.25 d^2/kappa, step 9"),
              AllOf(HasSubstr("\n1.5,2,4,2,4\n"), testing::Not(HasSubstr("stress"))));
}

TEST(SnapshotTables, TopographyByWaveNumber) {
  EXPECT_THAT(topography_table({{2, 4}, {0.5, 0.25}}, "at time 0.25 d^2/kappa, step 9"),
              AllOf(HasSubstr("step 9"), HasSubstr("# amplitude [eta kappa/d^2]"),
                    HasSubstr("\nwave_number,amplitude\n2,0.5\n4,0.25\n")));
}

TEST(SnapshotTables, CollectionsReadBack) {
  const std::vector<CollectionEntry> entries{{0, "fields/a.pvts"}, {1.0 / 3, "fields/b.pvts"}};
  const std::vector<CollectionEntry> back = read_collection(write_collection(entries));
  ASSERT_EQ(back.size(), 2U);
  EXPECT_EQ(back[1].time, 1.0 / 3);
  EXPECT_EQ(back[1].file, "fields/b.pvts");
  EXPECT_TRUE(read_collection("").empty());
}

}  // namespace
}  // namespace lidwright
