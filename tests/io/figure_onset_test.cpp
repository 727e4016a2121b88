#include "io/figure_onset.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "io/onset_table.hpp"
#include "tests/io/figure_samples.hpp"
#include "tests/io/png_image.hpp"
#include "tests/io/scratch.hpp"

namespace lidwright {
namespace {

using namespace test;
using testing::HasSubstr;

/// Least at a third of the modes.
OnsetCurve curve_of(int modes, double relative_error) {
  OnsetCurve c;
  c.least = modes / 3;
  for (int k = 0; k < modes; ++k) {
    OnsetPoint p;
    p.wave.number = k + 1;
    p.rayleigh.value = 657.5 * (1 + (k - c.least) * (k - c.least));
    p.rayleigh.half_width = relative_error * p.rayleigh.value;
    p.on_grids = {p.rayleigh.value};
    c.points.push_back(p);
  }
  return c;
}

TEST(FigureOnset, ATableIsReadBack) {
  const OnsetCurve c = curve_of(4, 0.01), back = read_onset(onset_table(c), "onset.csv");
  ASSERT_EQ(back.points.size(), 4u);
  EXPECT_EQ(back.least, c.least);
  for (std::size_t k = 0; k < 4; ++k) {
    EXPECT_EQ(back.points[k].wave.number, c.points[k].wave.number);
    EXPECT_EQ(back.points[k].rayleigh.value, c.points[k].rayleigh.value);
    EXPECT_EQ(back.points[k].rayleigh.half_width, c.points[k].rayleigh.half_width);
  }
}

TEST(FigureOnset, BadTablesAreNamed) {
  EXPECT_THAT(message_of<InputError>([] { read_onset("mode\n1\n", "o.csv"); }),
              HasSubstr("o.csv: not a table"));
  EXPECT_THAT(message_of<InputError>([] { read_onset(onset_table({}), "o.csv"); }),
              HasSubstr("holds no mode"));
  SavedRun run;
  run.paths.folder = "nowhere";
  EXPECT_THAT(message_of<InputError>([&] { onset_figure(run, {}); }),
              HasSubstr("nowhere: holds no onset.csv"));
}

TEST(FigureOnset, IsDrawnAtEverySizeAndNothingIsCut) {
  for (const int modes : {1, 2, 7, 120})
    for (const double error : {0.0, 0.001, 2.0})
      for (const FigureStyle& style : all_sizes()) {
        const PngImage image(onset_figure(curve_of(modes, error), long_title, style));
        ASSERT_TRUE(image.sound());
        EXPECT_TRUE(white_margins(image, 3)) << modes << ' ' << error << ' ' << image.width();
      }
}

}  // namespace
}  // namespace lidwright
