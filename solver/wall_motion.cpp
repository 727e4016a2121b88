#include "solver/wall_motion.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <numeric>

#include "mesh/operators.hpp"

namespace lidwright {
namespace {

constexpr double undefined = std::numeric_limits<double>::quiet_NaN();

/// Between the wall's lateral faces of column j. Out of the plane the wall is stretched by what its
/// divergence leaves.
double strain_rate_of_column(const Power& power, const CornerField& psi, int face, int j) {
  const Geometry& g = power.geometry();
  const double left = wall_velocity(power, psi, face, j),
               right = wall_velocity(power, psi, face, j + 1);
  const double along = (right - left) * g.inv_lateral_width(j);
  const double divergence =
      (g.side_lateral(j + 1) * right - g.side_lateral(j) * left) * g.inverse_lateral_measure(j);
  const double out_of_plane = divergence - along;
  return std::sqrt((along * along + out_of_plane * out_of_plane) / 2) / g.face_stretch(face);
}

/// Over one row of cells.
double stress_rms(const Power& power, const CornerField& psi, int row) {
  const Geometry& g = power.geometry();
  const Range columns = power.decomposition().owned(At::Cell);
  std::vector<double> sums(2, 0.0);
  for (int j = columns.begin; j < columns.end; ++j) {
    const Cell c{row, j};
    sums[0] += g.volume(c) * std::pow(2 * power.viscosity()[c] * strain_rate(power, psi, c), 2);
    sums[1] += g.volume(c);
  }
  power.decomposition().sum_in_place(sums);
  return std::sqrt(sums[0] / sums[1]);
}

}  // namespace

double wall_velocity(const Power& power, const CornerField& psi, int face, int j) {
  const Geometry& g = power.geometry();
  const bool at_inner = face == 0;
  if ((at_inner ? power.inner_slip() : power.outer_slip()) == Slip::None) return 0;
  const int near = at_inner ? 0 : face - 1, far = at_inner ? 1 : face - 2;
  const double near2 = std::pow(g.cell_radius(near) - g.face_radius(face), 2);
  const double far2 = std::pow(g.cell_radius(far) - g.face_radius(face), 2);
  const double near_rate = velocity(g, psi, LateralFace{near, j}) / g.stretch(near);
  const double far_rate = velocity(g, psi, LateralFace{far, j}) / g.stretch(far);
  return g.face_stretch(face) * (far2 * near_rate - near2 * far_rate) / (far2 - near2);
}

double wall_velocity_rms(const Power& power, const CornerField& psi, int face) {
  const Geometry& g = power.geometry();
  const Range columns = power.decomposition().owned(At::Cell);
  double sum = 0;
  for (int j = columns.begin; j < columns.end; ++j) {
    const double left = wall_velocity(power, psi, face, j),
                 right = wall_velocity(power, psi, face, j + 1);
    sum += g.area(RadialFace{face, j}) * (left * left + right * right) / 2;
  }
  return std::sqrt(power.decomposition().sum(sum) / g.wall_area(face));
}

std::vector<double> wall_strain_rates(const Power& power, const CornerField& psi, int face) {
  std::vector<double> rates(static_cast<std::size_t>(power.geometry().lateral_cells()), 0.0);
  const Range columns = power.decomposition().owned(At::Cell);
  for (int j = columns.begin; j < columns.end; ++j)
    rates[static_cast<std::size_t>(j)] = strain_rate_of_column(power, psi, face, j);
  power.decomposition().sum_in_place(rates);
  return rates;
}

double deforming_share(const std::vector<double>& rates, const std::vector<double>& areas) {
  std::vector<std::size_t> order(rates.size());
  std::iota(order.begin(), order.end(), 0U);
  std::sort(order.begin(), order.end(),
            [&](std::size_t a, std::size_t b) { return rates[a] > rates[b]; });
  double left = 0, area = 0;
  for (const std::size_t k : order) left += 0.8 * rates[k] * areas[k];
  if (left == 0) return undefined;
  for (const std::size_t k : order) {
    const double amount = rates[k] * areas[k];
    area += amount < left ? areas[k] : areas[k] * left / amount;
    if (amount >= left) break;
    left -= amount;
  }
  return area / std::accumulate(areas.begin(), areas.end(), 0.0);
}

double plateness(const Power& power, const CornerField& psi) {
  const Geometry& g = power.geometry();
  std::vector<double> areas;
  for (int j = 0; j < g.lateral_cells(); ++j) areas.push_back(g.lateral_measure(j));
  return 1 - deforming_share(wall_strain_rates(power, psi, g.radial_cells()), areas) /
                 isoviscous_deforming_share;
}

double surface_stress_rms(const Power& power, const CornerField& psi) {
  const Geometry& g = power.geometry();
  const int top = g.radial_cells() - 1;
  const double at_top = stress_rms(power, psi, top), below = stress_rms(power, psi, top - 1);
  if (at_top == 0 || below == 0) return at_top;
  const double steps = g.depth(top) / (g.depth(top - 1) - g.depth(top));
  return at_top * std::pow(at_top / below, steps);
}

}  // namespace lidwright
