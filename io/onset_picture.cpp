#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "io/onset_table.hpp"
#include "io/plot_chart.hpp"

namespace lidwright {
namespace {

using namespace plot;

constexpr int width = 1000, height = 640;
constexpr Colour curve_ink{0.05, 0.38, 0.52}, critical_ink{0.83, 0.27, 0.24};

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

Interval range_of_modes(const Drawn& d) { return {d.x.front() - 0.5, d.x.back() + 0.5}; }

/// Modes are whole numbers: no tick between them.
Axis mode_axis(const Drawn& d) {
  Axis axis = linear_axis(range_of_modes(d), 10);
  std::erase_if(axis.ticks, [](const Tick& t) { return t.value != std::round(t.value); });
  return axis;
}

Axis rayleigh_axis(const Drawn& d) {
  const Interval range{*std::min_element(d.low.begin(), d.low.end()),
                       *std::max_element(d.high.begin(), d.high.end())};
  if (range.high > 8 * range.low) return logarithmic_axis(range, 6);
  return linear_axis(with_margin(range, 0.08), 6);
}

class Picture {
 public:
  Picture(const OnsetCurve& curve, const std::string& title)
      : canvas_(width, height), curve_(curve), drawn_(points_of(curve)) {
    chart_.x_label = {"lateral mode", ""};
    chart_.y_label = {"neutral Rayleigh number", ""};
    chart_.x = mode_axis(drawn_);
    chart_.y = rayleigh_axis(drawn_);
    chart_.curves = {{drawn_.x, drawn_.y, curve_ink, "", 1.5}};
    draw_heading(title);
    draw(canvas_, chart_, frame_);
    for (std::size_t k = 0; k < drawn_.x.size(); ++k) draw_point(k);
  }
  std::string png() { return canvas_.bytes(); }

 private:
  void draw_heading(const std::string& title);
  void draw_point(std::size_t k);
  bool critical(std::size_t k) const { return static_cast<int>(k) == curve_.least; }
  double across(double x) const { return frame_.left + frame_.width * chart_.x.place(x); }
  double down(double y) const { return frame_.bottom() - frame_.height * chart_.y.place(y); }

  Canvas canvas_;
  const OnsetCurve& curve_;
  Drawn drawn_;
  Chart chart_;
  Frame frame_{100, 110, width - 140.0, height - 190.0};
};

void Picture::draw_heading(const std::string& title) {
  const auto least = static_cast<std::size_t>(curve_.least);
  canvas_.text(as_markup(title.empty() ? "Onset of convection" : title), {40, 20}, {0, 0},
               {25, ink, Weight::Bold, width - 80.0});
  canvas_.text(fmt::format("critical Rayleigh number {:.6g} in mode {}", drawn_.y[least],
                           curve_.points[least].wave.number),
               {40, 58}, {0, 0}, {17, critical_ink});
}

/// A dot with its error bar; the critical one is larger.
void Picture::draw_point(std::size_t k) {
  const Colour colour = critical(k) ? critical_ink : curve_ink;
  const double x = across(drawn_.x[k]), y = down(drawn_.y[k]);
  canvas_.line({{x, down(drawn_.low[k])}, {x, down(drawn_.high[k])}}, {colour, 2});
  canvas_.dot({x, y}, critical(k) ? 7 : 4, colour);
}

}  // namespace

std::string onset_picture(const OnsetCurve& curve, const std::string& title) {
  return Picture(curve, title).png();
}

}  // namespace lidwright
