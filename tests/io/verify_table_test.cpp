#include "io/verify_table.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

namespace lidwright {
namespace {

using testing::HasSubstr;

TEST(VerifyTable, GivesValuesAsManyDigitsAsTheyDeserve) {
  EXPECT_EQ(with_uncertainty(4.88440917, 2.5e-3), "4.8844 +- 2.5e-03");
  EXPECT_EQ(with_uncertainty(-901.6092, 12), "-902 +- 1.2e+01");
  EXPECT_EQ(with_uncertainty(1.016959e-8, 1.2e-11), "1.0170e-08 +- 1.2e-11");
  EXPECT_EQ(with_uncertainty(0, 0.01), "0.000 +- 1.0e-02");
  EXPECT_EQ(with_uncertainty(3, 0), "3");
}

Comparison example() {
  Expectation e;
  e.quantity = "nusselt_outer";
  e.text = "4.884409";
  e.value = 4.884409;
  e.spread = 1e-5;
  e.spread_stated = true;
  e.mark = Mark::Confirmed;
  e.source = "Nobody, table 1";
  ErrorBar ours;
  ours.value = 4.8854;
  ours.half_width = 2e-3;
  ours.order = 1.98;
  ours.convergence = Convergence::Sound;
  Comparison c = compare(e, ours);
  c.benchmark = "one";
  return c;
}

TEST(VerifyTable, ShowsARow) {
  const std::string row = verify_row(example());
  for (const char* part : {"nusselt_outer", "4.8854 +- 2.0e-03", "1.98", "4.884409 +- 1e-05",
                           "+0.50", "agrees", "confirmed"})
    EXPECT_THAT(row, HasSubstr(part));
}

TEST(VerifyTable, PutsTheVerdictOnADoubtfulValueInBrackets) {
  Comparison c = example();
  c.expected.mark = Mark::Doubtful;
  EXPECT_THAT(verify_row(c), HasSubstr("(agrees)"));
}

TEST(VerifyTable, ShowsWhatWasNotSolved) {
  EXPECT_THAT(verify_row(not_solved(example().expected)), HasSubstr("NOT SOLVED"));
}

TEST(VerifyTable, IsWrittenForPrograms) {
  const std::string csv = verify_csv({example(), not_solved(example().expected)});
  EXPECT_THAT(csv, HasSubstr("\none,,,nusselt_outer,4.8854,0.002,1.98,sound,4.884409,1e-05,yes,"));
  EXPECT_THAT(csv, HasSubstr(",agrees,yes,confirmed,\"Nobody, table 1\",\n"));
  EXPECT_THAT(csv, HasSubstr("\n,,,nusselt_outer,,,,,4.884409,1e-05,yes,,NOT SOLVED,no,"));
}

TEST(VerifyTable, ClosesWithWhatCounts) {
  Tally t;
  t.agree = 19;
  t.differ = 1;
  t.doubtful = 2;
  t.bars = 20;
  t.contained = 19;
  t.median_width = 5e-4;
  t.median_difference = 1e-5;
  const std::string close = verify_close(t, 12);
  EXPECT_THAT(close, HasSubstr("19 of 20 (95.0 %) values agree, 1 differ; 2 doubtful"));
  EXPECT_THAT(
      close,
      HasSubstr("in 19 of 20 (95.0 %)\nmedian width of a bar 0.05 %, median difference 0.001 %"));
}

}  // namespace
}  // namespace lidwright
