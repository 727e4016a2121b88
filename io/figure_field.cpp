#include "io/figure_field.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cctype>
#include <cmath>

#include "io/colour_bar.hpp"
#include "io/field_layout.hpp"
#include "io/field_raster.hpp"
#include "io/plot_chart.hpp"

namespace lidwright {
namespace {

using namespace plot;

constexpr double tick_room_upright = 44, tick_room_level = 62;

std::string capital(std::string words) {
  words[0] = static_cast<char>(std::toupper(static_cast<unsigned char>(words[0])));
  return words;
}

Axis bar_axis(const ColourRange& c, int most) {
  return c.spacing == Spacing::Linear ? linear_axis(c.range, most)
                                      : logarithmic_axis_within(c.range, most);
}

/// Cells beyond the range by no more than the seventh digit, which the files do not keep, are in
/// it.
ColourBar bar_of(const FieldFigure& figure, int most) {
  const Interval& r = figure.colours.range;
  const double air = 1e-6 * std::max(std::abs(r.low), std::abs(r.high));
  return {bar_axis(figure.colours, most), figure.view.label, figure.view.colours,
          figure.view.span.low<r.low - air, figure.view.span.high> r.high + air};
}

FieldLayout layout_of(const FieldFigure& figure, const FigureStyle& style) {
  Canvas ruler(figure_sheet({style.size, Format::Png}, 8, ""));
  const double width = sheet_width(style.size) - 2 * page_margin(style.size);
  return field_layout(style.size, {extent_of(figure.overlays.geometry),
                                   bar_tick_room(ruler, bar_axis(figure.colours, 8)),
                                   legend_height(ruler, figure.overlays, width)});
}

void draw_heading(Canvas& canvas, const FieldFigure& figure, const Frame& f) {
  const std::string what = capital(figure.view.label.what) + "   \u00b7   " + figure.moment;
  const bool titled = !figure.title.empty();
  canvas.text(as_markup(figure.title), {f.left, f.top}, {0, 0}, {15, ink, Weight::Bold, f.width});
  canvas.text(what, {f.left, f.top + (titled ? 21 : 6)}, {0, 0},
              {14, titled ? faint_ink : ink, Weight::Normal, f.width});
}

void draw_bar(Canvas& canvas, const FieldFigure& figure, const FieldLayout& layout) {
  const double room =
      layout.bar_below ? layout.bar.width / tick_room_level : layout.bar.height / tick_room_upright;
  const ColourBar bar = bar_of(figure, std::clamp(static_cast<int>(room), 2, 8));
  (layout.bar_below ? draw_level_bar : draw_upright_bar)(canvas, bar, layout.bar);
}

}  // namespace

std::string draw_field(const FieldFigure& figure, const FigureStyle& style) {
  const FieldLayout layout = layout_of(figure, style);
  Canvas canvas(figure_sheet(style, layout.height, figure.title));
  const ShellMap map(figure.overlays.geometry, layout.shell);
  const std::vector<double> cells = shares(figure.view, figure.colours);
  draw_heading(canvas, figure, layout.heading);
  draw_cells(canvas, map, cells, {0, 1}, figure.view.colours);
  draw_overlays(canvas, map, figure.overlays, cells);
  draw_outline(canvas, map);
  draw_bar(canvas, figure, layout);
  draw_legend(canvas, figure.overlays, layout.legend);
  return canvas.bytes();
}

}  // namespace lidwright
