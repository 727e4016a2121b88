#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <limits>

#include "io/case_file.hpp"
#include "io/grey_image.hpp"
#include "io/json.hpp"
#include "io/page_fields.hpp"
#include "io/page_headline.hpp"
#include "io/page_health.hpp"
#include "io/page_words.hpp"
#include "io/thinning.hpp"
#include "io/toml_sections.hpp"
#include "tests/io/scratch.hpp"

namespace lidwright {
namespace {

using testing::ElementsAre;
using testing::HasSubstr;

constexpr double nan = std::numeric_limits<double>::quiet_NaN();

TEST(Json, NoTextLeavesTheScriptElement) {
  EXPECT_EQ(json::text("</script><!--"), R"("\u003c/script\u003e\u003c!--")");
  EXPECT_EQ(json::text("a \"b\" \\ & '"), R"("a \"b\" \\ \u0026 '")");
  EXPECT_EQ(json::text("one\ntwo\t\x01"), R"("one\u000atwo\u0009\u0001")");
  EXPECT_EQ(json::text("\xE2\x80\xA8\xE2\x80\xA9"), R"("\u2028\u2029")");
}

TEST(Json, WhatIsNoUtf8IsReplaced) {
  EXPECT_EQ(json::text("Ä°κ😀"), "\"Ä°κ😀\"");
  EXPECT_EQ(json::text("a\xFFz"), R"("a\ufffdz")");
  EXPECT_EQ(json::text("\xC3"), R"("\ufffd")");                      // cut short
  EXPECT_EQ(json::text("\xC0\xAF"), R"("\ufffd\ufffd")");            // overlong
  EXPECT_EQ(json::text("\xED\xA0\x80"), R"("\ufffd\ufffd\ufffd")");  // a surrogate
}

TEST(Json, NumbersThatAreNotFiniteAreNull) {
  EXPECT_EQ(json::numbers({1, nan, -2.5, std::numeric_limits<double>::infinity()}, 7),
            "[1,null,-2.5,null]");
  EXPECT_EQ(json::number(1.0 / 3, 4), "0.3333");
  EXPECT_EQ(std::stod(json::number(0.1 + 0.2)), 0.1 + 0.2);
}

TEST(Json, PartsArePutTogether) {
  EXPECT_EQ(json::object({{"a", json::list({"1", json::truth(true)})}, {"b", json::texts({"x"})}}),
            R"({"a":[1,true],"b":["x"]})");
  EXPECT_EQ(json::list({}), "[]");
}

TEST(Thinning, KeepsEveryExtremeOfItsStretch) {
  std::vector<double> values(10000);
  for (std::size_t k = 0; k < values.size(); ++k)
    values[k] = std::sin(0.01 * static_cast<double>(k));
  values[4321] = 9;
  values[8765] = -9;
  const auto rows = rows_to_draw(values, 400);
  EXPECT_LE(rows.size(), 400u);
  EXPECT_GE(rows.size(), 300u);
  EXPECT_TRUE(std::is_sorted(rows.begin(), rows.end()));
  for (const std::size_t k : {0u, 4321u, 8765u, 9999u})
    EXPECT_TRUE(std::binary_search(rows.begin(), rows.end(), k)) << k;
}

TEST(Thinning, KeepsShortRecordsAndBreaks) {
  EXPECT_THAT(rows_to_draw(std::vector<double>{3, 1, 2}, 8), ElementsAre(0, 1, 2));
  std::vector<double> values(1000, 1);
  values[500] = nan;
  const auto rows = rows_to_draw(values, 20);
  EXPECT_TRUE(std::binary_search(rows.begin(), rows.end(), 500u));
  EXPECT_THAT(rows_to_draw(std::vector<double>(100, nan), 8), ElementsAre(0, 33, 66, 99));
}

TEST(Thinning, ChoosesEvenlyWithBothEnds) {
  EXPECT_THAT(evenly_chosen(5, 24), ElementsAre(0, 1, 2, 3, 4));
  EXPECT_THAT(evenly_chosen(50, 4), ElementsAre(0, 16, 33, 49));
  EXPECT_THAT(evenly_chosen(50, 1), ElementsAre(49));
  EXPECT_TRUE(evenly_chosen(0, 24).empty());
}

TEST(GreyImage, IsAPngAndBase64IsTheStandards) {
  EXPECT_EQ(base64(""), "");  // RFC 4648, section 10
  EXPECT_EQ(base64("f"), "Zg==");
  EXPECT_EQ(base64("foob"), "Zm9vYg==");
  EXPECT_EQ(base64("fooba"), "Zm9vYmE=");
  EXPECT_EQ(base64("foobar"), "Zm9vYmFy");
  const std::string png = grey_png(3, 2, {0, 1, 2, 253, 254, 255});
  EXPECT_EQ(png.substr(0, 8), "\x89PNG\r\n\x1a\n");
  EXPECT_EQ(png.substr(16, 10), std::string("\0\0\0\3\0\0\0\2\x08\0", 10));  // 3 x 2, 8 bits, grey
}

Grid grid(int radial, int lateral) {
  Grid g;
  g.radial = radial;
  g.lateral = lateral;
  return g;
}

TEST(PageFields, BlocksFitTheBudgetAndKeepTheMean) {
  EXPECT_EQ(page::block_factor(grid(64, 384), 49152), 1);
  EXPECT_EQ(page::block_factor(grid(256, 1536), 49152), 3);
  EXPECT_THAT(page::block_means({1, 2, 3, 4, 5, 6}, grid(3, 2), 2), ElementsAre(3, 4.5));
  EXPECT_THAT(page::block_means({1, -INFINITY, 3, 4, 5, nan}, grid(3, 2), 2),
              ElementsAre(10.0 / 3, 3))
      << "what is finite";
  EXPECT_THAT(page::every_face({0, 1, 2, 3, 4, 5}, 2), ElementsAre(0, 2, 4, 5));
}

TEST(PageWords, StateAsManyDigitsAsTheErrorLeaves) {
  EXPECT_EQ(page::stated(12.3456, 0.05).value, "12.35");
  EXPECT_EQ(page::stated(12.3456, 0.05).error, "0.05");
  EXPECT_EQ(page::stated(12.3456, 0.012).value, "12.346");
  EXPECT_EQ(page::stated(12.3456, 0.012).error, "0.012");
  EXPECT_EQ(page::stated(-3, nan).value, "−3.000");
  EXPECT_EQ(page::stated(3, 0).value, "3");
  EXPECT_EQ(page::stated(nan, 1).value, "not defined");
  EXPECT_EQ(page::stated(0.9996, 0.0996).value, "1.00");
}

TEST(PageWords, LargeAndSmallNumbersHavePowers) {
  EXPECT_EQ(page::digits(1.5e-7, 3), "1.50 × 10⁻⁷");
  EXPECT_EQ(page::digits(-2e9, 2), "−2.0 × 10⁹");
  EXPECT_EQ(page::digits(999999.9, 4), "1.000 × 10⁶");
  EXPECT_EQ(page::compact(1e-9), "10⁻⁹");
  EXPECT_EQ(page::compact(10000), "10000");
  EXPECT_EQ(page::compact(2.50), "2.5");
  const page::Stated s = page::stated(3.21987e7, 4e4);
  EXPECT_EQ(s.value, "3.220 × 10⁷");
  EXPECT_EQ(s.error, "0.004 × 10⁷");
  EXPECT_EQ(page::unit("k DeltaT d^(n-2)"), "k ΔT dⁿ⁻²");
  EXPECT_EQ(page::unit("1"), "");
}

TEST(PageHealth, JudgesAtTheThresholds) {
  using page::Judgement;
  EXPECT_EQ(page::judged_small(1, 1, 10), Judgement::Good);
  EXPECT_EQ(page::judged_small(9.9, 1, 10), Judgement::Look);
  EXPECT_EQ(page::judged_small(10, 1, 10), Judgement::Poor);
  EXPECT_EQ(page::judged_small(nan, 1, 10), Judgement::None);
  EXPECT_EQ(page::judged_large(4, 4, 2), Judgement::Good);
  EXPECT_EQ(page::judged_large(2, 4, 2), Judgement::Look);
  EXPECT_EQ(page::judged_large(1.9, 4, 2), Judgement::Poor);
}

/// A branch of two states: speeds and mismatches of work.
std::string health_of(const std::vector<double>& speeds, const std::vector<double>& mismatches) {
  return page::json_of(page::branch_health(
      {}, {{"residual", "heat_budget_residual", "velocity_rms", "work_mismatch"},
           {"1", "1", "kappa/d", "1"},
           {{nan, nan}, {nan, nan}, speeds, mismatches}}));
}

TEST(PageHealth, LeavesOutWorkWhereNothingFlows) {
  EXPECT_THAT(health_of({10, 1e-7}, {1e-10, 0.5}), HasSubstr("that is judged is good"));
  EXPECT_THAT(health_of({10, 1e-4}, {1e-10, 0.5}), HasSubstr("Poor: Work of buoyancy"));
  EXPECT_THAT(health_of({1e-9, 1e-10}, {0.5, 0.5}), HasSubstr("There is nothing to judge."));
}

TEST(PageHealth, SpeaksOfStatesWhereThereAreNoSteps) {
  const std::string words = health_of({1, 1}, {0, 0});
  EXPECT_THAT(words, HasSubstr("Heat budget, residual, largest of a state"));
  EXPECT_THAT(words, testing::Not(HasSubstr("of a step")));
}

TEST(PageVerdicts, SayThatARunHasNotEnded) {
  for (const page::Verdict& v :
       {page::settle_verdict({}, ""), page::settle_verdict({}, "heat.uniform"),
        page::onset_verdict({})}) {
    EXPECT_EQ(v.heading, "not finished");
    EXPECT_EQ(v.tone, page::Tone::Doubtful);
    EXPECT_TRUE(v.evidence.empty());
  }
  EXPECT_TRUE(page::onset_figures({}).empty());
  EXPECT_EQ(page::onset_verdict({"", {{"end", "interrupted"}}}).heading, "not known");
}

TEST(PageWords, ABranchHasTheUnitOfItsKey) {
  const NumberTable branch{{"parameter", "velocity_rms"}, {"K", "kappa/d"}, {{1750, 2200}, {1, 2}}};
  const auto figures = page::branch_figures(branch, "walls.inner.temperature");
  ASSERT_EQ(figures.size(), 2u);
  EXPECT_EQ(figures[0].note, "at walls.inner.temperature = 1750 K");
  EXPECT_EQ(page::with_unit(0.5, ""), "0.5");
}

TEST(TomlSections, ReadRecordsAndSayWhatIsDamaged) {
  const auto all = toml_sections(
      "end = \"steady\"\nradial = 32\nx = 1.5\n[[session]]\nhost = \"h\"\nlibrary.vtk = \"9\"\n",
      "f");
  ASSERT_EQ(all.size(), 2u);
  EXPECT_EQ(all[0]["end"], "steady");
  EXPECT_EQ(all[0].number("radial"), 32);
  EXPECT_EQ(all[0].number("x"), 1.5);
  EXPECT_TRUE(std::isnan(all[0].number("end")));
  EXPECT_EQ(all[1]["library.vtk"], "9");
  EXPECT_THAT(test::message_of<InputError>([] { toml_sections("a = \n", "summary.toml"); }),
              HasSubstr("summary.toml:1"));
}

}  // namespace
}  // namespace lidwright
