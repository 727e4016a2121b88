#include "io/isotherms.hpp"

#include <algorithm>
#include <cmath>

#include "io/plot_chart.hpp"

namespace lidwright::plot {
namespace {

constexpr double line_width = 0.9, label_size = 12, label_room = 34;
constexpr int most_isotherms = 6;

bool apart(Place p, const std::vector<PlacedText>& others) {
  return std::all_of(others.begin(), others.end(), [&](const PlacedText& o) {
    return std::hypot(o.middle.x - p.x, o.middle.y - p.y) > label_room;
  });
}

bool on_frame(const Frame& f, Place p) {
  const double air = label_size / 2;
  return p.x > f.left + label_room / 2 && p.x < f.right() - label_room / 2 && p.y > f.top + air &&
         p.y < f.bottom() - air;
}

/// The first of some places along the longest line that is free; none: the label is left out.
void add_label(std::vector<PlacedText>& labels, const std::vector<std::vector<Place>>& lines,
               const std::string& text, const Frame& frame) {
  const auto longest =
      std::max_element(lines.begin(), lines.end(),
                       [](const auto& p, const auto& q) { return length_of(p) < length_of(q); });
  if (longest == lines.end() || length_of(*longest) < 1.5 * label_room) return;
  for (const double share : {0.5, 0.35, 0.65, 0.2, 0.8, 0.43, 0.57, 0.27, 0.73}) {
    const Place p = along(*longest, share * length_of(*longest)).place;
    if (!apart(p, labels) || !on_frame(frame, p)) continue;
    labels.push_back({text, p});
    return;
  }
}

/// Depth where a straight line between two cells' middles reaches the level.
double reached(const Geometry& g, int i, double upper, double lower, double level) {
  return g.depth(i) - (g.depth(i) - g.depth(i + 1)) * (lower - level) / (lower - upper);
}

}  // namespace

Axis isotherm_levels(const std::vector<double>& temperature, const Shown& units) {
  const Interval r = range_of(temperature);
  const double air = 0.03 * (r.high - r.low);
  if (r.empty()) return {};
  return linear_axis({units(r.low + air), units(r.high - air)}, most_isotherms);
}

std::vector<PlacedText> draw_isotherms(Canvas& canvas, const ShellMap& map,
                                       const std::vector<double>& temperature, const Shown& units) {
  const std::vector<double> corners = corner_means(map.geometry(), temperature);
  std::vector<PlacedText> labels;
  for (const Tick& t : isotherm_levels(temperature, units).ticks) {
    const double level = (t.value - units.offset) / units.scale;
    std::vector<std::vector<Place>> lines;
    for (const ShellLine& line : contour_lines(map.geometry(), corners, level, stride_for(map)))
      lines.push_back(on_page(map, line));
    for (const auto& line : lines) rimmed_line(canvas, line, line_width);
    add_label(labels, lines, t.label, map.frame());
  }
  return labels;
}

void draw_labels(Canvas& canvas, const std::vector<PlacedText>& labels) {
  for (const PlacedText& l : labels) canvas.text_on_patch(l.text, l.middle, {label_size, ink});
}

std::vector<double> depths_of(const Geometry& g, const std::vector<double>& temperature,
                              double level) {
  const int rows = g.radial_cells();
  std::vector<double> depths;
  for (int j = 0; j < g.lateral_cells(); ++j) {
    const auto at = [&](int i) { return temperature[static_cast<std::size_t>(j * rows + i)]; };
    double depth = at(rows - 1) >= level ? 0 : std::nan("");
    for (int i = rows - 2; i >= 0 && std::isnan(depth); --i)
      if (at(i) >= level) depth = reached(g, i, at(i + 1), at(i), level);
    depths.push_back(depth);
  }
  return depths;
}

void draw_lid(Canvas& canvas, const ShellMap& map, const std::vector<double>& depths) {
  const Geometry& g = map.geometry();
  std::vector<Place> line;
  const auto end = [&] {
    if (line.size() > 1) broken_line(canvas, line);
    line.clear();
  };
  const int columns = g.lateral_cells(), closing = g.periodic() && !g.box() ? 1 : 0;
  for (int k = 0; k < columns + closing; ++k) {
    const int j = k % columns;
    const double depth = depths[static_cast<std::size_t>(j)];
    if (std::isfinite(depth))
      line.push_back(map.on_page(g.outer_radius() - depth, g.cell_lateral(j)));
    else
      end();
  }
  end();
}

void broken_line(Canvas& canvas, const std::vector<Place>& places) {
  constexpr double dashes[] = {7, 4};
  const Saved saved(canvas);
  canvas.line(places, {{1, 1, 1}, 3.4, 0.65});
  cairo_set_dash(canvas.context(), dashes, 2, 0);
  canvas.line(places, {ink, 1.8});
}

}  // namespace lidwright::plot
