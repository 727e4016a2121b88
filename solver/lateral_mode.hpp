#pragma once

#include <vector>

#include "mesh/geometry.hpp"
#include "solver/neutral_modes.hpp"

/// Lateral modes of a shell that is the same all along its lateral coordinate but for the metric.
///
/// y at cells solves L y = mu M y, with M the lateral measure and L the lateral stiffness of
/// conduction (both of mesh/geometry.hpp); it is a cosine in box and annuli and a Legendre
/// polynomial P_l with mu = l(l + 1) in the axisymmetric shell from pole to pole. z at corners,
/// with z(right) - z(left) = M y, is the shape of the stream function whose radial velocity goes
/// like y.
///
/// Conduction, buoyancy and the advection of a radial profile take one mode into itself exactly; so
/// does viscous flow on a uniform lateral grid, while in the axisymmetric shell the metric terms
/// couple discrete modes at second order in the cell, which changes an eigenvalue at fourth order.
namespace lidwright {

struct LateralMode {
  double eigenvalue = 0;        ///< mu
  std::vector<double> cells;    ///< y, 1 at the first cell
  std::vector<double> corners;  ///< z, 0 at both sides
};

/// The mode with `half_waves` changes of sign, 1 <= half_waves < lateral cells, between reflecting
/// sides.
LateralMode lateral_mode(const Geometry&, int half_waves);

/// The blocks of the radial problem that is left for one lateral mode: those of the whole mesh
/// between reflecting sides, projected on y and z.
RestBlocks projected(const RestBlocks&, const LateralMode&, int radial_cells);

}  // namespace lidwright
