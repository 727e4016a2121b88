#pragma once

#include <vector>

#include "mesh/geometry.hpp"
#include "solver/diagnostics.hpp"

/// Means over surfaces as functions of depth, and what can be read off such a curve between its
/// points.
namespace lidwright {

/// From the outer wall (depth 0) down to the inner one (depth 1), both included; all lists are
/// equally long. Between the points a curve is straight.
struct DepthProfile {
  std::vector<double> depth;           ///< d, rising
  std::vector<double> area;            ///< of the surface, over the outer wall's
  std::vector<double> temperature;     ///< DeltaT
  std::vector<double> speed;           ///< root mean square of both components, kappa/d
  std::vector<double> radial_speed;    ///< root mean square, kappa/d
  std::vector<double> log_viscosity;   ///< mean of ln(eta)
  std::vector<double> heat_conducted;  ///< k DeltaT d^(n-2), > 0 outwards
  std::vector<double> heat_advected;   ///< same unit and sign
};

/// The profiles' rows and the walls' means of a row: temperature, velocity and heat flow, which is
/// all conducted there. ln(eta) at a wall is continued along a straight line.
DepthProfile depth_profile(const Geometry&, const RadialProfiles&, const HistoryRow& walls);

/// Value of the curve y(x) at `at`; x rising, held constant beyond the ends.
double value_at(const std::vector<double>& x, const std::vector<double>& y, double at);
/// The least x at which the curve y(x) is not below `level`; nan when there is none.
double first_rise(const std::vector<double>& x, const std::vector<double>& y, double level);
/// Mean of the curve y(x) between two places, weighted by another curve; nan unless begin < end.
double mean_between(const std::vector<double>& x, const std::vector<double>& y,
                    const std::vector<double>& weight, double begin, double end);

}  // namespace lidwright
