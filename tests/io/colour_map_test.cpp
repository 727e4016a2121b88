#include "io/colour_map.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <string>

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

using Matrix = std::array<std::array<double, 3>, 3>;

/// What people without one kind of cone see, of linear red, green and blue: G. M. Machado, M. M.
/// Oliveira & L. A. F. Fernandes 2009, IEEE Trans. Vis. Comput. Graph. 15, 1291, severity 1 (from
/// memory; that rows sum to 1, so that white stays white, is tested).
constexpr Matrix protanopia{{{0.152286, 1.052583, -0.204868},
                             {0.114503, 0.786281, 0.099216},
                             {-0.003882, -0.048116, 1.051998}}};
constexpr Matrix deuteranopia{{{0.367322, 0.860646, -0.227968},
                               {0.280085, 0.672501, 0.047413},
                               {-0.011820, 0.042940, 0.968881}}};
constexpr Matrix tritanopia{{{1.255528, -0.076749, -0.178779},
                             {-0.078411, 0.930809, 0.147602},
                             {0.004733, 0.691367, 0.303900}}};
/// Luminance alone (ITU-R BT.709), in all three.
constexpr std::array<double, 3> luminance{0.2126, 0.7152, 0.0722};
constexpr Matrix grey{{luminance, luminance, luminance}};

/// The transfer curve of sRGB (IEC 61966-2-1) and its inverse.
double decoded(double x) { return x <= 0.04045 ? x / 12.92 : std::pow((x + 0.055) / 1.055, 2.4); }
double encoded(double x) {
  return x <= 0.0031308 ? 12.92 * x : 1.055 * std::pow(x, 1 / 2.4) - 0.055;
}

OkLab seen(const Matrix& m, const Colour& c) {
  const std::array<double, 3> linear{decoded(c.red), decoded(c.green), decoded(c.blue)};
  std::array<double, 3> out{};
  for (std::size_t k = 0; k < 3; ++k) {
    const double sum = m[k][0] * linear[0] + m[k][1] * linear[1] + m[k][2] * linear[2];
    out[k] = encoded(std::clamp(sum, 0.0, 1.0));
  }
  return to_oklab({out[0], out[1], out[2]});
}

TEST(ColourBlindness, WhiteStaysWhite) {
  for (const Matrix& m : {protanopia, deuteranopia, tritanopia, grey})
    for (const auto& row : m) EXPECT_NEAR(row[0] + row[1] + row[2], 1, 2e-6);
}

/// Sixteen steps of the map can be told apart: 0.02 in OKLab is seen as a difference (W3C, CSS
/// Color Module Level 4, on the difference in OKLab; from memory), and none is seen as darker than
/// a lower one.
TEST_P(EachColourMap, IsReadByEveryoneAndInGrey) {
  for (const Matrix& m : {protanopia, deuteranopia, tritanopia, grey})
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
