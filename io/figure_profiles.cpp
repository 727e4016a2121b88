#include "io/figure_profiles.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <filesystem>
#include <memory>

#include "io/atomic_file.hpp"
#include "io/figure_page.hpp"
#include "io/figure_words.hpp"
#include "io/picture_layout.hpp"
#include "io/plot_marks.hpp"
#include "io/thinning.hpp"
#include "mesh/geometry.hpp"
#include "solver/initial.hpp"

namespace lidwright {
namespace {

using namespace plot;

constexpr std::size_t most_times = 8;
constexpr Pattern lid_pattern = Pattern::Dashed, layer_pattern = Pattern::Dotted,
                  advected_pattern = Pattern::Dashed, reference_pattern = Pattern::DashDotted;

const Colour& lid_colour() {
  static const Colour c = curve_colour(1);
  return c;
}
const Colour& layer_colour() {
  static const Colour c = curve_colour(3);
  return c;
}

/// The row of a table whose `key` is nearest to a value, and its columns.
class RowNearest {
 public:
  RowNearest(const NumberTable& t, const std::string& key, double value) : table_(t) {
    const auto* keys = t.find(key);
    if (!keys || keys->empty()) return;
    row_ = static_cast<long>(nearest_row(*keys, value));
  }
  double operator[](const char* column) const {
    const auto* values = table_.find(column);
    return values && row_ >= 0 ? (*values)[static_cast<std::size_t>(row_)] : std::nan("");
  }
  Layers layers() const {
    return {(*this)["lid_thickness_velocity"], (*this)["lid_thickness_conduction"],
            (*this)["boundary_layer_inner"]};
  }

 private:
  const NumberTable& table_;
  long row_ = -1;
};

/// A conductive profile exists where the walls and sources alone decide it.
std::vector<double> conductive(const Model& m) {
  const auto geometry = std::make_shared<Geometry>(m.shell, m.grid);
  const auto d = std::make_shared<Decomposition>(geometry, PETSC_COMM_SELF);
  return conductive_profile(HeatOperator(d, m.walls, m.heat, HeatFlux::Central, m.reference));
}

bool rises(const std::vector<double>& adiabat) {
  const Interval r = range_of(adiabat);
  return r.high - r.low > 1e-3 * std::abs(r.high);
}

/// What is drawn, and what of it the key has to name.
struct Panels {
  std::vector<Chart> charts;
  std::vector<KeyEntry> key;
};

class PanelMaker {
 public:
  PanelMaker(const SavedRun& run, const std::vector<std::size_t>& snapshots, int across,
             int upright)
      : run_(run), snapshots_(snapshots) {
    settings_ = settings_of(run, snapshots.front());
    const Geometry g(settings_.model.shell, settings_.model.grid);
    room_ = {g.inner_radius(), g.outer_radius(), picture_units(settings_.body), across, upright};
    for (std::size_t k = 0; k < snapshots.size(); ++k)
      curves_.push_back({profiles_at(snapshots[k]),
                         several() ? graded_colour(k, snapshots.size()) : curve_colour(2)});
  }

  Panels panels() {
    Panels p;
    if (several()) add_times(p);
    std::vector<Curve> references;
    if (!several()) references = reference_curves(p);
    p.charts = profile_charts(curves_, room_, temperatures(references));
    auto& of_temperature = p.charts.front().curves;
    of_temperature.insert(of_temperature.begin(), references.begin(), references.end());
    p.charts.push_back(heat_chart());
    p.key.push_back({"heat conducted", ink_of_heat(), 2});
    p.key.push_back({"heat advected", ink_of_heat(), 2, advected_pattern});
    if (!several()) add_layers(p);
    return p;
  }

 private:
  bool several() const { return snapshots_.size() > 1; }
  Colour ink_of_heat() const { return several() ? ink : curves_.front().colour; }
  std::string table_of(std::size_t n) const { return run_.paths.folder + "/" + profiles_name(n); }

