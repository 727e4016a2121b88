#include "io/plot_chart.hpp"

#include <algorithm>
#include <cmath>

#include "io/plot_marks.hpp"
#include "io/thinning.hpp"

namespace lidwright::plot {
namespace {

const TextStyle tick_style{14, faint_ink};
const TextStyle label_style{15, ink};
const Line border{faint_ink, 1};

double x_place(const Chart& c, const Frame& f, double x) { return f.left + f.width * c.x.place(x); }

double y_place(const Chart& c, const Frame& f, double y) {
  const double share = c.y.place(y);
  return c.y_downwards ? f.top + f.height * share : f.bottom() - f.height * share;
}

/// Moved inwards where the label would come near a neighbour's.
double label_middle(Canvas& canvas, const std::string& label, double x, const Chart& chart,
                    const Frame& f) {
  const double half = canvas.text_width(label, tick_style) / 2;
  return std::clamp(x, f.left - chart.overhang + half, f.right() + chart.overhang - half);
}

void draw_x_axis(Canvas& canvas, const Chart& chart, const Frame& f) {
  for (const Tick& t : chart.x.ticks) {
    const double x = std::round(x_place(chart, f, t.value)) + 0.5;
    canvas.line({{x, f.top}, {x, f.bottom()}}, {grid_ink, 1});
    if (!chart.x_labels) continue;
    canvas.text(t.label, {label_middle(canvas, t.label, x, chart, f), f.bottom() + 5}, {0.5, 0},
                tick_style);
  }
  if (chart.x_labels)
    canvas.text(written(chart.x_label, chart.x), {f.middle().x, f.bottom() + 26}, {0.5, 0},
                label_style);
}

void draw_y_axis(Canvas& canvas, const Chart& chart, const Frame& f) {
  for (const Tick& t : chart.y.ticks) {
    const double y = std::round(y_place(chart, f, t.value)) + 0.5;
    canvas.line({{f.left, y}, {f.right(), y}}, {grid_ink, 1});
    if (chart.y_labels) canvas.text(t.label, {f.left - 7, y}, {1, 0.5}, tick_style);
  }
  if (chart.y_labels && !chart.y_label.what.empty())
    canvas.upright_text(written(chart.y_label, chart.y),
                        {f.left - width_of_labels(canvas, chart.y) - 24, f.middle().y},
                        label_style);
}

/// The part of the frame between two places.
Frame between(const Place& p, const Place& q) {
  return {std::min(p.x, q.x), std::min(p.y, q.y), std::abs(p.x - q.x), std::abs(p.y - q.y)};
}

void draw_bands(Canvas& canvas, const Chart& chart, const Frame& f) {
  for (const Band& b : chart.x_bands)
    fill(canvas,
         between({x_place(chart, f, b.range.low), f.top},
                 {x_place(chart, f, b.range.high), f.bottom()}),
         b.colour, b.opacity);
  for (const Band& b : chart.y_bands)
    fill(canvas,
         between({f.left, y_place(chart, f, b.range.low)},
                 {f.right(), y_place(chart, f, b.range.high)}),
         b.colour, b.opacity);
}

void draw_levels(Canvas& canvas, const Chart& chart, const Frame& f) {
  for (const Level& l : chart.y_levels) {
    const double y = y_place(chart, f, l.value);
    draw_line(canvas, {{f.left, y}, {f.right(), y}}, {l.colour, l.width}, l.pattern);
  }
}

/// A single point between breaks is a dot.
void draw_piece(Canvas& canvas, const std::vector<Place>& places, const Curve& curve) {
  if (places.size() == 1) canvas.dot(places.front(), 0.9 * curve.width, curve.colour);
  if (places.size() > 1) draw_line(canvas, places, {curve.colour, curve.width}, curve.pattern);
}

void draw_curve(Canvas& canvas, const Chart& chart, const Curve& curve, const Frame& f) {
  std::vector<Place> places;
  for (std::size_t k = 0; k < curve.x.size(); ++k) {
    const Place p = on_page(chart, f, curve.x[k], curve.y[k]);
    if (std::isfinite(p.x) && std::isfinite(p.y)) {
      places.push_back(p);
    } else {
      draw_piece(canvas, places, curve);
      places.clear();
    }
  }
  draw_piece(canvas, places, curve);
}

void draw_contents(Canvas& canvas, const Chart& chart, const Frame& f) {
  const Saved saved(canvas);
  canvas.clip_to({f.left, f.top - 1, f.width, f.height + 2});
  draw_levels(canvas, chart, f);
  for (const Curve& curve : chart.curves) draw_curve(canvas, chart, curve, f);
}

/// Names of curves, from the right end of the line above the frame.
void draw_names(Canvas& canvas, const Chart& chart, const Frame& f) {
  double right = f.right();
  for (auto curve = chart.curves.rbegin(); curve != chart.curves.rend(); ++curve) {
    if (curve->name.empty()) continue;
    const TextStyle style{15, curve->colour, Weight::Bold};
    canvas.text(curve->name, {right, f.top - 6}, {1, 1}, style);
    right -= canvas.text_width(curve->name, style) + 18;
  }
}

}  // namespace

Place on_page(const Chart& chart, const Frame& f, double x, double y) {
  return {x_place(chart, f, x), y_place(chart, f, y)};
}

double width_of_labels(Canvas& canvas, const Axis& axis) {
  double widest = 0;
  for (const Tick& t : axis.ticks)
    widest = std::max(widest, canvas.text_width(t.label, tick_style));
  return widest;
}

void draw(Canvas& canvas, const Chart& chart, const Frame& f) {
  {
    const Saved saved(canvas);
    canvas.clip_to(f);
    draw_bands(canvas, chart, f);
  }
  draw_x_axis(canvas, chart, f);
  draw_y_axis(canvas, chart, f);
  if (chart.note.empty())
    draw_contents(canvas, chart, f);
  else
    canvas.text(chart.note, f.middle(), {0.5, 0.5}, tick_style);
  canvas.frame({f.left + 0.5, f.top + 0.5, f.width, f.height}, border);
  canvas.text(chart.title, {f.left, f.top - 6}, {0, 1}, {15, ink, Weight::Bold, f.width});
  draw_names(canvas, chart, f);
}

Curve thinned(const Curve& curve, std::size_t most) {
  Curve few = curve;
  few.x.clear();
  few.y.clear();
  for (const std::size_t k : rows_to_draw(curve.y, most)) {
    few.x.push_back(curve.x[k]);
    few.y.push_back(curve.y[k]);
  }
  return few;
}

}  // namespace lidwright::plot
