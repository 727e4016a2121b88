#include "io/figure_history.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <limits>

#include "io/run_statistics.hpp"
#include "tests/io/figure_samples.hpp"
#include "tests/io/png_image.hpp"
#include "tests/io/scratch.hpp"
#include "tests/support/records.hpp"

namespace lidwright {
namespace {

using namespace test;
using testing::AllOf;
using testing::HasSubstr;
using testing::Not;

constexpr double undefined = std::numeric_limits<double>::quiet_NaN();

/// Noise about 5 after a start-up that dies away, with other columns beside it.
SavedRun example(int rows = 3000) {
  Dice dice(7);
  const Record noise = red_noise(dice, rows, 3);
  SavedRun run;
  run.paths.folder = "run";
  run.history = NumberTable{{"step", "time", "nusselt_outer", "velocity_rms"},
                            {"1", "d^2/kappa", "1", "kappa/d"},
                            {{}, noise.series.time, noise.series.value, noise.series.value}};
  for (int k = 0; k < rows; ++k) {
    run.history->columns[0].push_back(k);
    run.history->columns[2][static_cast<std::size_t>(k)] += 20 * std::exp(-k / 100.0);
  }
  return run;
}

void add_column(SavedRun& run, const std::string& name, const std::string& unit,
                std::vector<double> values) {
  run.history->names.push_back(name);
  run.history->units.push_back(unit);
  run.history->columns.push_back(std::move(values));
}

HistoryPanel panel_of(const SavedRun& run, const std::string& column, bool logarithmic = false) {
  return history_panels(run, {{column}, logarithmic}, 5).front();
}

RecordSummary summary_of(const SavedRun& run, const std::string& column) {
  const HistoryTable& t = *run.history;
  return summarise(*t.find("time"), *t.find(column),
                   settings_for(*t.find("time"), *t.find("velocity_rms"), run.settings.march));
}

TEST(FigureHistory, ShadesWhatStatisticsLeaveOutAndBandsTheMean) {
  const SavedRun run = example();
  const HistoryPanel p = panel_of(run, "nusselt_outer");
  const RecordSummary s = summary_of(run, "nusselt_outer");
  ASSERT_TRUE(s.enough());
  ASSERT_GT(s.discarded_until, 50) << "the start-up is left out";
  ASSERT_EQ(p.chart.x_bands.size(), 1u);
  EXPECT_EQ(p.chart.x_bands[0].range.low, 0);
  EXPECT_EQ(p.chart.x_bands[0].range.high, s.discarded_until);
  ASSERT_EQ(p.chart.y_bands.size(), 1u);
  EXPECT_EQ(p.chart.y_bands[0].range.low, s.mean - s.error);
  EXPECT_EQ(p.chart.y_bands[0].range.high, s.mean + s.error);
  EXPECT_EQ(p.chart.y_levels.at(0).value, s.mean);
  EXPECT_LT(p.chart.y_bands[0].range.low, 5) << "the true mean";
  EXPECT_GT(p.chart.y_bands[0].range.high, 5);
}

TEST(FigureHistory, ABodyHasItsUnits) {
  SavedRun run = example();
  run.settings.body = Body{2450e3, 1225e3, 4.1, 3400, 3e-5, 3.5, 1200, 230, 1400, 1e20};
  const double million = scales_of(*run.settings.body).time / million_years;
  add_column(run, "temperature_mean", "DeltaT", *run.history->find("nusselt_outer"));
  const HistoryPanel p = panel_of(run, "temperature_mean");
  const RecordSummary s = summary_of(run, "temperature_mean");
  EXPECT_EQ(p.chart.x_label.unit, "Myr");
  EXPECT_EQ(p.chart.y_label.unit, "K");
  EXPECT_DOUBLE_EQ(p.chart.x_bands.at(0).range.high, million * s.discarded_until);
  EXPECT_DOUBLE_EQ(p.chart.y_levels.at(0).value, 230 + 1400 * s.mean);
  EXPECT_NEAR(p.chart.y_bands.at(0).range.high - p.chart.y_levels[0].value, 1400 * s.error, 1e-9);
}

TEST(FigureHistory, WithoutAMeanThePanelSaysWhy) {
  const HistoryPanel p = panel_of(example(40), "nusselt_outer");
  EXPECT_TRUE(p.chart.y_bands.empty());
  EXPECT_THAT(p.mean, HasSubstr("no mean: "));
}

TEST(FigureHistory, ALogarithmLeavesOutWhatIsNotAboveZero) {
  SavedRun run = example(100);
  std::vector<double> values(100, 2);
  values[10] = 0;
  values[20] = -3;
  values[30] = 2000;
  add_column(run, "stress_rms_outer", "1", values);
  add_column(run, "below", "1", std::vector<double>(100, -1));
  const HistoryPanel p = panel_of(run, "stress_rms_outer", true);
  EXPECT_EQ(p.chart.y.spacing, plot::Spacing::Logarithmic);
  EXPECT_GT(p.chart.y.range.low, 0);
  EXPECT_TRUE(std::isnan(p.chart.curves[0].y[10]) && std::isnan(p.chart.curves[0].y[20]));
  EXPECT_THAT(p.mean, HasSubstr("2 values not above 0"));
  EXPECT_EQ(panel_of(run, "below", true).chart.note, "no value is above 0");
}

TEST(FigureHistory, WhatIsNotDefinedIsANote) {
  SavedRun run = example(100);
  add_column(run, "mobility", "1", std::vector<double>(100, undefined));
  EXPECT_EQ(panel_of(run, "mobility").chart.note, "not defined in this run");
}

std::vector<std::string> default_columns(const SavedRun& run) {
  std::vector<std::string> words;
  for (const HistoryPanel& p : history_panels(run, {}, 5)) words.push_back(p.chart.y_label.what);
  return words;
}

TEST(FigureHistory, ALidIsShownWhereThereMayBeOne) {
  SavedRun run = example(100);
  add_column(run, "mobility", "1", std::vector<double>(100, 0.1));
  add_column(run, "frank_kamenetskii", "1", std::vector<double>(100, 0));
  EXPECT_THAT(default_columns(run), Not(testing::Contains("mobility")));
  run.history->columns.back().assign(100, 12);
  EXPECT_THAT(default_columns(run), testing::Contains("mobility"));
}

TEST(FigureHistory, BadInputIsNamed) {
  const SavedRun run = example(10);
  EXPECT_THAT(message_of<InputError>([&] { panel_of(run, "nuselt_outer"); }),
              AllOf(HasSubstr("run/history.csv"), HasSubstr("no column 'nuselt_outer'"),
                    HasSubstr("did you mean 'nusselt_outer'?")));
  SavedRun without = run;
  without.history.reset();
  EXPECT_THAT(message_of<InputError>([&] { history_panels(without, {}, 5); }),
              HasSubstr("no history.csv"));
  SavedRun empty = example(0);
  EXPECT_THAT(message_of<InputError>([&] { history_panels(empty, {}, 5); }),
              HasSubstr("has no rows yet"));
  const HistoryOptions many{std::vector<std::string>(40, "velocity_rms"), false};
  EXPECT_THAT(message_of<InputError>([&] { history_figure(run, many, {FigureSize::Slide}); }),
              AllOf(HasSubstr("40 columns"), HasSubstr("--columns")));
}

/// Shaded pixels of a row over those of the frame.
double shaded_share(const PngImage& image, int y, int frame_right) {
  const unsigned ground = image.colour(image.width() / 8, y);
  int first = image.width(), last = 0;
  for (int x = 0; x < image.width(); ++x)
    if (image.colour(x, y) == ground) {
      first = std::min(first, x);
      last = x;
    }
  return static_cast<double>(last - first + 1) / (frame_right - first);
}

TEST(FigureHistory, TheShadedPartEndsWhereItShould) {
  const SavedRun run = example();
  const PngImage image(history_figure(run, {{"nusselt_outer"}, false}, {FigureSize::TwoColumn}));
  const RecordSummary s = summary_of(run, "nusselt_outer");
  const double scale = 300.0 / 144, share = s.discarded_until / run.history->find("time")->back();
  const int below_the_upper_border = static_cast<int>((8 + 23 + 26 + 4) * scale);
  EXPECT_NEAR(shaded_share(image, below_the_upper_border,
                           image.width() - static_cast<int>(plot::chart_margins.right * scale)),
              share, 0.01);
}

struct Awkward {
  std::string name;
  int rows;
  std::function<double(int)> value;
};

class AwkwardHistory : public testing::TestWithParam<Awkward> {};

TEST_P(AwkwardHistory, IsDrawnAtEverySizeAndNothingIsCut) {
  SavedRun run = example(GetParam().rows);
  run.settings.title = long_title;
  std::vector<double> values;
  for (int k = 0; k < GetParam().rows; ++k) values.push_back(GetParam().value(k));
  add_column(run, "a_column_with_a_name_that_is_longer_than_any_other_column_has_it",
             "eta kappa^2 d^(n-4)", values);
  const std::vector<std::string> columns{run.history->names.back(), "nusselt_outer"};
  const auto expect_whole = [&](const FigureStyle& style, bool logarithmic) {
    const PngImage image(history_figure(run, {columns, logarithmic}, style));
    ASSERT_TRUE(image.sound());
    EXPECT_TRUE(white_margins(image, 3)) << logarithmic << ' ' << image.width();
  };
  for (const FigureStyle& style : all_sizes()) expect_whole(style, false);
  expect_whole({FigureSize::OneColumn}, true);
}

const std::vector<Awkward> awkward{
    {"Constant", 300, [](int) { return 5.0; }},
    {"Undefined", 300, [](int) { return undefined; }},
    {"MostlyUndefined", 300, [](int k) { return k % 50 == 0 ? 1.0 : undefined; }},
    {"OneRow", 1, [](int) { return 3.0; }},
    {"TwoRows", 2, [](int k) { return k + 1.0; }},
    {"Huge", 300, [](int k) { return 1e300 * (1 + k % 7); }},
    {"Tiny", 300, [](int k) { return 1e-300 * (1 + k % 7); }},
    {"Negative", 300, [](int k) { return -1e5 - k % 7; }},
    {"NearlyConstant", 300, [](int k) { return 123456.789 + 1e-6 * (k % 7); }},
    {"Infinite", 300, [](int k) { return k == 7 ? INFINITY : 1.0 + k % 3; }},
    {"ManyRows", 20000, [](int k) { return std::sin(k * 0.1); }}};

INSTANTIATE_TEST_SUITE_P(All, AwkwardHistory, testing::ValuesIn(awkward),
                         [](const auto& p) { return p.param.name; });

}  // namespace
}  // namespace lidwright
