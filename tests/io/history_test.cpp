#include "io/history.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <memory>
#include <sstream>

#include "io/case_file.hpp"
#include "tests/io/scratch.hpp"

namespace lidwright {
namespace {

using test::message_of;
using testing::AllOf;
using testing::HasSubstr;

HistoryRow row(long step) {
  HistoryRow r;
  r.step = step;
  r.time = 0.1 * static_cast<double>(step);
  r.nusselt_outer = std::sqrt(static_cast<double>(step) + 2);
  r.work_mismatch = -1e-17 / 3;
  r.wall_time = 3.5 * static_cast<double>(step);
  return r;
}

void write_rows(const std::string& path, long first, long last) {
  History history = first == 0 ? History::start(MPI_COMM_WORLD, path)
                               : History::resume(MPI_COMM_WORLD, path, first - 1);
  for (long step = first; step <= last; ++step) history.append(row(step));
  history.sync();
}

std::vector<std::string> split(const std::string& text, char separator) {
  std::vector<std::string> parts;
  std::istringstream stream(text);
  for (std::string part; std::getline(stream, part, separator);) parts.push_back(part);
  return parts;
}

TEST(ParallelHistory, ResumedEqualsUninterrupted) {
  const test::Scratch scratch;
  write_rows(scratch / "whole.csv", 0, 20);
  write_rows(scratch / "parts.csv", 0, 13);
  write_rows(scratch / "parts.csv", 9, 20);
  EXPECT_EQ(read_whole_file(scratch / "parts.csv"), read_whole_file(scratch / "whole.csv"));
}

TEST(History, ATornLastRowIsDropped) {
  const test::Scratch scratch;
  write_rows(scratch / "whole.csv", 0, 12);
  const std::string whole = read_whole_file(scratch / "whole.csv");
  const std::size_t end_of_five = (history_head() +
                                   [] {
                                     std::string rows;
                                     for (long step = 0; step <= 5; ++step)
                                       rows += history_row(row(step));
                                     return rows;
                                   }())
                                      .size();
  // The program dies at any byte after the checkpoint of step 5.
  for (std::size_t cut = end_of_five; cut < whole.size(); cut += 23) {
    test::write_text(scratch / "torn.csv", whole.substr(0, cut));
    write_rows(scratch / "torn.csv", 6, 12);
    ASSERT_EQ(read_whole_file(scratch / "torn.csv"), whole) << "cut at byte " << cut;
  }
}

TEST(History, ABlockOfZerosAfterAPowerCutIsDropped) {
  const std::string kept = history_head() + history_row(row(1));
  EXPECT_EQ(history_until(kept + std::string(100, '\0') + "\n", 5, "x"), kept);
  EXPECT_EQ(history_until(kept + "2,0.2\n", 5, "x"), kept);
}

TEST(History, RowsReadBackBitForBit) {
  const std::vector<std::string> words = split(history_row(row(7)), ',');
  EXPECT_EQ(std::stod(words[1]), row(7).time);
  EXPECT_EQ(std::stod(words[6]), row(7).nusselt_outer);
  EXPECT_EQ(std::stod(words[17]), row(7).work_mismatch);
  EXPECT_EQ(words[0], "7");
}

TEST(History, EveryColumnIsDescribedAndWallTimeIsLast) {
  const std::vector<std::string> lines = split(history_head(), '\n');
  const std::vector<std::string> names = split(lines.back(), ',');
  EXPECT_EQ(names.back(), "wall_time");
  EXPECT_EQ(names.size(), split(history_row({}), ',').size());
  for (const std::string& name : names)
    EXPECT_TRUE(std::any_of(lines.begin(), lines.end(), [&](const auto& l) {
      return l.starts_with("# " + name + " [");
    })) << name;
}

TEST(ParallelHistory, AForeignOrMissingFileIsRefusedOnAllRanks) {
  const test::Scratch scratch;
  if (scratch.first_rank()) test::write_text(scratch / "foreign.csv", "step,time\n1,2\n");
  MPI_Barrier(MPI_COMM_WORLD);
  for (const std::string name : {"foreign.csv", "missing.csv"})
    EXPECT_THAT(message_of<InputError>([&] { History::resume(MPI_COMM_WORLD, scratch / name, 3); }),
                HasSubstr(name));
}

TEST(ParallelHistory, AFullDiskIsAnErrorOnAllRanksAndLeavesWholeRows) {
  const test::Scratch scratch;
  int mounted = 0;
  std::unique_ptr<test::SmallDisk> disk;
  if (scratch.first_rank()) {
    disk = std::make_unique<test::SmallDisk>(scratch / "disk", "size=8k");
    mounted = disk->mounted();
  }
  MPI_Bcast(&mounted, 1, MPI_INT, 0, MPI_COMM_WORLD);
  if (!mounted) GTEST_SKIP() << "mounting a tmpfs is not permitted here";
  {
    History history = History::start(MPI_COMM_WORLD, scratch / "disk/history.csv");
    const std::string message = message_of<OutputError>([&] {
      for (long step = 0; step < 1000; ++step) history.append(row(step));
    });
    EXPECT_THAT(message, AllOf(HasSubstr("history.csv"), HasSubstr("No space left")));
  }
  if (!scratch.first_rank()) return;
  const std::string text = read_whole_file(scratch / "disk/history.csv");
  EXPECT_EQ(history_until(text, 1000, "x"), text) << "half a row was left";
}

}  // namespace
}  // namespace lidwright