  /// States along a branch may have other radii: what they have in common is depth.
  RadialProfiles profiles_at(std::size_t n) const {
    RadialProfiles p = radial_profiles(read_profiles(run_, n), table_of(n));
    const Model m = settings_of(run_, n).model;
    const double shift = room_.outer_radius - Geometry(m.shell, m.grid).outer_radius();
    for (double& radius : p.radius) radius += shift;
    return p;
  }

  Interval temperatures(const std::vector<Curve>& references) const {
    std::vector<double> all;
    for (const ProfileCurve& c : curves_)
      for (const double t : room_.units.temperature(c.profiles.temperature)) all.push_back(t);
    for (const Curve& c : references) all.insert(all.end(), c.x.begin(), c.x.end());
    return range_of(all);
  }

  std::vector<Curve> reference_curves(Panels& p) {
    const ProfileCurve& c = curves_.front();
    std::vector<Curve> all;
    const auto add = [&](const std::vector<double>& values, const char* name, Pattern pattern,
                         const Colour& colour) {
      Curve curve = depth_curve(room_, {c.profiles, colour}, room_.units.temperature(values));
      curve.pattern = pattern;
      curve.width = 1.5;
      all.push_back(curve);
      p.key.push_back({name, colour, 1.5, pattern});
    };
    const std::vector<double> at_rest = conductive(settings_.model);
    if (at_rest.size() == c.profiles.radius.size())
      add(at_rest, "conduction alone", reference_pattern, curve_colour(0));
    if (rises(c.profiles.temperature_adiabatic))
      add(c.profiles.temperature_adiabatic, "adiabat", Pattern::Dotted, curve_colour(1));
    return all;
  }

  Chart heat_chart() const {
    const Shape shape = settings_.model.shell.shape;
    Chart chart = depth_chart(room_, {"heat flow", unit_markup("k DeltaT d^(n-2)", shape)}, {});
    std::vector<double> ends{0};
    for (const ProfileCurve& c : curves_) {
      chart.curves.push_back(depth_curve(room_, c, c.profiles.heat_conducted));
      chart.curves.push_back(depth_curve(room_, c, c.profiles.heat_advected));
      chart.curves.back().pattern = advected_pattern;
    }
    for (const Curve& c : chart.curves) {
      const Interval r = range_of(c.x);
      ends.insert(ends.end(), {r.low, r.high});
    }
    chart.x = axis_of_values(range_of(ends), Spacing::Linear, room_.across);
    chart.y_labels = false;
    return chart;
  }

  void add_layers(Panels& p) {
    const Layers layers = layers_at(run_, snapshots_.front());
    const double whole = room_.outer_radius - room_.inner_radius;
    if (layers.lid > 0) {
      add_level(p, layers.lid, lid_colour(), lid_pattern);
      p.key.push_back({"base of the lid, by velocity", lid_colour(), 1.5, lid_pattern});
    }
    if (!(layers.outer > 0) && !(layers.inner > 0)) return;
    if (layers.outer > 0) add_level(p, layers.outer, layer_colour(), layer_pattern);
    if (layers.inner > 0) add_level(p, whole - layers.inner, layer_colour(), layer_pattern);
    p.key.push_back({"thermal boundary layers", layer_colour(), 1.5, layer_pattern});
  }
  void add_level(Panels& p, double depth, const Colour& colour, Pattern pattern) {
    for (Chart& chart : p.charts)
      chart.y_levels.push_back({room_.units.length(depth), colour, pattern});
  }

  void add_times(Panels& p) const {
    const Shown time = shown_time(run_.settings);
    for (std::size_t k = 0; k < snapshots_.size(); ++k)
      p.key.push_back({moment(snapshots_[k], time, k == 0), curves_[k].colour, 2});
  }
  std::string moment(std::size_t n, const Shown& time, bool first) const {
    if (run_.kind != RunKind::March) return fmt::format("{}{}", first ? "state " : "", n);
    const std::string digits = four_digits(time(run_.snapshots[n].time));
    return first ? fmt::format("time {} {}", digits, time.unit) : digits;
  }

