#include "io/plot_chart.hpp"

#include <algorithm>
#include <cmath>

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
    canvas.text(t.label, {label_middle(canvas, t.label, x, chart, f), f.bottom() + 5}, {0.5, 0},
                tick_style);
  }
  canvas.text(written(chart.x_label, chart.x), {f.middle().x, f.bottom() + 26}, {0.5, 0},
              label_style);
}

void draw_y_axis(Canvas& canvas, const Chart& chart, const Frame& f) {
  double widest = 0;
  for (const Tick& t : chart.y.ticks) {
    const double y = std::round(y_place(chart, f, t.value)) + 0.5;
    canvas.line({{f.left, y}, {f.right(), y}}, {grid_ink, 1});
    if (!chart.y_labels) continue;
    canvas.text(t.label, {f.left - 7, y}, {1, 0.5}, tick_style);
    widest = std::max(widest, canvas.text_width(t.label, tick_style));
  }
  if (chart.y_labels)
    canvas.upright_text(written(chart.y_label, chart.y), {f.left - widest - 24, f.middle().y},
                        label_style);
}

void draw_curve(Canvas& canvas, const Chart& chart, const Curve& curve, const Frame& f) {
  const Saved saved(canvas);
  canvas.clip_to({f.left, f.top - 1, f.width, f.height + 2});
  std::vector<Place> places;
  for (std::size_t k = 0; k < curve.x.size(); ++k) {
    const Place p{x_place(chart, f, curve.x[k]), y_place(chart, f, curve.y[k])};
    if (std::isfinite(p.x) && std::isfinite(p.y)) places.push_back(p);
  }
  canvas.line(places, {curve.colour, curve.width});
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

void draw(Canvas& canvas, const Chart& chart, const Frame& f) {
  draw_x_axis(canvas, chart, f);
  draw_y_axis(canvas, chart, f);
  if (chart.note.empty())
    for (const Curve& curve : chart.curves) draw_curve(canvas, chart, curve, f);
  else
    canvas.text(chart.note, f.middle(), {0.5, 0.5}, tick_style);
  canvas.frame({f.left + 0.5, f.top + 0.5, f.width, f.height}, border);
  canvas.text(chart.title, {f.left, f.top - 6}, {0, 1}, {15, ink, Weight::Bold});
  draw_names(canvas, chart, f);
}

Curve thinned(const Curve& curve, std::size_t most) {
  if (curve.x.size() <= most) return curve;
  Curve few{{}, {}, curve.colour, curve.name, curve.width};
  const std::size_t stretches = std::max<std::size_t>(most / 2, 1), n = curve.x.size();
  for (std::size_t s = 0; s < stretches; ++s) {
    const auto at = [&](std::size_t k) { return curve.y.begin() + static_cast<long>(k); };
    const auto [least, largest] =
        std::minmax_element(at(s * n / stretches), at((s + 1) * n / stretches));
    for (const auto point : {std::min(least, largest), std::max(least, largest)}) {
      few.x.push_back(curve.x[static_cast<std::size_t>(point - curve.y.begin())]);
      few.y.push_back(*point);
    }
  }
  return few;
}

}  // namespace lidwright::plot
