#include "solver/lateral_mode.hpp"

#include <algorithm>
#include <cassert>
#include <cmath>
#include <limits>

namespace lidwright {
namespace {

/// L: stiffness of a lateral face between its cells, 0 at sides.
double stiffness(const Geometry& g, int j) {
  return j == 0 || j == g.lateral_cells() ? 0 : g.side_lateral(j) / g.lateral_distance(j);
}

/// How many eigenvalues are below mu: negative pivots of L - mu M (Sylvester's law of inertia).
int eigenvalues_below(const Geometry& g, double mu) {
  int count = 0;
  double pivot = 1;
  for (int j = 0; j < g.lateral_cells(); ++j) {
    const double left = stiffness(g, j), right = stiffness(g, j + 1);
    pivot = left + right - mu * g.lateral_measure(j) - left * left / pivot;
    if (pivot == 0) pivot = std::numeric_limits<double>::min();
    count += pivot < 0 ? 1 : 0;
  }
  return count;
}

double upper_bound_of_eigenvalues(const Geometry& g) {
  double bound = 0;
  for (int j = 0; j < g.lateral_cells(); ++j)
    bound = std::max(bound, 2 * (stiffness(g, j) + stiffness(g, j + 1)) / g.lateral_measure(j));
  return bound;
}

/// By bisection, to the last bit.
double eigenvalue(const Geometry& g, int number) {
  double low = 0, high = upper_bound_of_eigenvalues(g);
  for (double middle = (low + high) / 2; middle > low && middle < high; middle = (low + high) / 2)
    (eigenvalues_below(g, middle) > number ? high : low) = middle;
  return (low + high) / 2;
}

struct Place {
  long radial, lateral;
};
Place place_of(long unknown, long rows) { return {unknown % rows, unknown / rows}; }

SparseBlock projected(const SparseBlock& block, const std::vector<double>& left, long left_rows,
                      const std::vector<double>& right, long right_rows) {
  std::vector<Eigen::Triplet<double, long>> entries;
  for (long column = 0; column < block.outerSize(); ++column) {
    const Place to = place_of(column, right_rows);
    const double weight = right[static_cast<std::size_t>(to.lateral)];
    for (SparseBlock::InnerIterator entry(block, column); entry; ++entry) {
      const Place from = place_of(entry.row(), left_rows);
      entries.emplace_back(from.radial, to.radial,
                           left[static_cast<std::size_t>(from.lateral)] * entry.value() * weight);
    }
  }
  SparseBlock small(left_rows, right_rows);
  small.setFromTriplets(entries.begin(), entries.end());
  return small;
}

}  // namespace

/// The mode itself follows from its eigenvalue cell by cell, with the flux through the faces,
/// L y = mu M y being flux(right) - flux(left) = mu M y; and z = flux / mu.
LateralMode lateral_mode(const Geometry& g, int half_waves) {
  assert(!g.periodic() && half_waves >= 1 && half_waves < g.lateral_cells());
  LateralMode mode;
  mode.eigenvalue = eigenvalue(g, half_waves);
  double y = 1, z = 0;
  mode.corners.push_back(z);
  for (int j = 0; j < g.lateral_cells(); ++j) {
    mode.cells.push_back(y);
    z += g.lateral_measure(j) * y;
    mode.corners.push_back(z);
    if (j + 1 < g.lateral_cells()) y -= mode.eigenvalue * z / stiffness(g, j + 1);
  }
  mode.corners.back() = 0;
  return mode;
}

RestBlocks projected(const RestBlocks& whole, const LateralMode& mode, int radial_cells) {
  // psi has no unknowns on walls and sides.
  const std::vector<double> z(mode.corners.begin() + 1, mode.corners.end() - 1);
  const std::vector<double>& y = mode.cells;
  const long cells = radial_cells, corners = radial_cells - 1;
  return {projected(whole.flow_by_psi, z, corners, z, corners),
          projected(whole.flow_by_temperature, z, corners, y, cells),
          projected(whole.heat_by_psi, y, cells, z, corners),
          projected(whole.heat_by_temperature, y, cells, y, cells)};
}

}  // namespace lidwright
