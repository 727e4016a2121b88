#include "io/history_table.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>

#include "io/case_file.hpp"
#include "io/history.hpp"
#include "io/statistics_table.hpp"
#include "tests/io/scratch.hpp"

namespace lidwright {
namespace {

using test::message_of;
using testing::AllOf;
using testing::ElementsAre;
using testing::HasSubstr;

std::string history_of(long rows) {
  std::string text = history_head();
  for (long step = 0; step < rows; ++step) {
    HistoryRow r;
    r.step = step;
    r.time = 0.01 * static_cast<double>(step);
    r.nusselt_outer = 3.0 + 1.0 / 3;
    r.velocity_rms = step == 7 ? std::nan("") : 20;
    text += history_row(r);
  }
  return text;
}

TEST(HistoryTable, IsWhatWasWritten) {
  const HistoryTable t = parse_history(history_of(9), "x");
  EXPECT_EQ(t.rows(), 9u);
  EXPECT_EQ(t.names.size(), history_columns().size());
  EXPECT_EQ((*t.find("nusselt_outer"))[3], 3.0 + 1.0 / 3);
  EXPECT_TRUE(std::isnan((*t.find("velocity_rms"))[7]));
  EXPECT_EQ(t.find("mobile"), nullptr);
  for (std::size_t k = 0; k < t.names.size(); ++k)
    EXPECT_EQ(t.units[k], history_columns()[k].unit) << t.names[k];
}

/// A killed run's last line; and a table of another version with fewer columns.
TEST(HistoryTable, TakesATornLastLineAndOtherColumns) {
  const std::string text = history_of(9);
  EXPECT_EQ(parse_history(text.substr(0, text.size() - 5), "x").rows(), 8u);
  const HistoryTable old = parse_history("# lidwright history\ntime,b\n0,1\n0.5,inf\n", "x");
  EXPECT_THAT(old.names, ElementsAre("time", "b"));
  EXPECT_THAT(old.units, ElementsAre("1", "1"));
}

TEST(HistoryTable, RefusesWhatIsNone) {
  const auto complaint = [](const std::string& text) {
    return message_of<InputError>([&] { parse_history(text, "run/history.csv"); });
  };
  EXPECT_THAT(complaint("time,b\n0,1\n"), HasSubstr("run/history.csv: is not the history"));
  EXPECT_THAT(complaint("# lidwright history\na,b\n0,1\n"), HasSubstr("no column 'time'"));
  EXPECT_THAT(complaint("# lidwright history\ntime,b\n0,1\n0.5\n1,2\n"),
              AllOf(HasSubstr("run/history.csv:4:"), HasSubstr("row of 2 numbers")));
  EXPECT_THAT(complaint("# lidwright history\ntime,b\n0,1,3\n"), HasSubstr(":3:"));
  EXPECT_THAT(complaint("# lidwright history\ntime,b\n0,x\n"), HasSubstr(":3:"));
}

TEST(HistoryTable, NamesInALine) {
  EXPECT_THAT(names_in("a, b ,c d"), ElementsAre("a", "b", "c d"));
  EXPECT_THAT(names_in(""), ElementsAre(""));
}

TEST(StatisticsTable, HasARowForEveryDiagnostic) {
  const HistoryTable t = parse_history(history_of(100), "x");
  const std::vector<NamedSummary> all = summarise_history(t, {});
  EXPECT_EQ(all.size(), history_columns().size() - 6);
  const std::string text = statistics_table(all);
  EXPECT_THAT(text, HasSubstr("\nnusselt_outer,1,3.3333333333333335,0,3.3333333333333335,"
                              "3.3333333333333335,nan,nan,0.5,steady,"));
  EXPECT_THAT(text, HasSubstr("\nvelocity_rms,kappa/d,20,0,20,20,"));
  EXPECT_EQ(text.find("\nwall_time,"), std::string::npos);
}

}  // namespace
}  // namespace lidwright
