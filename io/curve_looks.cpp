#include "io/curve_looks.hpp"

#include <algorithm>
#include <array>

namespace lidwright::plot {
namespace {

/// Dark violet, blue, vermilion, ochre: lightness rises by 0.115 or more from one to the next in
/// the order of lightness.
constexpr std::array<OkLab, curve_colours> looks{{{0.44, -0.045, -0.105},
                                                  {0.56, 0.175, 0.105},
                                                  {0.28, 0.035, -0.08},
                                                  {0.68, 0.02, 0.135}}};
/// Of the colour map: what is lighter fades on white.
constexpr double lightest_share = 0.78;

}  // namespace

Colour curve_colour(std::size_t k) {
  const Colour c = to_srgb(looks[k % curve_colours]);
  const auto shown = [](double x) { return std::clamp(x, 0.0, 1.0); };
  return {shown(c.red), shown(c.green), shown(c.blue)};
}

CurveLook curve_look(std::size_t k) {
  constexpr std::array<Pattern, 4> patterns{Pattern::Solid, Pattern::Dashed, Pattern::DashDotted,
                                            Pattern::Dotted};
  return {curve_colour(k), patterns[(k + k / curve_colours) % patterns.size()]};
}

Colour graded_colour(std::size_t k, std::size_t count) {
  const double share = count < 2 ? 0 : static_cast<double>(k) / static_cast<double>(count - 1);
  return colour_at(lightest_share * share);
}

std::vector<double> dashes(Pattern pattern, double width) {
  const double w = std::max(width, 1.0);
  switch (pattern) {
    case Pattern::Dashed: return {4 * w, 2.5 * w};
    case Pattern::Dotted: return {w, 1.8 * w};
    case Pattern::DashDotted: return {5 * w, 2 * w, w, 2 * w};
    case Pattern::Solid: break;
  }
  return {};
}

}  // namespace lidwright::plot
