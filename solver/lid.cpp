#include "solver/lid.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

namespace lidwright {
namespace {

constexpr double undefined = std::numeric_limits<double>::quiet_NaN();

/// Thickness of a layer through which the temperature changes by `drop` at its wall's gradient; 0
/// where it changes the other way.
double layer(double drop, double gradient) { return drop * gradient > 0 ? drop / gradient : 0; }

Interior between_layers(const DepthProfile& p, const WallGradients& g, double temperature) {
  return {temperature, layer(temperature - p.temperature.front(), g.outer),
          p.depth.back() - layer(p.temperature.back() - temperature, g.inner)};
}

/// Slope of a curve in the middle between its points k and k + 1.
struct Slopes {
  const std::vector<double>&x, &y;
  double place(std::size_t k) const { return (x[k] + x[k + 1]) / 2; }
  double operator[](std::size_t k) const { return (y[k + 1] - y[k]) / (x[k + 1] - x[k]); }
};

std::size_t steepest(const Slopes& slope, std::size_t count) {
  std::size_t best = 0;
  for (std::size_t k = 1; k < count; ++k)
    if (slope[k] > slope[best]) best = k;
  return best;
}

/// Of the tangent where the slope is largest, on the parabola through three slopes, the place
/// where it meets 0.
double foot_of_tangent(const Slopes& s, std::size_t k) {
  const double here = s.place(k), left = s.place(k - 1) - here, right = s.place(k + 1) - here;
  const double to_left = (s[k - 1] - s[k]) / left, to_right = (s[k + 1] - s[k]) / right;
  const double bend = (to_right - to_left) / (right - left), tilt = to_left - bend * left;
  const double top = bend < 0 ? std::clamp(-tilt / (2 * bend), left, right) : 0;
  const auto rise = [&](double z) { return z * (s[k] + z * (tilt / 2 + z * bend / 3)); };
  const double value = s.y[k] + rise(top) - rise(s.x[k] - here);
  return here + top - value / (s[k] + top * (tilt + top * bend));
}

}  // namespace

Interior interior(const DepthProfile& p, const WallGradients& g) {
  constexpr int most = 1000;
  const auto [least, largest] = std::minmax_element(p.temperature.begin(), p.temperature.end());
  const double tolerance = 1e-13 * (*largest - *least);
  double t = mean_between(p.depth, p.temperature, p.area, p.depth.front(), p.depth.back());
  for (int n = 0; n < most; ++n) {
    const Interior guess = between_layers(p, g, t);
    const double mean = mean_between(p.depth, p.temperature, p.area, guess.begin, guess.end);
    if (std::isnan(mean)) break;
    if (std::abs(mean - t) <= tolerance) return between_layers(p, g, mean);
    t = mean;
  }
  return {undefined, undefined, undefined};
}

double interior_viscosity(const DepthProfile& p, const Interior& i) {
  return std::exp(mean_between(p.depth, p.log_viscosity, p.area, i.begin, i.end));
}

double interior_log_slope(const ViscosityLaw& law, const Interior& i) {
  if (std::isnan(i.temperature)) return undefined;
  return law.log_slope({i.temperature, (i.begin + i.end) / 2});
}

double lid_thickness_velocity(const DepthProfile& p) {
  const auto fastest = std::max_element(p.radial_speed.begin(), p.radial_speed.end());
  if (!(*fastest > 0)) return undefined;
  const Slopes slope{p.depth, p.speed};
  const std::size_t k = steepest(slope, static_cast<std::size_t>(fastest - p.radial_speed.begin()));
  if (slope[k] <= 0) return 0;
  const double foot = k == 0 ? slope.place(0) - (p.speed[0] + p.speed[1]) / 2 / slope[0]
                             : foot_of_tangent(slope, k);
  return std::max(foot, 0.0);
}

double lid_thickness_isotherm(const DepthProfile& p, const Interior& i, double log_slope) {
  if (std::isnan(i.temperature)) return undefined;
  if (log_slope == 0) return 0;
  return first_rise(p.depth, p.temperature, i.temperature - lid_base_drop / std::abs(log_slope));
}

double lid_thickness_advection(const DepthProfile& p) {
  std::vector<double> share;
  for (std::size_t k = 0; k < p.depth.size(); ++k) {
    const double heat = p.heat_conducted[k] + p.heat_advected[k];
    if (heat <= 0) break;
    share.push_back(p.heat_advected[k] / heat);
  }
  if (share.empty()) return undefined;
  const std::vector<double> depth(p.depth.begin(),
                                  p.depth.begin() + static_cast<std::ptrdiff_t>(share.size()));
  return first_rise(depth, share, 0.1);
}

}  // namespace lidwright
