#include "io/flow_lines.hpp"

#include <algorithm>
#include <cmath>

#include "io/field_raster.hpp"
#include "io/plot_chart.hpp"

namespace lidwright::plot {
namespace {

constexpr double head_length = 6.5, head_every = 190, least_with_head = 26;
constexpr double arrow_spacing = 30, wall_clearance = 5, shortest_arrow = 3;
constexpr double opacity = 0.6;

double share_of(const Interval& range, double value) {
  return range.empty() ? 0.5 : (value - range.low) / (range.high - range.low);
}

/// Levels between the extremes, none of them 0: walls are lines of flow already.
std::vector<double> flow_levels(const Interval& psi, int lines) {
  const double step = (psi.high - psi.low) / lines;
  std::vector<double> levels;
  const double air = 0.2 * step;  // no specks around an extreme
  for (double k = std::floor(psi.low / step) + 0.5; k * step < psi.high - air; ++k)
    if (k * step > psi.low + air) levels.push_back(k * step);
  return levels;
}

/// Fewer in a shell that is thin on the page.
int lines_in(const ShellMap& map) {
  return std::clamp(static_cast<int>(map.units_per_thickness() / 9), 4, 11);
}

std::vector<ShellLine> flow_lines(const ShellMap& map, const std::vector<double>& psi) {
  const Interval range = range_of(psi);
  std::vector<ShellLine> all;
  if (range.empty()) return all;
  for (const double level : flow_levels(range, lines_in(map)))
    for (ShellLine& line : contour_lines(map.geometry(), psi, level, stride_for(map)))
      all.push_back(std::move(line));
  return all;
}

/// The tone that is seen well. Along a line it changes only where the ground does so for certain: a
/// line over middling ground would look broken.
class Contrast {
 public:
  Contrast(const Geometry& g, const std::vector<double>& cells, const Interval& range)
      : read_(g, cells), range_(range) {}
  Tone tone(const ShellPlace& s) const { return tone_at(s, middle); }
  std::vector<Tone> tones(const ShellLine& line) const {
    std::vector<Tone> all;
    for (const ShellPlace& s : line) {
      const double turn = all.empty() ? 0 : all.back() == Tone::White ? sureness : -sureness;
      all.push_back(tone_at(s, middle + turn));
    }
    return all;
  }

 private:
  static constexpr double middle = 0.5, sureness = 0.12;
  Tone tone_at(const ShellPlace& s, double limit) const {
    return share_of(range_, read_(s.radius, s.lateral)) < limit ? Tone::White : Tone::Ink;
  }

  CellReader read_;
  Interval range_;
};

/// Adds the parts of a line that have one tone to the canvas's path.
void add_parts(Canvas& canvas, const ShellMap& map, const ShellLine& line, const Contrast& contrast,
               Tone tone) {
  bool drawing = false;
  const std::vector<Tone> tones = contrast.tones(line);
  for (std::size_t k = 1; k < line.size(); ++k) {
    const bool wanted = tones[k - 1] == tone;
    const Place p = map.on_page(line[k - 1].radius, line[k - 1].lateral);
    const Place q = map.on_page(line[k].radius, line[k].lateral);
    if (wanted && !drawing) cairo_move_to(canvas.context(), p.x, p.y);
    if (wanted) cairo_line_to(canvas.context(), q.x, q.y);
    drawing = wanted;
  }
}

void draw_lines(Canvas& canvas, const ShellMap& map, const std::vector<ShellLine>& lines,
                const Contrast& contrast) {
  for (const Tone tone : {Tone::White, Tone::Ink}) {
    cairo_new_path(canvas.context());
    for (const ShellLine& line : lines) add_parts(canvas, map, line, contrast, tone);
    canvas.stroke({colour_of(tone), 0.9, opacity});
  }
}

/// The velocity at a place, along x and y of the page.
class FlowReader {
 public:
  FlowReader(const ShellMap& map, const Flow& flow)
      : map_(map), radial_(map.geometry(), flow.radial), lateral_(map.geometry(), flow.lateral) {}
  Place operator()(Place p) const {
    const ShellPlace s = map_.in_shell(p);
    const auto [x, y] = map_.geometry().cartesian_vector(radial_(s.radius, s.lateral),
                                                         lateral_(s.radius, s.lateral), s.lateral);
    return {x, -y};
  }

