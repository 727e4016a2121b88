#include "io/run_reader.hpp"

#include <fmt/format.h>
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "io/atomic_file.hpp"
#include "io/case_file.hpp"
#include "tests/io/scratch.hpp"
#include "tests/io/snapshot_samples.hpp"

namespace lidwright {
namespace {

using namespace test;
using testing::AllOf;
using testing::HasSubstr;

/// The folder of a run with snapshots of the sample at these times, on as many ranks as there are.
std::string write_run(const Scratch& scratch, const Shell& shell,
                      const std::vector<double>& times) {
  const auto pieces = share_out(shell);
  const RunFolder folder = RunFolder::create(MPI_COMM_WORLD, scratch / "run", ExistingRun::Refuse);
  SnapshotWriter writer(MPI_COMM_WORLD, folder.paths());
  for (const double time : times) writer.write(example(pieces, time));
  Case c;
  c.model.shell = shell;
  c.model.grid = pieces->geometry().grid();
  if (scratch.first_rank()) {
    write_atomically(folder.paths().provenance(), std::string(provenance_mark));
    write_atomically(folder.paths().case_file(), write_case(c));
  }
  MPI_Barrier(MPI_COMM_WORLD);
  return folder.paths().folder;
}

class ParallelRunReader : public testing::TestWithParam<Sample> {
 protected:
  const std::shared_ptr<const Decomposition> whole_ = share_out(GetParam().shell, MPI_COMM_SELF);
  const Geometry& geometry() const { return whole_->geometry(); }
  std::string run() const { return run_; }

 private:
  Scratch scratch_;
  std::string run_ = write_run(scratch_, GetParam().shell, {0.0, 0.25});
};

/// Float32 keeps 24 bits.
constexpr double precision = 1.0 / (1 << 23);

TEST_P(ParallelRunReader, GivesEveryCellAsItWas) {
  const SavedRun saved = open_run(run());
  ASSERT_EQ(saved.snapshots.size(), 2);
  const SavedFields f = read_fields(saved, 1);
  const Geometry& g = geometry();
  EXPECT_EQ(f.time, 0.25);
  EXPECT_EQ(f.grid.lateral, g.lateral_cells());
  const Snapshot sample = example(whole_, 0.25);
  for (int j = 0; j < g.lateral_cells(); ++j)
    for (int i = 0; i < g.radial_cells(); ++i) {
      const auto k = static_cast<std::size_t>(j * g.radial_cells() + i);
      const Cell c{i, j};
      ASSERT_NEAR(f.temperature[k], sample.temperature[c], precision);
      ASSERT_NEAR(f.viscosity[k], sample.viscosity[c], precision * sample.viscosity[c]);
      ASSERT_EQ(f.strain_rate[k], 2);
      const double speed = std::hypot(sample.velocity_radial[c], sample.velocity_lateral[c]);
      ASSERT_NEAR(f.velocity_radial[k], sample.velocity_radial[c], 4 * precision * speed);
      ASSERT_NEAR(f.velocity_lateral[k], sample.velocity_lateral[c], 4 * precision * speed);
    }
}

TEST_P(ParallelRunReader, GivesEveryCorner) {
  const SavedFields f = read_fields(open_run(run()), 0);
  const Geometry& g = geometry();
  const auto rows = static_cast<std::size_t>(g.radial_cells()) + 1;
  ASSERT_EQ(f.stream_function.size(), rows * static_cast<std::size_t>(g.corner_columns()));
  for (std::size_t k = 0; k < f.stream_function.size(); ++k) {
    const Corner c{static_cast<int>(k % rows), static_cast<int>(k / rows)};
    ASSERT_NEAR(f.stream_function[k], flow_at(g, c), precision);
  }
}

INSTANTIATE_TEST_SUITE_P(Shells, ParallelRunReader, testing::ValuesIn(samples),
                         [](const auto& sample) { return sample.param.name; });

/// A run of one piece in a sector, to be damaged.
class DamagedRun : public testing::Test {
 protected:
  std::string run() const { return run_; }
  std::string piece() const { return run() + "/fields/fields_0000_piece_0.vts"; }
  std::string complaint() const {
    return message_of<InputError>([&] { read_fields(open_run(run()), 0); });
  }

 private:
  Scratch scratch_;
  std::string run_ = write_run(scratch_, samples[3].shell, {0});
};

TEST_F(DamagedRun, IsNoRunWithoutItsMark) {
  std::filesystem::remove(run() + "/provenance.toml");
  EXPECT_THAT(complaint(), AllOf(HasSubstr(run()), HasSubstr("holds no run")));
  EXPECT_THAT(message_of<InputError>([] { open_run("/no/such/folder"); }),
              HasSubstr("/no/such/folder: is no folder"));
}

TEST_F(DamagedRun, NamesATruncatedPiece) {
  const std::string whole = read_whole_file(piece());
  for (const double share : {0.0, 0.3, 0.95}) {
    write_text(
        piece(),
        whole.substr(0, static_cast<std::size_t>(share * static_cast<double>(whole.size()))));
    EXPECT_THAT(complaint(), AllOf(HasSubstr(piece()), HasSubstr("damaged"))) << share;
  }
}

TEST_F(DamagedRun, NamesAMissingPiece) {
  std::filesystem::remove(piece());
  EXPECT_THAT(complaint(), HasSubstr(piece()));
}

TEST_F(DamagedRun, NamesWhatFitsNoGrid) {
  const std::string path = run() + "/case_as_read.toml";
  Case c = read_case(path);
  c.model.grid.radial = 12;
  write_text(path, write_case(c));
  EXPECT_THAT(complaint(), AllOf(HasSubstr("fields_0000"), HasSubstr("does not fit the grid")));
}

TEST_F(DamagedRun, HasNoSnapshotBeyondTheLast) {
  EXPECT_THAT(message_of<InputError>([&] { read_fields(open_run(run()), 1); }),
              HasSubstr("there is no snapshot 1"));
}

}  // namespace
}  // namespace lidwright