  const SavedRun& run_;
  std::vector<std::size_t> snapshots_;
  Case settings_;  ///< of the first of them
  ProfileRoom room_{};
  std::vector<ProfileCurve> curves_;
};

struct Layout {
  int rows, columns;
  double panel;  ///< height of a frame
};

constexpr double gap = 24, one_column_panel = 210, two_column_panel = 330;

Layout layout_for(FigureSize size, int charts) {
  if (size == FigureSize::OneColumn) return {(charts + 1) / 2, 2, one_column_panel};
  return {1, charts, two_column_panel};
}

double page_height(const Layout& l, double top) {
  return top + 8 + l.rows * (l.panel + chart_margins.bottom) + (l.rows - 1) * 10;
}

std::vector<std::size_t> shown_snapshots(const SavedRun& run,
                                         const std::vector<std::size_t>& snapshots) {
  if (run.kind == RunKind::Onset)
    throw InputError(
        fmt::format("{}: the mean of a neutral disturbance is 0 at all depths; profiles are of "
                    "march and settle",
                    run.paths.folder));
  if (snapshots.empty())
    throw InputError(
        fmt::format("{}: has no snapshot yet, so there are no profiles", run.paths.folder));
  std::vector<std::size_t> chosen;
  for (const std::size_t k : evenly_chosen(snapshots.size(), most_times))
    chosen.push_back(snapshots[k]);
  return chosen;
}

}  // namespace

Layers layers_at(const SavedRun& run, std::size_t snapshot) {
  if (run.history) return RowNearest(*run.history, "time", run.snapshots[snapshot].time).layers();
  if (run.kind != RunKind::Settle || !std::filesystem::exists(run.paths.branch()))
    return {std::nan(""), std::nan(""), std::nan("")};
  const NumberTable branch = parse_numbers(read_whole_file(run.paths.branch()), run.paths.branch());
  return RowNearest(branch, "snapshot", static_cast<double>(snapshot)).layers();
}

std::vector<Chart> profile_panels(const SavedRun& run, const std::vector<std::size_t>& snapshots,
                                  int across, int upright) {
  return PanelMaker(run, snapshots, across, upright).panels().charts;
}

std::string profiles_figure(const SavedRun& run, const std::vector<std::size_t>& snapshots,
                            const FigureStyle& style) {
  const std::vector<std::size_t> shown = shown_snapshots(run, snapshots);
  const bool narrow = style.size == FigureSize::OneColumn;
  Panels p = PanelMaker(run, shown, 5, narrow ? 5 : 7).panels();
  FigurePage page(style, run.settings.title.empty() ? "Means at each depth" : run.settings.title);
  page.set_key(p.key);
  Layout l = layout_for(style.size, static_cast<int>(p.charts.size()));
  const double height = sheet_height(style.size, page_height(l, page.top()));
  if (style.size == FigureSize::Slide) l.panel += height - page_height(l, page.top()) - 6;
  Canvas& canvas = page.begin(height);
  const double left = width_of_labels(canvas, p.charts.front().y) + 40;
  const double width =
      (page.width() - left - chart_margins.right - (l.columns - 1) * gap) / l.columns;
  for (std::size_t k = 0; k < p.charts.size(); ++k) {
    const int row = static_cast<int>(k) / l.columns, column = static_cast<int>(k) % l.columns;
    p.charts[k].y_labels = column == 0;
    draw(canvas, p.charts[k],
         {left + column * (width + gap),
          page.top() + 8 + row * (l.panel + chart_margins.bottom + 10), width, l.panel});
  }
  return canvas.bytes();
}

}  // namespace lidwright
