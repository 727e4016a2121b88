#include "io/plot_marks.hpp"

#include <algorithm>
#include <cmath>

#include "io/plot_chart.hpp"

namespace lidwright::plot {
namespace {

constexpr Colour white{1, 1, 1};
const TextStyle key_style{14, ink};
constexpr double sample = 30, sample_gap = 7, entry_gap = 20, row_height = 21;

void set_source(Canvas& canvas, const Colour& c, double opacity = 1) {
  cairo_set_source_rgba(canvas.context(), c.red, c.green, c.blue, opacity);
}

/// Corners of a polygon about a place, the first one straight up or between two.
void polygon(Canvas& canvas, Place p, double radius, int corners, double turned) {
  cairo_new_path(canvas.context());
  for (int k = 0; k < corners; ++k) {
    const double angle = turned + 6.2831853071795864 * k / corners;
    cairo_line_to(canvas.context(), p.x + radius * std::sin(angle), p.y - radius * std::cos(angle));
  }
  cairo_close_path(canvas.context());
}

void fill_path(Canvas& canvas, const Colour& colour) {
  set_source(canvas, colour);
  cairo_fill(canvas.context());
}

/// Longer than wide, with a notch behind: an even triangle points three ways. `along` and `down`
/// are a unit vector.
void dart(Canvas& canvas, Place p, double along, double down, double size) {
  constexpr double corners[4][2] = {{1.2, 0}, {-0.9, 0.65}, {-0.45, 0}, {-0.9, -0.65}};
  cairo_new_path(canvas.context());
  for (const auto& [ahead, aside] : corners)
    cairo_line_to(canvas.context(), p.x + size * (ahead * along - aside * down),
                  p.y + size * (ahead * down + aside * along));
  cairo_close_path(canvas.context());
}

double entry_width(Canvas& canvas, const KeyEntry& e) {
  return sample + sample_gap + canvas.text_width(e.name, key_style);
}

void draw_sample(Canvas& canvas, const KeyEntry& e, double left, double y) {
  if (e.ground > 0) fill(canvas, {left, y - 7, sample, 14}, e.colour, e.ground);
  if (e.width > 0)
    draw_line(canvas, {{left, y}, {left + sample, y}}, {e.colour, e.width}, e.pattern);
  draw_symbol(canvas, e.symbol, {left + sample / 2, y}, 5, e.colour);
}

/// Calls with every entry and its place in the rows; returns the number of rows.
template <class Action>
int in_rows(Canvas& canvas, const std::vector<KeyEntry>& entries, double width, Action action) {
  double left = 0;
  int row = 0;
  for (const KeyEntry& e : entries) {
    const double wide = entry_width(canvas, e);
    if (left > 0 && left + wide > width) {
      left = 0;
      ++row;
    }
    action(e, left, row);
    left += wide + entry_gap;
  }
  return entries.empty() ? 0 : row + 1;
}

}  // namespace

void draw_line(Canvas& canvas, const std::vector<Place>& places, const Line& line,
               Pattern pattern) {
  const Saved saved(canvas);
  const std::vector<double> lengths = dashes(pattern, line.width);
  cairo_set_dash(canvas.context(), lengths.data(), static_cast<int>(lengths.size()), 0);
  canvas.line(places, line);
}

void fill(Canvas& canvas, const Frame& f, const Colour& colour, double opacity) {
  cairo_new_path(canvas.context());
  cairo_rectangle(canvas.context(), f.left, f.top, f.width, f.height);
  set_source(canvas, colour, opacity);
  cairo_fill(canvas.context());
}

void draw_symbol(Canvas& canvas, Symbol symbol, Place p, double radius, const Colour& colour) {
  switch (symbol) {
    case Symbol::None:
      return;
    case Symbol::Dot:
      return canvas.dot(p, radius, colour);
    case Symbol::Ring:
      canvas.dot(p, radius, colour);
      return canvas.dot(p, 0.55 * radius, white);
    case Symbol::Square:
      polygon(canvas, p, 1.3 * radius, 4, 0.7853981633974483);
      break;
    case Symbol::Diamond:
      polygon(canvas, p, 1.5 * radius, 4, 0);
      break;
    case Symbol::ArrowHead:
      dart(canvas, p, -1, 0, 1.4 * radius);
      break;
  }
  fill_path(canvas, colour);
}

void draw_error_bar(Canvas& canvas, Place low, Place high, const Line& line, double cap) {
  canvas.line({low, high}, line);
  for (const Place& p : {low, high}) canvas.line({{p.x - cap, p.y}, {p.x + cap, p.y}}, line);
}

void draw_arrow_head(Canvas& canvas, Place p, double dx, double dy, double size,
                     const Colour& colour) {
  const double length = std::hypot(dx, dy);
  if (!(length > 0)) return;
  dart(canvas, p, dx / length, dy / length, size);
  fill_path(canvas, colour);
}

double key_height(Canvas& canvas, const std::vector<KeyEntry>& entries, double width) {
  return row_height * in_rows(canvas, entries, width, [](const KeyEntry&, double, int) {});
}

void draw_key(Canvas& canvas, const std::vector<KeyEntry>& entries, const Frame& f) {
  in_rows(canvas, entries, f.width, [&](const KeyEntry& e, double left, int row) {
    const double y = f.top + row_height * (row + 0.5);
    draw_sample(canvas, e, f.left + left, y);
    canvas.text(e.name, {f.left + left + sample + sample_gap, y}, {0, 0.5}, key_style);
  });
}

}  // namespace lidwright::plot
