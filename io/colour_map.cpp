#include "io/colour_map.hpp"

#include <algorithm>
#include <cmath>

namespace lidwright {
namespace {

constexpr int entries = 1025;
using Path = std::array<OkLab, entries>;

/// Ends and control points of a curve in the plane (a, b); lightness runs evenly between its ends.
using Bends = std::array<std::array<double, 2>, 4>;
constexpr Bends warm{{{-0.05, -0.01}, {-0.065, -0.18}, {0.27, 0.05}, {-0.035, 0.155}}};
constexpr Bends cool{{{0.06, -0.08}, {0.05, -0.25}, {-0.16, -0.06}, {-0.06, 0.09}}};
constexpr double darkest = 0.26, lightest = 0.94;

double bezier(const Bends& bends, double s, std::size_t k) {
  const double t = 1 - s;
  return t * t * t * bends[0][k] + 3 * t * t * s * bends[1][k] + 3 * t * s * s * bends[2][k] +
         s * s * s * bends[3][k];
}

bool on_screen(const Colour& c) {
  const auto fits = [](double x) { return x >= 0 && x <= 1; };
  return fits(c.red) && fits(c.green) && fits(c.blue);
}

/// The most colourful colour of that lightness and hue, up to the one given, that a screen can
/// show.
OkLab shown(const OkLab& wish) {
  const auto paler = [&](double share) {
    return OkLab{wish.lightness, share * wish.a, share * wish.b};
  };
  if (on_screen(to_srgb(wish))) return wish;
  double low = 0, high = 1;
  for (int k = 0; k < 40; ++k) {
    const double middle = (low + high) / 2;
    (on_screen(to_srgb(paler(middle))) ? low : high) = middle;
  }
  return paler(low);
}

OkLab between(const OkLab& p, const OkLab& q, double share) {
  const auto mix = [&](double x, double y) { return x + share * (y - x); };
  return {mix(p.lightness, q.lightness), mix(p.a, q.a), mix(p.b, q.b)};
}

Path curve(const Bends& bends) {
  Path path;
  for (int k = 0; k < entries; ++k) {
    const double s = static_cast<double>(k) / (entries - 1);
    path[static_cast<std::size_t>(k)] =
        shown({darkest + (lightest - darkest) * s, bezier(bends, s, 0), bezier(bends, s, 1)});
  }
  return path;
}

/// The same curve with points at equal distances along it.
Path evenly_spaced(const Path& path) {
  std::array<double, entries> length{};
  for (std::size_t k = 1; k < entries; ++k)
    length[k] = length[k - 1] + distance(path[k - 1], path[k]);
  Path even;
  std::size_t k = 1;
  for (std::size_t n = 0; n < entries; ++n) {
    const double wanted = length.back() * static_cast<double>(n) / (entries - 1);
    while (k + 1 < entries && length[k] < wanted) ++k;
    even[n] = between(path[k - 1], path[k], (wanted - length[k - 1]) / (length[k] - length[k - 1]));
  }
  return even;
}

using Table = std::array<Colour, entries>;

Table table(const Bends& bends) {
  const Path path = evenly_spaced(curve(bends));
  Table colours;
  std::transform(path.begin(), path.end(), colours.begin(), [](const OkLab& c) {
    const Colour s = to_srgb(c);  // outside by no more than round-off and a chord's height
    const auto clamped = [](double x) { return std::clamp(x, 0.0, 1.0); };
    return Colour{clamped(s.red), clamped(s.green), clamped(s.blue)};
  });
  return colours;
}

/// The transfer curve of sRGB (IEC 61966-2-1) and its inverse.
double encoded(double x) {
  return x <= 0.0031308 ? 12.92 * x : 1.055 * std::pow(x, 1 / 2.4) - 0.055;
}
double decoded(double x) { return x <= 0.04045 ? x / 12.92 : std::pow((x + 0.055) / 1.055, 2.4); }

double cube(double x) { return x * x * x; }

}  // namespace

Colour to_srgb(const OkLab& c) {
  const double l = cube(c.lightness + 0.3963377774 * c.a + 0.2158037573 * c.b);
  const double m = cube(c.lightness - 0.1055613458 * c.a - 0.0638541728 * c.b);
  const double s = cube(c.lightness - 0.0894841775 * c.a - 1.2914855480 * c.b);
  return {encoded(4.0767416621 * l - 3.3077115913 * m + 0.2309699292 * s),
          encoded(-1.2684380046 * l + 2.6097574011 * m - 0.3413193965 * s),
          encoded(-0.0041960863 * l - 0.7034186147 * m + 1.7076147010 * s)};
}

OkLab to_oklab(const Colour& c) {
  const double r = decoded(c.red), g = decoded(c.green), b = decoded(c.blue);
  const double l = std::cbrt(0.4122214708 * r + 0.5363325363 * g + 0.0514459929 * b);
  const double m = std::cbrt(0.2119034982 * r + 0.6806995451 * g + 0.1073969566 * b);
  const double s = std::cbrt(0.0883024619 * r + 0.2817188376 * g + 0.6299787005 * b);
  return {0.2104542553 * l + 0.7936177850 * m - 0.0040720468 * s,
          1.9779984951 * l - 2.4285922050 * m + 0.4505937099 * s,
          0.0259040371 * l + 0.7827717662 * m - 0.8086757660 * s};
}

double distance(const OkLab& p, const OkLab& q) {
  return std::sqrt((p.lightness - q.lightness) * (p.lightness - q.lightness) +
                   (p.a - q.a) * (p.a - q.a) + (p.b - q.b) * (p.b - q.b));
}

Colour colour_at(double share, ColourMap map) {
  static const Table warm_table = table(warm), cool_table = table(cool);
  const Table& colours = map == ColourMap::Warm ? warm_table : cool_table;
  const double place = std::clamp(share, 0.0, 1.0) * (entries - 1);
  return colours[static_cast<std::size_t>(std::lround(place))];
}

}  // namespace lidwright
