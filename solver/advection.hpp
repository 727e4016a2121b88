#pragma once

#include <algorithm>
#include <cmath>

/// Heat carried through a face by the flow through it, from the temperatures of the four cells in
/// line: two before the face and two behind it, in the direction in which the flow counts as
/// positive.
namespace lidwright {

inline double carried_central(double flow, double, double before, double behind, double) {
  return flow * (before + behind) / 2;
}

/// Upwind-biased, third order where the field is smooth, limited by Koren 1993 (in Numerical
/// Methods for Advection-Diffusion Problems, Vieweg, 117). With r the downwind over the upwind
/// difference D,
///     T_face = T_upwind + (1/2) max(0, min(2 r, (1 + 2 r)/3, 2)) D,
/// written without the division, so that a column of faces can be vectorised.
inline double upwind_biased(double far_upwind, double upwind, double downwind) {
  const double behind = upwind - far_upwind, ahead = downwind - upwind;
  const double d = std::abs(behind), a = std::abs(ahead);
  const double correction = 0.5 * std::min({2 * a, (d + 2 * a) / 3, 2 * d});
  return upwind + (behind * ahead > 0 ? std::copysign(correction, behind) : 0.0);
}

inline double carried_limited(double flow, double far_before, double before, double behind,
                              double far_behind) {
  const double forwards = upwind_biased(far_before, before, behind);
  const double backwards = upwind_biased(far_behind, behind, before);
  return flow * (flow > 0 ? forwards : backwards);
}

}  // namespace lidwright
