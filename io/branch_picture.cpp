#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "io/branch_table.hpp"
#include "io/plot_chart.hpp"

namespace lidwright {
namespace {

using namespace plot;

constexpr int width = 1400, height = 640;
constexpr Colour outer_ink{0.05, 0.38, 0.52}, inner_ink{0.83, 0.27, 0.24},
    velocity_ink{0.2, 0.2, 0.28};
constexpr int ticks = 7;
/// Ratio of the largest value to the least from which an axis counts decades.
constexpr double wide = 8;

using Quantity = double HistoryRow::*;

std::vector<double> parameters(const std::vector<BranchRow>& rows) {
  std::vector<double> all;
  for (const BranchRow& r : rows) all.push_back(r.parameter);
  return all;
}

std::vector<double> values(const std::vector<BranchRow>& rows, Quantity quantity) {
  std::vector<double> all;
  for (const BranchRow& r : rows) all.push_back(r.row.*quantity);
  return all;
}

Interval with_air_in_logarithm(const Interval& r, double share) {
  const double factor = std::pow(r.high / r.low, share);
  return {r.low / factor, r.high * factor};
}

Axis parameter_axis(const BranchParameter& p, const std::vector<BranchRow>& rows) {
  const Interval range = range_of(parameters(rows));
  if (p.logarithmic && range.low > 0 && !range.empty())
    return logarithmic_axis_within(with_air_in_logarithm(range, 0.04), ticks);
  return linear_axis(with_margin(range, 0.04), ticks);
}

Axis value_axis(const Interval& range) {
  if (range.low > 0 && range.high > wide * range.low)
    return logarithmic_axis_within(with_air_in_logarithm(range, 0.06), ticks);
  return linear_axis(with_margin(range, 0.08), ticks);
}

struct Shown {
  Quantity quantity;
  Colour colour;
  std::string name;
  double width, radius;
};

class Picture {
 public:
  Picture(const BranchParameter& p, const std::vector<BranchRow>& rows)
      : canvas_(width, height), parameter_(p), rows_(rows) {}

  void heading(const std::string& title);
  void chart(const Frame&, const std::string& what, const std::string& unit,
             const std::vector<Shown>&);
  std::string png() { return canvas_.bytes(); }

 private:
  void dots(const Chart&, const Frame&, const Shown&);

  Canvas canvas_;
  const BranchParameter& parameter_;
  const std::vector<BranchRow>& rows_;
};

void Picture::heading(const std::string& title) {
  canvas_.text(as_markup(title.empty() ? "Steady states" : title), {40, 20}, {0, 0},
               {25, ink, Weight::Bold, width - 80.0});
  const auto asked =
      std::count_if(rows_.begin(), rows_.end(), [](const BranchRow& r) { return r.asked_for; });
  canvas_.text(fmt::format("steady states along {}: {} at values asked for (dots), {} on the way",
                           as_markup(parameter_.key), asked,
                           static_cast<std::ptrdiff_t>(rows_.size()) - asked),
               {40, 58}, {0, 0}, {17, faint_ink});
}

void Picture::chart(const Frame& f, const std::string& what, const std::string& unit,
                    const std::vector<Shown>& shown) {
  Chart c;
  c.x_label = {as_markup(parameter_.key), as_markup(parameter_.unit)};
  c.y_label = {what, unit};
  c.x = parameter_axis(parameter_, rows_);
  Interval range = range_of(values(rows_, shown.front().quantity));
  for (const Shown& s : shown) {
    for (const double v : values(rows_, s.quantity)) range.include(v);
    c.curves.push_back({parameters(rows_), values(rows_, s.quantity), s.colour, s.name, s.width});
  }
  c.y = value_axis(range);
  draw(canvas_, c, f);
  for (const Shown& s : shown) dots(c, f, s);
}

void Picture::dots(const Chart& c, const Frame& f, const Shown& s) {
  for (const BranchRow& r : rows_) {
    const double x = f.left + f.width * c.x.place(r.parameter);
    const double y = f.bottom() - f.height * c.y.place(r.row.*s.quantity);
    if (r.asked_for && std::isfinite(x) && std::isfinite(y))
      canvas_.dot({x, y}, s.radius, s.colour);
  }
}

}  // namespace

std::string branch_picture(const BranchParameter& p, const std::vector<BranchRow>& rows,
                           const std::string& title) {
  Picture picture(p, rows);
  picture.heading(title);
  picture.chart({110, 130, 540, 430}, "Nusselt number", "",
                {{&HistoryRow::nusselt_outer, outer_ink, "outer wall", 3.5, 6},
                 {&HistoryRow::nusselt_inner, inner_ink, "inner wall", 1.8, 3.5}});
  picture.chart({810, 130, 540, 430}, "rms velocity", "<i>\u03ba</i>/<i>d</i>",
                {{&HistoryRow::velocity_rms, velocity_ink, "", 2, 5}});
  return picture.png();
}

}  // namespace lidwright
