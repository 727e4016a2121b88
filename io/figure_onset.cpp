#include "io/figure_onset.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <filesystem>

#include "io/atomic_file.hpp"
#include "io/figure_page.hpp"
#include "io/figure_words.hpp"
#include "io/onset_table.hpp"
#include "io/picture_layout.hpp"
#include "io/plot_chart.hpp"
#include "io/plot_marks.hpp"

namespace lidwright {
namespace {

using namespace plot;

struct Drawn {
  std::vector<double> x, y, low, high;
};

Drawn points_of(const OnsetCurve& curve) {
  Drawn d;
  for (const OnsetPoint& p : curve.points) {
    d.x.push_back(p.wave.number);
    d.y.push_back(p.rayleigh.value);
    d.low.push_back(std::max(p.rayleigh.value - p.rayleigh.half_width, 0.1 * p.rayleigh.value));
    d.high.push_back(p.rayleigh.value + p.rayleigh.half_width);
  }
  return d;
}

/// Modes are whole numbers: ticks at all of them, or at every second, fifth, tenth ...
Axis mode_axis(const Drawn& d, int most) {
  const double air = 0.5 + 0.01 * (d.x.back() - d.x.front());
  Axis axis{{d.x.front() - air, d.x.back() + air}, Spacing::Linear, {}, ""};
  int step = 1;
  for (int tens = 1; d.x.back() - d.x.front() >= most * step; tens *= 10)
    for (const int factor : {2, 5, 10})
      if (d.x.back() - d.x.front() >= most * step) step = factor * tens;
  for (int mode = static_cast<int>(d.x.front()); mode <= d.x.back(); ++mode)
    if (mode % step == 0)
      axis.ticks.push_back({static_cast<double>(mode), fmt::format("{}", mode)});
  return axis;
}

Axis rayleigh_axis(const Drawn& d, int most) {
  const Interval range{range_of(d.low).low, range_of(d.high).high};
  const bool decades = spans_decades(range);
  return axis_of_values(range, decades ? Spacing::Logarithmic : Spacing::Linear, most, 0.08);
}

bool has_bars(const OnsetCurve& curve) {
  return std::any_of(curve.points.begin(), curve.points.end(),
                     [](const OnsetPoint& p) { return p.rayleigh.half_width > 0; });
}

const Colour& least_colour() {
  static const Colour c = curve_colour(1);
  return c;
}

std::string words_of_least(const OnsetCurve& curve) {
  const OnsetPoint& p = curve.points[static_cast<std::size_t>(curve.least)];
  return fmt::format("critical Rayleigh number {} in mode {}",
                     with_error(p.rayleigh.value, p.rayleigh.half_width), p.wave.number);
}

std::vector<KeyEntry> key_of(const OnsetCurve& curve) {
  std::vector<KeyEntry> key{{has_bars(curve) ? "neutral, with error bar" : "neutral",
                             curve_colour(0), 1.5, Pattern::Solid, Symbol::Dot},
                            {"the least", least_colour(), 0, Pattern::Solid, Symbol::Diamond}};
  return key;
}

class Points {
 public:
  Points(Canvas& canvas, const Chart& chart, const Frame& f, const Drawn& d)
      : canvas_(canvas), chart_(chart), frame_(f), drawn_(d) {
    const double room = std::abs(place(1, 0).x - place(0, 0).x);
    radius_ = std::clamp(0.35 * room, 1.5, 4.0);
  }
  void draw_point(std::size_t k, bool least) {
    const Colour colour = least ? least_colour() : curve_colour(0);
    const Place low = place(drawn_.x[k], drawn_.low[k]), high = place(drawn_.x[k], drawn_.high[k]);
    if (drawn_.high[k] > drawn_.y[k])
      draw_error_bar(canvas_, low, high, {colour, std::min(2.0, radius_)}, radius_);
    draw_symbol(canvas_, least ? Symbol::Diamond : Symbol::Dot, place(drawn_.x[k], drawn_.y[k]),
                least ? 6 : radius_, colour);
  }

 private:
  Place place(double x, double y) const { return on_page(chart_, frame_, x, y); }

  Canvas& canvas_;
  const Chart& chart_;
  const Frame& frame_;
  const Drawn& drawn_;
  double radius_;
};

}  // namespace

std::string onset_figure(const OnsetCurve& curve, const std::string& title,
                         const FigureStyle& style) {
  const Drawn d = points_of(curve);
  FigurePage page(style, title.empty() ? "Onset of convection" : title);
  page.set_line(words_of_least(curve));
  page.set_key(key_of(curve));
  const Frames frames = page.frames(1, 1, style.size == FigureSize::TwoColumn ? 0.42 : 0.65);
  const Frame& f = frames.all.front();
  Canvas& canvas = page.begin(frames.height);
  Chart chart;
  chart.x_label = {"lateral mode", ""};
  chart.y_label = {"neutral Rayleigh number", ""};
  chart.x = mode_axis(d, ticks_across(f));
  chart.y = rayleigh_axis(d, ticks_upright(f));
  chart.curves = {{d.x, d.y, curve_colour(0), "", 1.5}};
  draw(canvas, chart, f);
  Points points(canvas, chart, f, d);
  const auto least = static_cast<std::size_t>(curve.least);
  for (std::size_t k = 0; k < d.x.size(); ++k)
    if (k != least) points.draw_point(k, false);
  points.draw_point(least, true);
  return canvas.bytes();
}

std::string onset_figure(const SavedRun& run, const FigureStyle& style) {
  const std::string path = run.paths.folder + "/onset.csv";
  if (!std::filesystem::exists(path))
    throw InputError(
        fmt::format("{}: holds no onset.csv; name a folder of onset", run.paths.folder));
  return onset_figure(read_onset(read_whole_file(path), path), run.settings.title, style);
}

}  // namespace lidwright
