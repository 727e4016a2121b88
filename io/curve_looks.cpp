#include "io/curve_looks.hpp"

#include <algorithm>
#include <array>

namespace lidwright::plot {
namespace {

/// Blue, vermilion, dark violet, ochre: equal steps of lightness; the lightest has a contrast of 3
/// to white.
constexpr std::array<OkLab, curve_colours> looks{
    {{0.41, -0.035, -0.1}, {0.54, 0.165, 0.095}, {0.28, 0.05, -0.09}, {0.67, 0, 0.13}}};
/// Of the colour map: what is lighter fades on white.
constexpr double lightest_share = 0.68;

}  // namespace

Colour curve_colour(std::size_t k) {
  const Colour c = to_srgb(looks[k % curve_colours]);
  const auto shown = [](double x) { return std::clamp(x, 0.0, 1.0); };
  return {shown(c.red), shown(c.green), shown(c.blue)};
}

Colour graded_colour(std::size_t k, std::size_t count) {
  const double share = count < 2 ? 0 : static_cast<double>(k) / static_cast<double>(count - 1);
  return colour_at(lightest_share * share);
}

std::vector<double> dashes(Pattern pattern, double width) {
  const double w = std::max(width, 1.0);
  switch (pattern) {
    case Pattern::Dashed:
      return {4 * w, 2.5 * w};
    case Pattern::Dotted:
      return {w, 1.8 * w};
    case Pattern::DashDotted:
      return {5 * w, 2 * w, w, 2 * w};
    case Pattern::Solid:
      break;
  }
  return {};
}

}  // namespace lidwright::plot
