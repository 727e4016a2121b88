#include "io/picture.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <numbers>

#include "io/collective.hpp"
#include "io/colour_bar.hpp"
#include "io/field_raster.hpp"
#include "io/flow_lines.hpp"
#include "io/history_table.hpp"
#include "io/picture_layout.hpp"
#include "io/plot_chart.hpp"
#include "io/profile_charts.hpp"
#include "io/run_folder.hpp"
#include "io/shell_map.hpp"
#include "mesh/gather.hpp"

namespace lidwright {
namespace {

using namespace plot;

constexpr Colour outer_ink{0.05, 0.38, 0.52}, inner_ink{0.83, 0.27, 0.24},
    profile_ink{0.2, 0.2, 0.28};

std::string state_heading(const SteadyState& s, const std::string& at, const PictureUnits& units) {
  const std::string where = at.empty() ? "" : " at " + as_markup(at);
  return fmt::format(
      "{} state{}   \u00b7   Nusselt number {:.5g} outer, {:.5g} inner   \u00b7   rms velocity "
      "{:.5g} "
      "{}",
      s.converged ? "steady" : "not yet steady", where, s.row.nusselt_outer, s.row.nusselt_inner,
      units.velocity(s.row.velocity_rms), units.velocity.unit);
}

void draw_heading(Canvas& canvas, const PictureContents& c) {
  canvas.text(as_markup(c.title.empty() ? "Convection in time" : c.title), {page_border, 20},
              {0, 0}, {27, ink, Weight::Bold, picture_width - 2 * page_border});
  const std::string moment =
      fmt::format("time {} {}   \u00b7   step {}", four_digits(c.units.time(c.time)),
                  c.units.time.unit, c.step);
  canvas.text(c.state.empty() ? moment : c.state, {page_border, 58}, {0, 0},
              {18, faint_ink, Weight::Normal, picture_width - 2 * page_border});
}

Interval shown_span(const PictureContents& c) {
  const TemperatureSpan span = temperature_span(c);
  return {c.units.temperature(span.low), c.units.temperature(span.high)};
}

void draw_shell(Canvas& canvas, const PictureContents& c, const PictureLayout& layout) {
  const ShellMap map(c.geometry, layout.shell);
  const TemperatureSpan span = temperature_span(c);
  const Interval range{span.low, span.high};
  draw_cells(canvas, map, c.temperature, range);
  draw_flow_lines(canvas, map, c.stream_function, c.temperature, range);
  draw_outline(canvas, map);
  draw_upright_bar(canvas,
                   {linear_axis(shown_span(c), 8), {"temperature", c.units.temperature.unit}},
                   layout.colour_bar);
}

std::vector<Chart> charts_of_profiles(const PictureContents& c, const PictureLayout& layout) {
  const ProfileRoom room{c.geometry.inner_radius(), c.geometry.outer_radius(), c.units,
                         ticks_across(layout.profiles[0]), ticks_upright(layout.profiles[0])};
  std::vector<Chart> charts = profile_charts({{c.profiles, profile_ink}}, room, shown_span(c));
  charts.front().title = "Means at each depth";
  return charts;
}

/// Interval of both curves from a row on.
Interval nusselt_range(const HeatFlowHistory& h, std::size_t first) {
  const auto later = [&](const std::vector<double>& all) {
    return range_of({all.begin() + static_cast<std::ptrdiff_t>(first), all.end()});
  };
  Interval range = later(h.nusselt_outer);
  const Interval other = later(h.nusselt_inner);
  range.include(other.low);
  range.include(other.high);
  return range;
}

/// Of all rows; a start that would dwarf what follows may leave the frame.
Interval shown_nusselt_range(const HeatFlowHistory& h) {
  const double early = h.time.front() + 0.1 * (h.time.back() - h.time.front());
  const auto first = static_cast<std::size_t>(
      std::lower_bound(h.time.begin(), h.time.end(), early) - h.time.begin());
  const Interval all = nusselt_range(h, 0), later = nusselt_range(h, first);
  const bool dwarfed = all.high - all.low > 2 * (later.high - later.low);
  return {all.low, dwarfed ? later.high : all.high};
}

Curve history_curve(const PictureContents& c, const std::vector<double>& nusselt, Colour colour,
                    const std::string& name, double width) {
  return thinned({c.units.time(c.history.time), nusselt, colour, name, width}, 2000);
}

/// Where both walls lose the same heat, the wider curve shows on both sides of the other.
std::vector<Curve> heat_flow_curves(const PictureContents& c) {
  return {history_curve(c, c.history.nusselt_outer, outer_ink, "outer wall", 3.5),
          history_curve(c, c.history.nusselt_inner, inner_ink, "inner wall", 1.8)};
}

Chart heat_flow_chart(const PictureContents& c, const Frame& f) {
  const std::vector<double>& time = c.history.time;
  Chart chart;
  chart.title = "Heat flow";
  chart.x_label = {"time", c.units.time.unit};
  chart.y_label = {"Nusselt number", ""};
  if (time.size() < 2 || !(time.back() > time.front())) {
    chart.note = "the run begins";
    return chart;
  }
  chart.x = linear_axis({c.units.time(time.front()), c.units.time(time.back())}, ticks_across(f));
  chart.y = linear_axis(with_margin(shown_nusselt_range(c.history), 0.06), ticks_upright(f));
  chart.curves = heat_flow_curves(c);
  return chart;
}

/// The lateral coordinate as people read it: along the box, or in degrees.
Shown lateral_units(const PictureContents& c) {
  if (c.geometry.shell().shape == Shape::Box) return c.units.length;
  return {180 / std::numbers::pi, 0, "\u00b0"};
}

const char* lateral_name(Shape shape) {
  if (shape == Shape::Box) return "place along the wall";
  return shape == Shape::AxisymmetricShell ? "colatitude" : "longitude";
}

Chart wall_chart(const PictureContents& c, const Frame& f) {
  const Shown lateral = lateral_units(c);
  const std::vector<double> places = lateral(c.outer.lateral);
  const Shell& shell = c.geometry.shell();
  Interval range = range_of(c.outer.heat_flux);
  for (const double flux : c.inner.heat_flux) range.include(flux);
  Chart chart;
  chart.title = "Heat flux along the walls";
  chart.x_label = {lateral_name(shell.shape), lateral.unit};
  chart.y_label = {"heat flux outwards", "<i>k</i> \u0394<i>T</i>/<i>d</i>"};
  chart.x =
      linear_axis({lateral(shell.lateral_begin), lateral(shell.lateral_end)}, ticks_across(f));
  chart.y = linear_axis(with_margin(range, 0.06), ticks_upright(f));
  chart.curves = {{places, c.outer.heat_flux, outer_ink, "outer wall", 2.5},
                  {places, c.inner.heat_flux, inner_ink, "inner wall", 2.5}};
  return chart;
}

void draw_charts(Canvas& canvas, const PictureContents& c, const PictureLayout& layout) {
  const std::vector<Chart> charts = charts_of_profiles(c, layout);
  for (std::size_t k = 0; k < charts.size(); ++k) draw(canvas, charts[k], layout.profiles[k]);
  draw(canvas, c.state.empty() ? heat_flow_chart(c, layout.history) : wall_chart(c, layout.history),
       layout.history);
}

}  // namespace

HeatFlowHistory heat_flow_history(const std::string& text, const std::string& path) {
  const HistoryTable t = parse_history(text, path);
  const auto column = [&](const char* name) { return column_of(t, name, path); };
  return {column("time"), column("nusselt_inner"), column("nusselt_outer"),
          column("temperature_inner"), column("temperature_outer")};
}

std::vector<double> Shown::operator()(const std::vector<double>& values) const {
  std::vector<double> shown;
  for (const double value : values) shown.push_back((*this)(value));
  return shown;
}

PictureUnits picture_units(const std::optional<Body>& body) {
  if (!body)
    return {{1, 0, "<i>d</i>"},
            {1, 0, "\u0394<i>T</i>"},
            {1, 0, "<i>d</i>\u00b2/<i>\u03ba</i>"},
            {1, 0, "<i>\u03ba</i>/<i>d</i>"},
            {1, 0, "<i>\u03b7</i><sub>ref</sub>"}};
  const Scales s = scales_of(*body);
  return {{s.length / 1e3, 0, "km"},
          {s.temperature, body->surface_temperature, "K"},
          {s.time / million_years, 0, "Myr"},
          {s.velocity * 1e3 * year, 0, "mm/yr"},
          {s.viscosity, 0, "Pa s"}};
}

TemperatureSpan temperature_span(const PictureContents& c) {
  Interval range = range_of(c.temperature);
  for (const auto* wall : {&c.history.temperature_inner, &c.history.temperature_outer})
    if (!wall->empty()) range.include(wall->back());
  if (range.empty()) range = with_margin(range, 0);
  return {range.low, range.high};
}

std::string picture(const PictureContents& c) {
  Canvas canvas(picture_width, picture_height);
  const PictureLayout layout =
      layout_for(extent_of(c.geometry), canvas.page(), viscosity_varies(c.profiles) ? 3 : 2);
  draw_heading(canvas, c);
  draw_shell(canvas, c, layout);
  draw_charts(canvas, c, layout);
  return canvas.bytes();
}

void draw_run(const std::string& path, const Snapshot& s, const std::string& history_path,
              const std::string& title, const PictureUnits& units) {
  const Decomposition& d = s.temperature.decomposition();
  std::vector<double> temperature = gather_to_first(s.temperature);
  std::vector<double> stream_function = gather_to_first(s.stream_function);
  on_first_rank<OutputError>(d.comm(), [&] {
    const PictureContents contents{title,
                                   s.step,
                                   s.time,
                                   d.geometry(),
                                   std::move(temperature),
                                   std::move(stream_function),
                                   s.profiles,
                                   heat_flow_history(read_whole_file(history_path), history_path),
                                   units};
    write_atomically(path, picture(contents));
  });
}

void draw_state(const std::string& path, const SteadyState& s, const std::string& at,
                const std::string& title, const PictureUnits& units) {
  const Decomposition& d = s.snapshot.temperature.decomposition();
  std::vector<double> temperature = gather_to_first(s.snapshot.temperature);
  std::vector<double> stream_function = gather_to_first(s.snapshot.stream_function);
  on_first_rank<OutputError>(d.comm(), [&] {
    PictureContents contents{title.empty() ? "Steady convection" : title,
                             0,
                             0,
                             d.geometry(),
                             std::move(temperature),
                             std::move(stream_function),
                             s.snapshot.profiles,
                             {},
                             units};
    contents.history.temperature_inner = {s.row.temperature_inner};
    contents.history.temperature_outer = {s.row.temperature_outer};
    contents.state = state_heading(s, at, units);
    contents.inner = s.snapshot.inner;
    contents.outer = s.snapshot.outer;
    write_atomically(path, picture(contents));
  });
}

std::string picture_name(std::size_t n) { return fmt::format("pictures/picture_{:04}.png", n); }

}  // namespace lidwright
