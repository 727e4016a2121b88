#include "io/figure_history.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <numeric>

#include "io/case_entries.hpp"
#include "io/figure_page.hpp"
#include "io/figure_words.hpp"
#include "io/picture_layout.hpp"
#include "io/plot_marks.hpp"
#include "io/run_statistics.hpp"

namespace lidwright {
namespace {

using namespace plot;

constexpr Colour start_up_ground{0.72, 0.76, 0.83};
constexpr double start_up_opacity = 0.3, band_opacity = 0.3, least_panel = 52;
/// Frank-Kamenetskii parameter from which the temperature makes a lid possible.
constexpr double lid_possible = 2;

const Colour& mean_colour() {
  static const Colour c = curve_colour(1);
  return c;
}

const HistoryTable& history_of(const SavedRun& run) {
  if (!run.history)
    throw InputError(
        fmt::format("{}: holds no history.csv; a history is of a march, name the folder of one",
                    run.paths.folder));
  if (run.history->rows() == 0)
    throw InputError(fmt::format("{}: has no rows yet; wait until the run has taken a step",
                                 run.paths.history()));
  return *run.history;
}

const std::vector<double>& chosen_column(const HistoryTable& t, const std::string& name,
                                         const std::string& path) {
  if (const auto* column = t.find(name)) return *column;
  throw InputError(fmt::format("{}: has no column '{}'{}; its first line without # names them",
                               path, name, case_text::nearest(name, t.names)));
}

double last_finite(const std::vector<double>& values) {
  const auto found =
      std::find_if(values.rbegin(), values.rend(), [](double v) { return std::isfinite(v); });
  return found == values.rend() ? std::nan("") : *found;
}

bool lid_is_possible(const HistoryTable& t) {
  const auto* theta = t.find("frank_kamenetskii");
  return theta && last_finite(*theta) > lid_possible;
}

std::vector<std::string> columns_for(const HistoryTable& t, const HistoryOptions& options) {
  if (!options.columns.empty()) return options.columns;
  std::vector<std::string> names{"nusselt_outer", "nusselt_inner", "velocity_rms"};
  if (lid_is_possible(t)) names.insert(names.end(), {"mobility", "lid_thickness_velocity"});
  std::erase_if(names, [&](const std::string& name) { return !t.find(name); });
  return names;
}

RecordSummary summary_of(const HistoryTable& t, const std::vector<double>& values,
                         const MarchSettings& march) {
  const std::vector<double>& time = *t.find("time");
  const auto* velocity = t.find("velocity_rms");
  return summarise(time, values,
                   velocity ? settings_for(time, *velocity, march) : StatisticsSettings{});
}

/// Values of which the summary's mean is.
Interval settled_range(const std::vector<double>& time, const std::vector<double>& values,
                       double from) {
  std::vector<double> settled;
  for (std::size_t k = 0; k < time.size(); ++k)
    if (time[k] >= from) settled.push_back(values[k]);
  return range_of(settled);
}

/// A start that would dwarf what follows may leave the frame.
Interval shown_range(const Interval& all, const Interval& settled) {
  const double span = std::max(settled.high - settled.low, 0.3 * std::abs(settled.high));
  if (all.high - all.low <= 4 * span) return all;
  const double more = 0.4 * span;
  return {std::max(all.low, settled.low - more), std::min(all.high, settled.high + more)};
}

/// The values of one column as they are shown, and what statistics say of them.
class PanelMaker {
 public:
  PanelMaker(const SavedRun& run, const HistoryOptions& options, const std::string& column)
      : table_(*run.history), column_(column), options_(options) {
    const std::vector<double>& raw = chosen_column(table_, column, run.paths.history());
    const std::vector<double>& time = *table_.find("time");
    units_ = shown_column(column, unit_of(column), run.settings);
    time_units_ = shown_time(time.back(), run.settings);
    values_ = units_(raw);
    time_ = time_units_(time);
    if (!is_bookkeeping(column)) summary_ = summary_of(table_, raw, run.settings.march);
    if (options.logarithmic) leave_out_what_has_no_logarithm();
  }

  HistoryPanel panel(int ticks) {
    HistoryPanel p;
    p.chart.x_label = {"time", time_units_.unit};
    p.chart.y_label = {column_words(column_), units_.unit};
    p.chart.x = {time_range(), Spacing::Linear, {}, ""};
    p.chart.curves = {{time_, values_, curve_colour(0), "", 1.5}};
    set_axis(p.chart, ticks);
    add_bands(p.chart);
    p.mean = words();
    return p;
  }

