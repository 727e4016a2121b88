#include "io/colour_bar.hpp"

#include <algorithm>
#include <cmath>

#include "io/plot_chart.hpp"

namespace lidwright::plot {
namespace {

const TextStyle tick_style{14, faint_ink}, title_style{15, ink};
const Line border{faint_ink, 1};

/// A bar from its low end to its high one along x, as wide as y; turned by who draws it.
struct Strip {
  double length, width;
};

double point_length(const Strip& s) { return 0.6 * s.width; }

void trace(Canvas& canvas, const ColourBar& bar, const Strip& s) {
  cairo_t* cr = canvas.context();
  cairo_new_path(cr);
  cairo_move_to(cr, 0, 0);
  if (bar.values_below) cairo_line_to(cr, -point_length(s), s.width / 2);
  cairo_line_to(cr, 0, s.width);
  cairo_line_to(cr, s.length, s.width);
  if (bar.values_above) cairo_line_to(cr, s.length + point_length(s), s.width / 2);
  cairo_line_to(cr, s.length, 0);
  cairo_close_path(cr);
}

/// Step by step, so that no file format has to mix colours; each runs under the next, so that no
/// ground shows between them.
void fill(Canvas& canvas, const ColourBar& bar, const Strip& s) {
  cairo_t* cr = canvas.context();
  const int steps =
      static_cast<int>(std::lround(s.length * std::max(1.0, canvas.pixels_per_unit())));
  const double before = bar.values_below ? point_length(s) : 0;
  for (int k = 0; k < steps; ++k) {
    const Colour c = colour_at((k + 0.5) / steps, bar.colours);
    const double from = k == 0 ? -before : s.length * k / steps;
    cairo_rectangle(cr, from, 0, s.length + point_length(s) - from, s.width);
    cairo_set_source_rgb(cr, c.red, c.green, c.blue);
    cairo_fill(cr);
  }
}

/// In coordinates where the bar runs along x.
void draw_strip(Canvas& canvas, const ColourBar& bar, const Strip& s) {
  {
    const Saved saved(canvas);
    trace(canvas, bar, s);
    cairo_clip(canvas.context());
    fill(canvas, bar, s);
  }
  trace(canvas, bar, s);
  canvas.stroke(border);
}

void draw_upright_strip(Canvas& canvas, const ColourBar& bar, const Frame& f) {
  const Saved saved(canvas);
  cairo_translate(canvas.context(), f.left + 0.5, f.bottom() + 0.5);
  cairo_rotate(canvas.context(), -1.5707963267948966);
  draw_strip(canvas, bar, {f.height, f.width});
}

void draw_level_strip(Canvas& canvas, const ColourBar& bar, const Frame& f) {
  const Saved saved(canvas);
  cairo_translate(canvas.context(), f.left + 0.5, f.top + 0.5);
  draw_strip(canvas, bar, {f.width, f.height});
}

}  // namespace

void draw_upright_bar(Canvas& canvas, const ColourBar& bar, const Frame& f) {
  draw_upright_strip(canvas, bar, f);
  for (const Tick& t : bar.axis.ticks) {
    const double y = std::round(f.bottom() - f.height * bar.axis.place(t.value)) + 0.5;
    canvas.line({{f.right(), y}, {f.right() + 5, y}}, border);
    canvas.text(t.label, {f.right() + bar_tick_gap, y}, {0, 0.5}, tick_style);
  }
  canvas.upright_text(written(bar.label, bar.axis), {f.left - 16, f.middle().y}, title_style);
}

void draw_level_bar(Canvas& canvas, const ColourBar& bar, const Frame& f) {
  draw_level_strip(canvas, bar, f);
  for (const Tick& t : bar.axis.ticks) {
    const double x = std::round(f.left + f.width * bar.axis.place(t.value)) + 0.5;
    canvas.line({{x, f.bottom()}, {x, f.bottom() + 5}}, border);
    canvas.text(t.label, {x, f.bottom() + 6}, {0.5, 0}, tick_style);
  }
  canvas.text(written(bar.label, bar.axis), {f.middle().x, f.bottom() + 24}, {0.5, 0}, title_style);
}

double bar_tick_room(Canvas& ruler, const Axis& axis) {
  double widest = 0;
  for (const Tick& t : axis.ticks) widest = std::max(widest, ruler.text_width(t.label, tick_style));
  return bar_tick_gap + widest;
}

}  // namespace lidwright::plot
