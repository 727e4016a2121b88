#include "solver/depth_profile.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

namespace lidwright {
namespace {

constexpr double undefined = std::numeric_limits<double>::quiet_NaN();

/// A list from the inner wall outwards turned round, between the walls' values.
std::vector<double> downwards(double outer, const std::vector<double>& rows, double inner) {
  std::vector<double> list{outer};
  list.insert(list.end(), rows.rbegin(), rows.rend());
  list.push_back(inner);
  return list;
}

/// The straight line through the two points next to an end, there.
double continued(double end, double near, double far, double at_near, double at_far) {
  return at_near + (at_near - at_far) * (end - near) / (near - far);
}

std::vector<double> log_viscosities(const std::vector<double>& depth,
                                    const std::vector<double>& viscosity) {
  std::vector<double> rows;
  for (const double eta : viscosity) rows.push_back(std::log(eta));
  std::vector<double> list = downwards(0, rows, 0);
  const std::size_t last = list.size() - 1;
  list[0] = continued(depth[0], depth[1], depth[2], list[1], list[2]);
  list[last] =
      continued(depth[last], depth[last - 1], depth[last - 2], list[last - 1], list[last - 2]);
  return list;
}

std::vector<double> speeds(const RadialProfiles& p) {
  std::vector<double> rows;
  for (std::size_t i = 0; i < p.radius.size(); ++i)
    rows.push_back(std::hypot(p.velocity_radial_rms[i], p.velocity_lateral_rms[i]));
  return rows;
}

/// Of the piece of a curve between x0 and x1 at `at`.
double on_line(double x0, double x1, double y0, double y1, double at) {
  return y0 + (y1 - y0) * (at - x0) / (x1 - x0);
}

}  // namespace

DepthProfile depth_profile(const Geometry& g, const RadialProfiles& p, const HistoryRow& walls) {
  const int last = g.radial_cells();
  std::vector<double> depths, areas;
  for (int i = 0; i < last; ++i) {
    depths.push_back(g.depth(i));
    areas.push_back(g.volume({i, 0}) * g.inv_width(i) * g.inverse_area(RadialFace{last, 0}));
  }
  DepthProfile d;
  d.depth = downwards(0, depths, g.outer_radius() - g.inner_radius());
  d.area = downwards(1, areas, g.face_measure(0) / g.face_measure(last));
  d.temperature = downwards(walls.temperature_outer, p.temperature, walls.temperature_inner);
  d.speed = downwards(walls.velocity_rms_outer, speeds(p), walls.velocity_rms_inner);
  d.radial_speed = downwards(0, p.velocity_radial_rms, 0);
  d.log_viscosity = log_viscosities(d.depth, p.viscosity);
  d.heat_conducted = downwards(walls.heat_flow_outer, p.heat_conducted, walls.heat_flow_inner);
  d.heat_advected = downwards(0, p.heat_advected, 0);
  return d;
}

double value_at(const std::vector<double>& x, const std::vector<double>& y, double at) {
  if (at <= x.front()) return y.front();
  if (at >= x.back()) return y.back();
  const auto k = static_cast<std::size_t>(std::upper_bound(x.begin(), x.end(), at) - x.begin());
  return on_line(x[k - 1], x[k], y[k - 1], y[k], at);
}

double first_rise(const std::vector<double>& x, const std::vector<double>& y, double level) {
  if (y.front() >= level) return x.front();
  for (std::size_t k = 1; k < x.size(); ++k)
    if (y[k] >= level) return on_line(y[k - 1], y[k], x[k - 1], x[k], level);
  return undefined;
}

double mean_between(const std::vector<double>& x, const std::vector<double>& y,
                    const std::vector<double>& weight, double begin, double end) {
  if (!(begin < end)) return undefined;
  double whole = 0, sum = 0;
  for (std::size_t k = 1; k < x.size(); ++k) {
    const double a = std::max(begin, x[k - 1]), b = std::min(end, x[k]);
    if (a >= b) continue;
    // Simpson's rule, exact for the product of two straight lines.
    const auto add = [&](double at, double share) {
      const double w = share * (b - a) * on_line(x[k - 1], x[k], weight[k - 1], weight[k], at);
      whole += w;
      sum += w * on_line(x[k - 1], x[k], y[k - 1], y[k], at);
    };
    add(a, 1.0 / 6);
    add((a + b) / 2, 2.0 / 3);
    add(b, 1.0 / 6);
  }
  return sum / whole;
}

}  // namespace lidwright