 private:
  std::string unit_of(const std::string& column) const {
    const auto found = std::find(table_.names.begin(), table_.names.end(), column);
    return table_.units[static_cast<std::size_t>(found - table_.names.begin())];
  }
  void leave_out_what_has_no_logarithm() {
    for (double& v : values_)
      if (v <= 0) {
        v = std::nan("");
        ++left_out_;
      }
  }
  Interval time_range() const {
    const Interval r = range_of(time_);
    return r.empty() ? with_margin(r, 0) : r;
  }
  bool defined() const {
    return std::any_of(values_.begin(), values_.end(), [](double v) { return std::isfinite(v); });
  }
  bool mean_shown() const {
    return summary_.enough() && (!options_.logarithmic || units_(summary_.mean) > 0);
  }
  Interval mean_range() const {
    const double mean = units_(summary_.mean), error = units_.scale * summary_.error;
    return {mean - error, mean + error};
  }
  void set_axis(Chart& chart, int ticks) {
    if (!defined()) {
      chart.note = left_out_ > 0 ? "no value is above 0" : "not defined in this run";
      chart.y = {{0, 1}, Spacing::Linear, {}, ""};
      return;
    }
    const Interval all = range_of(values_);
    Interval range = all;
    if (summary_.enough() && !options_.logarithmic)
      range =
          shown_range(all, settled_range(time_, values_, time_units_(summary_.discarded_until)));
    cut_ = range.low > all.low || range.high < all.high;
    chart.y = axis_of_values(range, options_.logarithmic ? Spacing::Logarithmic : Spacing::Linear,
                             ticks, 0.08);
  }
  void add_bands(Chart& chart) const {
    const double until = time_units_(summary_.discarded_until);
    if (std::isfinite(until) && until > chart.x.range.low)
      chart.x_bands.push_back({{chart.x.range.low, std::min(until, chart.x.range.high)},
                               start_up_ground,
                               start_up_opacity});
    if (!mean_shown() || !chart.note.empty()) return;
    const Interval band = mean_range();
    const double least = chart.y.range.low;
    chart.y_bands.push_back({{std::max(band.low, least), band.high}, mean_colour(), band_opacity});
    chart.y_levels.push_back({units_(summary_.mean), mean_colour()});
  }
  std::string words() const {
    std::string text;
    if (is_bookkeeping(column_)) return text;
    if (summary_.enough())
      text = "mean " + with_error(units_(summary_.mean), units_.scale * summary_.error);
    else
      text = fmt::format("no mean: {}", word(summary_.finding));
    if (left_out_ > 0)
      text += fmt::format("; {} {} not above 0", left_out_, left_out_ == 1 ? "value" : "values");
    if (cut_) text += "; start-up leaves the frame";
    return text;
  }

