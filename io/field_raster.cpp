#include "io/field_raster.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <cstdint>
#include <memory>

namespace lidwright::plot {
namespace {

/// The cell that holds a coordinate, given the faces in rising order: a guess for even cells, then
/// steps.
std::size_t cell_holding(const std::vector<double>& faces, double x) {
  const std::size_t last = faces.size() - 2;
  const double share = (x - faces.front()) / (faces.back() - faces.front());
  std::size_t k = std::min(
      static_cast<std::size_t>(std::max(share, 0.0) * static_cast<double>(last + 1)), last);
  while (k > 0 && x < faces[k]) --k;
  while (k < last && x >= faces[k + 1]) ++k;
  return k;
}

std::uint32_t packed(const Colour& c) {
  const auto byte = [](double x) { return static_cast<std::uint32_t>(std::lround(255 * x)); };
  return byte(c.red) << 16 | byte(c.green) << 8 | byte(c.blue);
}

/// The map's colours as pixels, at more shares than a screen can tell apart.
class Palette {
 public:
  explicit Palette(ColourMap map) {
    for (std::size_t k = 0; k < colours_.size(); ++k)
      colours_[k] = packed(colour_at(static_cast<double>(k) / steps, map));
  }
  std::uint32_t operator()(double share) const {
    return colours_[static_cast<std::size_t>(std::lround(std::clamp(share, 0.0, 1.0) * steps))];
  }

 private:
  static constexpr int steps = 1024;
  std::array<std::uint32_t, steps + 1> colours_{};
};

/// The shell, pixel by pixel of a resolution.
class Sampler {
 public:
  Sampler(const ShellMap& map, const std::vector<double>& cells, double pixels_per_unit)
      : map_(map), read_(map.geometry(), cells), pixel_(1 / pixels_per_unit) {}

  bool needed(Place middle) const { return map_.near(middle, 2 * pixel_); }
  /// Mean of four samples, so that cells smaller than a pixel do not flicker. The samples are found
  /// from the middle along straight lines: within a pixel no shell is bent.
  double operator()(Place middle) const {
    const ShellPlace s = map_.in_shell(middle);
    const Steps along = steps_at(s);
    double sum = 0;
    for (const double dx : {-0.25, 0.25})
      for (const double dy : {-0.25, 0.25})
        sum += read_(s.radius + along.x.radius * dx + along.y.radius * dy,
                     s.lateral + along.x.lateral * dx + along.y.lateral * dy);
    return sum / 4;
  }

 private:
  /// What one pixel to the right (x) and one downwards (y) is in the shell.
  struct Steps {
    ShellPlace x, y;
  };
  Steps steps_at(const ShellPlace& s) const {
    const Geometry& g = map_.geometry();
    const auto outwards = g.cartesian_vector(1, 0, s.lateral);
    const auto along = g.cartesian_vector(0, 1, s.lateral);
    const double size = pixel_ / map_.units_per_thickness();
    const double turn = size / (g.box() ? 1 : s.radius);
    return {{outwards[0] * size, along[0] * turn}, {-outwards[1] * size, -along[1] * turn}};
  }

  const ShellMap& map_;
  CellReader read_;
  double pixel_;
};

double share_of(const Interval& range, double value) {
  return range.empty() ? 0.5 : (value - range.low) / (range.high - range.low);
}

/// Pixels, opaque, of a part of the page whose corner is at whole pixels.
struct Raster {
  int left, top, width, height;
  std::vector<std::uint32_t> pixels;
};

Raster raster_over(const Frame& f, double pixels_per_unit) {
  const auto pixels = [&](double units) { return units * pixels_per_unit; };
  return {static_cast<int>(std::floor(pixels(f.left))),
          static_cast<int>(std::floor(pixels(f.top))),
          static_cast<int>(std::ceil(pixels(f.width))) + 2,
          static_cast<int>(std::ceil(pixels(f.height))) + 2,
          {}};
}

Raster raster_of_cells(const ShellMap& map, const std::vector<double>& cells, const Interval& range,
                       ColourMap colours, double pixels_per_unit) {
  Raster raster = raster_over(map.frame(), pixels_per_unit);
  const Sampler sample(map, cells, pixels_per_unit);
  const Palette palette(colours);
  raster.pixels.reserve(static_cast<std::size_t>(raster.width) *
                        static_cast<std::size_t>(raster.height));
  for (int y = 0; y < raster.height; ++y)
    for (int x = 0; x < raster.width; ++x) {
      const Place middle{(raster.left + x + 0.5) / pixels_per_unit,
                         (raster.top + y + 0.5) / pixels_per_unit};
      raster.pixels.push_back(sample.needed(middle) ? palette(share_of(range, sample(middle)))
                                                    : palette(0));
    }
  return raster;
}

/// Pixel by pixel: the page's own in a PNG, sharp squares elsewhere.
void paint(Canvas& canvas, Raster& raster) {
  const std::unique_ptr<cairo_surface_t, void (*)(cairo_surface_t*)> image(
      cairo_image_surface_create_for_data(reinterpret_cast<unsigned char*>(raster.pixels.data()),
                                          CAIRO_FORMAT_RGB24, raster.width, raster.height,
                                          4 * raster.width),
      cairo_surface_destroy);
  cairo_t* cr = canvas.context();
  cairo_scale(cr, 1 / canvas.pixels_per_unit(), 1 / canvas.pixels_per_unit());
  cairo_set_source_surface(cr, image.get(), raster.left, raster.top);
  cairo_pattern_set_filter(cairo_get_source(cr), CAIRO_FILTER_NEAREST);
  cairo_paint(cr);
}

}  // namespace

CellReader::CellReader(const Geometry& g, const std::vector<double>& cells) : cells_(cells) {
  for (int i = 0; i <= g.radial_cells(); ++i) radii_.push_back(g.face_radius(i));
  for (int j = 0; j <= g.lateral_cells(); ++j) laterals_.push_back(g.face_lateral(j));
}

double CellReader::operator()(double radius, double lateral) const {
  return cells_[cell_holding(laterals_, lateral) * (radii_.size() - 1) +
                cell_holding(radii_, radius)];
}

void draw_cells(Canvas& canvas, const ShellMap& map, const std::vector<double>& cells,
                const Interval& range, ColourMap colours) {
  Raster raster = raster_of_cells(map, cells, range, colours, canvas.pixels_per_unit());
  const Saved saved(canvas);
  map.trace_outline(canvas);
  cairo_set_fill_rule(canvas.context(), CAIRO_FILL_RULE_EVEN_ODD);
  cairo_clip(canvas.context());
  paint(canvas, raster);
}

}  // namespace lidwright::plot
