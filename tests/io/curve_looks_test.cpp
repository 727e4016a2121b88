#include "io/curve_looks.hpp"

#include <gtest/gtest.h>

#include "io/plot_chart.hpp"
#include "tests/support/colour_sight.hpp"

namespace lidwright::plot {
namespace {

TEST(ColourSight, WhiteStaysWhite) {
  for (const Sight& s : all_sights())
    for (const auto& row : s.of_linear) EXPECT_NEAR(row[0] + row[1] + row[2], 1, 2e-6) << s.name;
}

/// Five times what is seen as a difference at all (0.02 in OKLab; W3C, CSS Color Module Level 4;
/// from memory).
TEST(CurveLooks, ColoursCanBeToldApartByEveryoneAndInGrey) {
  for (const Sight& s : all_sights())
    for (std::size_t p = 0; p < curve_colours; ++p)
      for (std::size_t q = 0; q < p; ++q)
        EXPECT_GT(distance(seen(s, curve_colour(p)), seen(s, curve_colour(q))), 0.1)
            << s.name << ' ' << p << ' ' << q;
}

/// Contrast of graphical objects of at least 3 to their ground: W3C, WCAG 2.1, criterion 1.4.11
/// (from memory).
TEST(CurveLooks, EveryColourStandsOutFromWhite) {
  for (std::size_t k = 0; k < curve_colours; ++k) {
    const Colour c = curve_colour(k);
    const double luminance =
        0.2126 * decoded(c.red) + 0.7152 * decoded(c.green) + 0.0722 * decoded(c.blue);
    EXPECT_GE(1.05 / (luminance + 0.05), 3) << k;
  }
}

TEST(CurveLooks, TimesGrowLighter) {
  for (const Sight& s : all_sights())
    for (std::size_t k = 1; k < 8; ++k)
      EXPECT_GT(seen(s, graded_colour(k, 8)).lightness, seen(s, graded_colour(k - 1, 8)).lightness)
          << s.name;
}

TEST(PlotChart, ThinningKeepsExtremesAndBreaks) {
  Curve c;
  for (int k = 0; k < 20000; ++k) {
    c.x.push_back(k);
    c.y.push_back(k == 12345 ? 100 : k == 777 ? -100 : k == 5000 ? std::nan("") : k % 7);
  }
  const Curve few = thinned(c, 500);
  EXPECT_LE(few.x.size(), 501u);
  const Interval y = range_of(few.y), x = range_of(few.x);
  EXPECT_EQ(y.low, -100);
  EXPECT_EQ(y.high, 100);
  EXPECT_EQ(x.low, 0);
  EXPECT_EQ(x.high, 19999);
  EXPECT_TRUE(std::any_of(few.y.begin(), few.y.end(), [](double v) { return std::isnan(v); }));
}

TEST(PlotAxis, FewDecadesInALogarithmHaveTicksToo) {
  const Axis axis = axis_of_values({3.1, 3.4}, Spacing::Logarithmic, 5);
  EXPECT_EQ(axis.spacing, Spacing::Logarithmic);
  EXPECT_GE(axis.ticks.size(), 2u);
  EXPECT_LT(axis.range.low, 3.1);
  EXPECT_GT(axis.range.high, 3.4);
}

/// Labels of a range that is all but empty would need too many digits.
TEST(PlotAxis, AConstantHasShortLabels) {
  for (const double value : {0.0, 5.0, -1e300, 1e-300})
    for (const Tick& t : axis_of_values({value, value * (1 + 1e-12)}, Spacing::Linear, 5).ticks)
      EXPECT_LE(t.label.size(), 9u) << value << ": " << t.label;
}

}  // namespace
}  // namespace lidwright::plot