  const HistoryTable& table_;
  std::string column_;
  HistoryOptions options_;
  Shown units_, time_units_;
  std::vector<double> time_, values_;
  RecordSummary summary_;
  long left_out_ = 0;
  bool cut_ = false;
};

struct Layout {
  int rows = 0, columns = 1;
  double head = 0;   ///< of a panel: its name and mean
  double panel = 0;  ///< height of its frame
  double top = 0, height = 0;
};

constexpr double gap = 12, panels_gap = 40;

/// Panels are low: marks stand closer than in other charts.
int ticks_for(double panel) { return std::max(3, static_cast<int>(panel / 28)); }

Layout layout_for(const FigureStyle& style, int panels, double top) {
  const bool slide = style.size == FigureSize::Slide;
  Layout l;
  l.columns = slide && panels > 3 ? 2 : 1;
  l.rows = (panels + l.columns - 1) / l.columns;
  l.head = style.size == FigureSize::TwoColumn || (slide && l.columns == 1) ? 26 : 46;
  l.panel = style.size == FigureSize::TwoColumn ? 150 : 120;
  l.top = top;
  const double others = top + chart_margins.bottom + l.rows * l.head + (l.rows - 1) * gap;
  l.height = sheet_height(style.size, others + l.rows * l.panel);
  if (slide) l.panel = (l.height - others - 8) / l.rows;
  return l;
}

int most_on_a_slide(double top) {
  int n = 1;
  while (layout_for({FigureSize::Slide, Format::Png}, n + 1, top).panel >= least_panel) ++n;
  return n;
}

std::vector<KeyEntry> key_of(const std::vector<HistoryPanel>& panels) {
  const auto any = [&](auto has) { return std::any_of(panels.begin(), panels.end(), has); };
  std::vector<KeyEntry> key;
  if (any([](const HistoryPanel& p) { return !p.chart.x_bands.empty(); }))
    key.push_back(
        {"start-up, left out", start_up_ground, 0, Pattern::Solid, Symbol::None, start_up_opacity});
  if (any([](const HistoryPanel& p) { return !p.chart.y_bands.empty(); }))
    key.push_back({"mean of the rest with its 95 % error", mean_colour(), 1.5, Pattern::Dashed,
                   Symbol::None, band_opacity});
  return key;
}

void draw_head(Canvas& canvas, const HistoryPanel& p, const Frame& f, const Layout& l) {
  const bool one_row = l.head < 40;
  const TextStyle small{14, faint_ink, Weight::Normal, one_row ? 0.6 * f.width : f.width};
  canvas.text(written(p.chart.y_label, p.chart.y), {f.left, f.top - (one_row ? 6 : 26)}, {0, 1},
              {15, ink, Weight::Bold, one_row ? 0.4 * f.width : f.width});
  if (one_row)
    canvas.text(p.mean, {f.right(), f.top - 6}, {1, 1}, small);
  else
    canvas.text(p.mean, {f.left, f.top - 6}, {0, 1}, small);
}

/// What goes on the page but needs the frame's size first.
Chart fitted(const Chart& chart, const Frame& f, bool x_labels) {
  Chart c = chart;
  const Interval time = c.x.range;
  c.x = linear_axis(time, ticks_across(f));
  c.x_labels = x_labels;
  c.y_label = {};
  c.overhang = 14;
  for (Curve& curve : c.curves) curve = thinned(curve, static_cast<std::size_t>(2 * f.width));
  return c;
}

double labels_width(Canvas& canvas, const std::vector<HistoryPanel>& panels) {
  double widest = 0;
  for (const HistoryPanel& p : panels)
    widest = std::max(widest, width_of_labels(canvas, p.chart.y));
  return widest;
}

}  // namespace

std::vector<HistoryPanel> history_panels(const SavedRun& run, const HistoryOptions& options,
                                         int ticks) {
  const HistoryTable& table = history_of(run);
  std::vector<HistoryPanel> panels;
  for (const std::string& column : columns_for(table, options))
    panels.push_back(PanelMaker(run, options, column).panel(ticks));
  return panels;
}

std::string history_figure(const SavedRun& run, const HistoryOptions& options,
                           const FigureStyle& style) {
  FigurePage page(style, run.settings.title.empty() ? "Convection in time" : run.settings.title);
  const auto count = static_cast<int>(columns_for(history_of(run), options).size());
  const double panel = layout_for(style, count, page.top()).panel;
  const std::vector<HistoryPanel> panels = history_panels(run, options, ticks_for(panel));
  page.set_key(key_of(panels));
  const Layout l = layout_for(style, count, page.top());
  if (l.panel < least_panel)
    throw InputError(fmt::format(
        "figure history: {} columns do not fit a slide; choose {} at most with --columns, or "
        "--size two-column",
        count, most_on_a_slide(page.top())));
  Canvas& canvas = page.begin(l.height);
  const double labels = labels_width(canvas, panels) + 22;
  const double width = (page.width() - l.columns * (labels + chart_margins.right) -
                        (l.columns - 1) * (panels_gap - 20)) /
                       l.columns;
  for (int k = 0; k < count; ++k) {
    const int column = k / l.rows, row = k % l.rows;
    const Frame f{labels + column * (width + labels + chart_margins.right + panels_gap - 20),
                  l.top + l.head + row * (l.head + l.panel + gap), width, l.panel};
    const HistoryPanel& p = panels[static_cast<std::size_t>(k)];
    const bool lowest = row + 1 == l.rows || k + 1 == count;
    draw(canvas, fitted(p.chart, f, lowest), f);
    draw_head(canvas, p, f, l);
  }
  return canvas.bytes();
}

}  // namespace lidwright
