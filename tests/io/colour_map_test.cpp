#include "io/colour_map.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <string>

#include "tests/support/colour_sight.hpp"

namespace lidwright {
namespace {

TEST(ColourMap, IsTheInverseOfItself) {
  const Colour c{0.8, 0.3, 0.1}, back = to_srgb(to_oklab(c));
  EXPECT_NEAR(back.red, c.red, 1e-6);
  EXPECT_NEAR(back.green, c.green, 1e-6);
  EXPECT_NEAR(back.blue, c.blue, 1e-6);
}

/// Ottosson's definition makes white exactly (1, 0, 0), to the digits of its matrices.
TEST(ColourMap, WhiteIsFullLightness) {
  const OkLab white = to_oklab({1, 1, 1});
  EXPECT_NEAR(white.lightness, 1, 1e-6);
  EXPECT_NEAR(std::hypot(white.a, white.b), 0, 1e-6);
}

class EachColourMap : public testing::TestWithParam<ColourMap> {};

TEST_P(EachColourMap, LightnessRisesAndStepsAreEven) {
  constexpr int steps = 64;
  double least = 1, largest = 0;
  for (int k = 0; k < steps; ++k) {
    const OkLab p = to_oklab(colour_at(k / 64.0, GetParam()));
    const OkLab q = to_oklab(colour_at((k + 1) / 64.0, GetParam()));
    EXPECT_GT(q.lightness, p.lightness) << k;
    least = std::min(least, distance(p, q));
    largest = std::max(largest, distance(p, q));
  }
  EXPECT_LT(largest, 1.03 * least);
  EXPECT_GT(least * steps, 0.65) << "the map is long enough to tell values apart";
}

TEST_P(EachColourMap, EveryColourCanBeShown) {
  for (int k = -10; k <= 110; ++k) {
    const Colour c = colour_at(k / 100.0, GetParam());
    for (const double x : {c.red, c.green, c.blue}) {
      EXPECT_GE(x, 0) << k;
      EXPECT_LE(x, 1) << k;
    }
  }
}

/// Sixteen steps of the map can be told apart: 0.02 in OKLab is seen as a difference (W3C, CSS
/// Color Module Level 4, on the difference in OKLab; from memory), and none is seen as darker than
/// a lower one.
TEST_P(EachColourMap, IsReadByEveryoneAndInGrey) {
  for (const Sight& m : all_sights())
    for (int k = 0; k < 16; ++k) {
      const OkLab p = seen(m, colour_at(k / 16.0, GetParam()));
      const OkLab q = seen(m, colour_at((k + 1) / 16.0, GetParam()));
      EXPECT_GT(distance(p, q), 0.02) << k;
      EXPECT_GT(q.lightness, p.lightness) << k;
    }
}

std::string map_name(const testing::TestParamInfo<ColourMap>& map) {
  return map.param == ColourMap::Warm ? "Warm" : "Cool";
}

INSTANTIATE_TEST_SUITE_P(All, EachColourMap, testing::Values(ColourMap::Warm, ColourMap::Cool),
                         map_name);

/// So that nobody takes a viscosity for a temperature: three times what is just seen, everywhere.
TEST(ColourMap, TheTwoAreToldApart) {
  for (int k = 0; k <= 16; ++k) {
    const OkLab cool = to_oklab(colour_at(k / 16.0, ColourMap::Cool));
    EXPECT_GT(distance(to_oklab(colour_at(k / 16.0)), cool), 0.06) << k;
  }
}

}  // namespace
}  // namespace lidwright
