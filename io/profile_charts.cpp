#include "io/profile_charts.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "io/case_file.hpp"

namespace lidwright {
namespace {

using namespace plot;

std::vector<double> speed(const RadialProfiles& p) {
  std::vector<double> all;
  for (std::size_t k = 0; k < p.radius.size(); ++k)
    all.push_back(std::hypot(p.velocity_radial_rms[k], p.velocity_lateral_rms[k]));
  return all;
}

Axis from_zero(const Interval& values, int most) {
  return linear_axis({0, values.high > 0 ? 1.06 * values.high : 1}, most);
}

/// The range of all curves' values.
Interval range_of_curves(const Chart& chart) {
  std::vector<double> ends;
  for (const Curve& c : chart.curves) {
    const Interval r = range_of(c.x);
    ends.insert(ends.end(), {r.low, r.high});
  }
  return range_of(ends);
}

template <class Values>
Chart chart_of(const std::vector<ProfileCurve>& all, const ProfileRoom& room, const Label& label,
               const Shown& shown, Values values) {
  Chart chart = depth_chart(room, label, {});
  for (const ProfileCurve& c : all)
    chart.curves.push_back(depth_curve(room, c, shown(values(c.profiles))));
  return chart;
}

}  // namespace

RadialProfiles radial_profiles(const NumberTable& t, const std::string& path) {
  const auto column = [&](const char* name) {
    if (const auto* values = t.find(name)) return *values;
    throw InputError(fmt::format("{}: has no column '{}'; it is no table of profiles", path, name));
  };
  return {column("radius"),
          column("temperature"),
          column("temperature_adiabatic"),
          column("velocity_radial_rms"),
          column("velocity_lateral_rms"),
          column("viscosity"),
          column("heat_conducted"),
          column("heat_advected")};
}

bool viscosity_varies(const RadialProfiles& p) {
  const Interval r = range_of(p.viscosity);
  return r.low > 0 && r.high > 1.01 * r.low;
}

Chart depth_chart(const ProfileRoom& room, const Label& label, const Axis& axis) {
  const Shown& length = room.units.length;
  Chart chart;
  chart.x_label = label;
  chart.y_label = Label{"depth", length.unit};
  chart.x = axis;
  chart.y = linear_axis({0, length(room.outer_radius - room.inner_radius)}, room.upright);
  chart.y_downwards = true;
  chart.overhang = 6;
  return chart;
}

Curve depth_curve(const ProfileRoom& room, const ProfileCurve& c, std::vector<double> values) {
  std::vector<double> depth;
  for (const double radius : c.profiles.radius)
    depth.push_back(room.units.length(room.outer_radius - radius));
  return {std::move(values), std::move(depth), c.colour, ""};
}

std::vector<Chart> profile_charts(const std::vector<ProfileCurve>& all, const ProfileRoom& room,
                                  const Interval& temperatures) {
  const PictureUnits& units = room.units;
  std::vector<Chart> charts;
  charts.push_back(chart_of(all, room, {"temperature", units.temperature.unit}, units.temperature,
                            [](const RadialProfiles& p) { return p.temperature; }));
  charts.back().x = linear_axis(with_margin(temperatures, 0.03), room.across);
  charts.push_back(
      chart_of(all, room, {"rms velocity", units.velocity.unit}, units.velocity, speed));
  charts.back().x = from_zero(range_of_curves(charts.back()), room.across);
  if (std::any_of(all.begin(), all.end(),
                  [](const ProfileCurve& c) { return viscosity_varies(c.profiles); })) {
    charts.push_back(chart_of(all, room, {"viscosity", units.viscosity.unit}, units.viscosity,
                              [](const RadialProfiles& p) { return p.viscosity; }));
    charts.back().x = logarithmic_axis(range_of_curves(charts.back()), room.across);
  }
  for (std::size_t k = 1; k < charts.size(); ++k) charts[k].y_labels = false;
  return charts;
}

}  // namespace lidwright
