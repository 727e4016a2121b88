#include "io/field_overlays.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <functional>

#include "io/figure_sheet.hpp"
#include "io/flow_lines.hpp"
#include "io/isotherms.hpp"
#include "io/plot_chart.hpp"
#include "solver/lid.hpp"

namespace lidwright {
namespace {

using namespace plot;

const TextStyle legend_style{13.5, faint_ink};
constexpr double line_height = 21, symbol_width = 30, symbol_gap = 7, entry_gap = 22;

Flow flow_of(const OverlayData& data) {
  return {data.fields.velocity_radial, data.fields.velocity_lateral};
}

/// A sign and what it means.
struct Entry {
  std::string text;
  double sign_width;
  std::function<void(Canvas&, Place left)> sign;
};

/// The greatest of 1, 2, 5, 10, ... that is not above the number.
double round_below(double number) {
  const double power = std::pow(10.0, std::floor(std::log10(number)));
  for (const double factor : {5.0, 2.0})
    if (factor * power <= number) return factor * power;
  return power;
}

Entry arrow_entry(const OverlayData& data) {
  const double scale = arrow_scale(flow_of(data)), shown = data.units.velocity(1);
  if (!(scale > 0)) return {"no flow, no arrows", 0, [](Canvas&, Place) {}};
  const double speed = round_below(usual_arrow / scale * shown);
  const double length = scale * speed / shown;
  return {fmt::format("{} {}", four_digits(speed), data.units.velocity.unit), length,
          [=](Canvas& canvas, Place p) { draw_arrow(canvas, p, length, 0); }};
}

Entry line_entry(const OverlayData&) {
  return {"lines of flow, equal flux between them", symbol_width, [](Canvas& canvas, Place p) {
            canvas.line({p, {p.x + symbol_width - 5, p.y}}, {ink, 0.9, 0.7});
            draw_arrow(canvas, {p.x + symbol_width - 12, p.y}, 12, 0);
          }};
}

Entry lid_entry(const OverlayData& data) {
  if (std::isnan(data.lid_temperature))
    return {data.lid_undefined_by_law ? "no lid: viscosity does not depend on temperature"
                                      : "base of the lid not defined at this time",
            0, [](Canvas&, Place) {}};
  const std::string base = fmt::format("where {} {} is reached",
                                       four_digits(data.units.temperature(data.lid_temperature)),
                                       data.units.temperature.unit);
  const std::vector<double> depths = lid_depths(data);
  const bool none = std::all_of(depths.begin(), depths.end(), [](double d) { return !(d > 0); });
  if (none)
    return {"no lid: the surface is hotter than its base would be", 0, [](Canvas&, Place) {}};
  return {"base of the lid, " + base, symbol_width, [](Canvas& canvas, Place p) {
            broken_line(canvas, {p, {p.x + symbol_width, p.y}});
          }};
}

Entry isotherm_entry(const OverlayData& data) {
  const Axis axis = isotherm_levels(data.fields.temperature, data.units.temperature);
  return {written({"isotherms", data.units.temperature.unit}, axis), symbol_width,
          [](Canvas& canvas, Place p) {
            rimmed_line(canvas, {p, {p.x + symbol_width, p.y}}, 0.9);
          }};
}

std::vector<Entry> entries(const OverlayData& data) {
  std::vector<Entry> all;
  if (data.drawn.arrows) all.push_back(arrow_entry(data));
  if (data.drawn.flow_lines) all.push_back(line_entry(data));
  if (data.drawn.isotherms) all.push_back(isotherm_entry(data));
  if (data.drawn.lid) all.push_back(lid_entry(data));
  return all;
}

/// Calls place(entry, x, line) for every entry; returns the number of lines.
template <class Action>
int set_in_lines(Canvas& canvas, const OverlayData& data, double width, Action&& place) {
  const std::vector<Entry> all = entries(data);
  double x = 0;
  int line = 0;
  for (const Entry& e : all) {
    const double text = canvas.text_width(e.text, legend_style);
    const double gap = e.sign_width > 0 ? symbol_gap : 0;
    if (x > 0 && (data.stacked || x + e.sign_width + gap + text > width)) {
      x = 0;
      ++line;
    }
    place(e, x, line);
    x += e.sign_width + gap + text + entry_gap;
  }
  return all.empty() ? 0 : line + 1;
}

/// Cut off at the walls. Returns the isotherms' numbers.
std::vector<PlacedText> draw_lines_over(Canvas& canvas, const ShellMap& map,
                                        const OverlayData& data,
                                        const std::vector<double>& shares) {
  const Saved saved(canvas);
  map.trace_outline(canvas);
  cairo_set_fill_rule(canvas.context(), CAIRO_FILL_RULE_EVEN_ODD);
  cairo_clip(canvas.context());
  std::vector<PlacedText> labels;
  if (data.drawn.flow_lines)
    draw_directed_flow_lines(canvas, map, data.fields.stream_function, flow_of(data), shares,
                             {0, 1});
  if (data.drawn.isotherms)
    labels = draw_isotherms(canvas, map, data.fields.temperature, data.units.temperature);
  if (data.drawn.lid && std::isfinite(data.lid_temperature))
    draw_lid(canvas, map, lid_depths(data));
  if (data.drawn.arrows) draw_arrows(canvas, map, flow_of(data), shares, {0, 1});
  return labels;
}

}  // namespace

std::vector<std::string> overlay_words() { return {"flow-lines", "arrows", "lid", "isotherms"}; }

Overlays overlays_of(const std::vector<std::string>& words) {
  Overlays o;
  for (const std::string& word : words) {
    if (word == "flow-lines")
      o.flow_lines = true;
    else if (word == "arrows")
      o.arrows = true;
    else if (word == "lid")
      o.lid = true;
    else if (word == "isotherms")
      o.isotherms = true;
    else
      refuse_word("--with", word, overlay_words());
  }
  return o;
}

double lid_base_temperature(const HistoryTable& history, double time, const std::string& path) {
  const std::vector<double>& times = column_of(history, "time", path);
  if (times.empty()) return std::nan("");
  const std::size_t row = nearest_row(times, time);
  return column_of(history, "temperature_internal", path)[row] -
         lid_base_drop * column_of(history, "rheological_temperature", path)[row];
}

bool lid_undefined_by_law(const HistoryTable& history, double time, const std::string& path) {
  const std::vector<double>& times = column_of(history, "time", path);
  if (times.empty()) return false;
  const std::size_t row = nearest_row(times, time);
  return std::isfinite(column_of(history, "temperature_internal", path)[row]) &&
         std::isnan(column_of(history, "rheological_temperature", path)[row]);
}

std::vector<double> lid_depths(const OverlayData& data) {
  return depths_of(data.geometry, data.fields.temperature, data.lid_temperature);
}

void draw_overlays(Canvas& canvas, const ShellMap& map, const OverlayData& data,
                   const std::vector<double>& shares) {
  draw_labels(canvas, draw_lines_over(canvas, map, data, shares));
}

double legend_height(Canvas& ruler, const OverlayData& data, double width) {
  return line_height * set_in_lines(ruler, data, width, [](const Entry&, double, int) {});
}

void draw_legend(Canvas& canvas, const OverlayData& data, const Frame& f) {
  set_in_lines(canvas, data, f.width, [&](const Entry& e, double x, int line) {
    const Place left{f.left + x, f.top + (line + 0.5) * line_height};
    e.sign(canvas, left);
    const double gap = e.sign_width > 0 ? symbol_gap : 0;
    canvas.text(e.text, {left.x + e.sign_width + gap, left.y}, {0, 0.5}, legend_style);
  });
}

}  // namespace lidwright
