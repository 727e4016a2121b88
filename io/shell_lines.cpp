#include "io/shell_lines.hpp"

#include <algorithm>
#include <cmath>

#include "io/contours.hpp"

namespace lidwright::plot {
namespace {

/// Corner radius and lateral coordinate at fractions of an index.
double radius_at(const Geometry& g, double i) {
  const int k = std::min(static_cast<int>(i), g.radial_cells() - 1);
  return g.face_radius(k) + (i - k) * (g.face_radius(k + 1) - g.face_radius(k));
}
double lateral_at(const Geometry& g, double j) {
  const int k = std::min(static_cast<int>(j), g.lateral_cells() - 1);
  return g.face_lateral(k) + (j - k) * (g.face_lateral(k + 1) - g.face_lateral(k));
}

/// With the first column once more at the end of a periodic shell.
std::vector<double> closed(const Geometry& g, std::vector<double> corners) {
  const auto rows = static_cast<std::size_t>(g.radial_cells()) + 1;
  if (g.periodic())
    for (std::size_t i = 0; i < rows; ++i) corners.push_back(corners[i]);
  return corners;
}

/// Mean over the cells around one corner.
double corner_mean(const Geometry& g, const std::vector<double>& cells, int i, int j) {
  const int rows = g.radial_cells(), columns = g.lateral_cells();
  double sum = 0;
  int count = 0;
  for (const int column : {j - 1, j}) {
    const int on = g.periodic() ? (column + columns) % columns : column;
    if (on < 0 || on >= columns) continue;
    for (int row = std::max(i - 1, 0); row <= std::min(i, rows - 1); ++row, ++count)
      sum += cells[static_cast<std::size_t>(on) * static_cast<std::size_t>(rows) +
                   static_cast<std::size_t>(row)];
  }
  return sum / count;
}

double distance(Place p, Place q) { return std::hypot(q.x - p.x, q.y - p.y); }

}  // namespace

std::vector<ShellLine> contour_lines(const Geometry& g, const std::vector<double>& corners,
                                     double level, int stride) {
  const std::vector<double> all = closed(g, corners);
  const Lattice lattice{g.radial_cells() + 1, g.lateral_cells() + 1, all};
  const int period = g.periodic() && !g.box() ? g.lateral_cells() : 0;
  std::vector<ShellLine> lines;
  for (const Polyline& line : joined(contour(lattice, level, stride), period)) {
    lines.emplace_back();
    for (const auto& [i, j] : line) lines.back().push_back({radius_at(g, i), lateral_at(g, j)});
  }
  return lines;
}

int stride_for(const ShellMap& map) {
  const double cell = map.units_per_thickness() / map.geometry().radial_cells();
  return std::clamp(static_cast<int>(3 / cell), 1, 8);
}

std::vector<double> corner_means(const Geometry& g, const std::vector<double>& cells) {
  std::vector<double> corners;
  for (int j = 0; j < g.corner_columns(); ++j)
    for (int i = 0; i <= g.radial_cells(); ++i) corners.push_back(corner_mean(g, cells, i, j));
  return corners;
}

std::vector<Place> on_page(const ShellMap& map, const ShellLine& line) {
  std::vector<Place> places;
  for (const ShellPlace& s : line) places.push_back(map.on_page(s.radius, s.lateral));
  return places;
}

Colour colour_of(Tone tone) { return tone == Tone::Ink ? Colour{0.1, 0.1, 0.15} : Colour{1, 1, 1}; }
Tone opposite(Tone tone) { return tone == Tone::Ink ? Tone::White : Tone::Ink; }

void rimmed_line(Canvas& canvas, const std::vector<Place>& places, double width, Tone tone) {
  canvas.line(places, {colour_of(opposite(tone)), width + 1.6, 0.6});
  canvas.line(places, {colour_of(tone), width});
}

double length_of(const std::vector<Place>& line) {
  double sum = 0;
  for (std::size_t k = 1; k < line.size(); ++k) sum += distance(line[k - 1], line[k]);
  return sum;
}

Along along(const std::vector<Place>& line, double wanted) {
  std::size_t k = 1;
  double before = 0;
  while (k + 1 < line.size() && before + distance(line[k - 1], line[k]) < wanted) {
    before += distance(line[k - 1], line[k]);
    ++k;
  }
  const Place p = line[k - 1], q = line[k];
  const double piece = distance(p, q), share = piece > 0 ? (wanted - before) / piece : 0;
  const double dx = piece > 0 ? (q.x - p.x) / piece : 1, dy = piece > 0 ? (q.y - p.y) / piece : 0;
  return {{p.x + share * (q.x - p.x), p.y + share * (q.y - p.y)}, dx, dy};
}

}  // namespace lidwright::plot