 private:
  const ShellMap& map_;
  CellReader radial_, lateral_;
};

/// A filled triangle with its point at a place.
void head(Canvas& canvas, Place tip, double dx, double dy, double length, Colour colour) {
  const double half = 0.38 * length;
  cairo_t* cr = canvas.context();
  cairo_new_path(cr);
  cairo_move_to(cr, tip.x, tip.y);
  cairo_line_to(cr, tip.x - length * dx - half * dy, tip.y - length * dy + half * dx);
  cairo_line_to(cr, tip.x - length * dx + half * dy, tip.y - length * dy - half * dx);
  cairo_close_path(cr);
  cairo_set_source_rgb(cr, colour.red, colour.green, colour.blue);
  cairo_fill(cr);
}

void draw_heads(Canvas& canvas, const ShellMap& map, const ShellLine& line, const FlowReader& flow,
                const Contrast& contrast) {
  const std::vector<Place> places = on_page(map, line);
  const double length = length_of(places);
  if (length < least_with_head) return;
  const int heads = std::max(1, static_cast<int>(length / head_every));
  for (int k = 0; k < heads; ++k) {
    const Along a = along(places, (k + 0.5) * length / heads);
    const Place u = flow(a.place);
    const double way = u.x * a.dx + u.y * a.dy < 0 ? -1 : 1;
    const double reach = way * head_length / 2;
    head(canvas, {a.place.x + reach * a.dx, a.place.y + reach * a.dy}, way * a.dx, way * a.dy,
         head_length, colour_of(contrast.tone(map.in_shell(a.place))));
  }
}

bool well_inside(const ShellMap& map, Place p) {
  for (const double dx : {-wall_clearance, wall_clearance})
    for (const double dy : {-wall_clearance, wall_clearance}) {
      const ShellPlace s = map.in_shell({p.x + dx, p.y + dy});
      const Place back = map.on_page(s.radius, s.lateral);
      if (std::hypot(back.x - p.x - dx, back.y - p.y - dy) > 0.5) return false;
    }
  return true;
}

/// Places in rows that are shifted by half a distance from each other.
std::vector<Place> arrow_places(const ShellMap& map) {
  const Frame f = map.frame();
  const double row_height = std::min(arrow_spacing * 0.8660254037844386, f.height / 2);
  std::vector<Place> places;
  int row = 0;
  for (double y = f.top + row_height / 2; y < f.bottom(); y += row_height, ++row)
    for (double x = f.left + arrow_spacing * (row % 2 == 0 ? 0.5 : 1); x < f.right();
         x += arrow_spacing)
      if (well_inside(map, {x, y})) places.push_back({x, y});
  return places;
}

}  // namespace

void draw_flow_lines(Canvas& canvas, const ShellMap& map,
                     const std::vector<double>& stream_function, const std::vector<double>& cells,
                     const Interval& range) {
  draw_lines(canvas, map, flow_lines(map, stream_function), Contrast(map.geometry(), cells, range));
}

void draw_directed_flow_lines(Canvas& canvas, const ShellMap& map,
                              const std::vector<double>& stream_function, const Flow& flow,
                              const std::vector<double>& cells, const Interval& range) {
  const Contrast contrast(map.geometry(), cells, range);
  const FlowReader velocity(map, flow);
  const std::vector<ShellLine> lines = flow_lines(map, stream_function);
  draw_lines(canvas, map, lines, contrast);
  for (const ShellLine& line : lines) draw_heads(canvas, map, line, velocity, contrast);
}

double arrow_scale(const Flow& flow) {
  std::vector<double> speeds;
  for (std::size_t k = 0; k < flow.radial.size(); ++k)
    speeds.push_back(std::hypot(flow.radial[k], flow.lateral[k]));
  if (speeds.empty()) return 0;
  const auto fast = speeds.end() - 1 - static_cast<std::ptrdiff_t>(speeds.size() / 100);
  std::nth_element(speeds.begin(), fast, speeds.end());
  return *fast > 0 ? usual_arrow / *fast : 0;
}

void draw_arrow(Canvas& canvas, Place from, double dx, double dy, Tone tone) {
  const double length = std::hypot(dx, dy);
  if (!(length > 0)) return;
  const double x = dx / length, y = dy / length, tip = std::min(head_length, 0.6 * length);
  const Place to{from.x + dx, from.y + dy};
  const Place neck{to.x - 0.8 * tip * x, to.y - 0.8 * tip * y};
  head(canvas, {to.x + 0.8 * x, to.y + 0.8 * y}, x, y, tip + 1.6, colour_of(opposite(tone)));
  rimmed_line(canvas, {from, neck}, 1.1, tone);
  head(canvas, to, x, y, tip, colour_of(tone));
}

void draw_arrows(Canvas& canvas, const ShellMap& map, const Flow& flow,
                 const std::vector<double>& cells, const Interval& range) {
  const double scale = arrow_scale(flow);
  const FlowReader velocity(map, flow);
  const Contrast contrast(map.geometry(), cells, range);
  for (const Place p : arrow_places(map)) {
    const Place u = velocity(p);
    const double dx = scale * u.x, dy = scale * u.y;
    if (std::hypot(dx, dy) > shortest_arrow)
      draw_arrow(canvas, {p.x - dx / 2, p.y - dy / 2}, dx, dy, contrast.tone(map.in_shell(p)));
  }
}

}  // namespace lidwright::plot
