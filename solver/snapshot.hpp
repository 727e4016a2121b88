#pragma once

#include <vector>

#include "mesh/field.hpp"
#include "solver/diagnostics.hpp"

/// The state at one time as people look at it: what io/snapshot writes for viewers.
namespace lidwright {

/// Along one wall, all columns in order of the lateral coordinate; filled on rank 0 only.
struct WallTrace {
  std::vector<double> lateral;        ///< lateral coordinate of the column's middle
  std::vector<double> heat_flux;      ///< along +r, k DeltaT / d
  std::vector<double> velocity;       ///< along the wall, kappa / d
  std::vector<double> normal_stress;  ///< sigma_rr less its mean, > 0 is tension, eta kappa / d^2;
                                      ///< empty: not asked for
};

struct Snapshot {
  long step = 0;
  double time = 0;
  CellField temperature;
  CellField viscosity;
  CellField strain_rate;      ///< second invariant sqrt(e : e / 2)
  CellField velocity_radial;  ///< at cell middles
  CellField velocity_lateral;
  CellField pressure;           ///< volume mean 0; empty: not asked for
  CornerField stream_function;  ///< mass flux from the inner wall's zero, through-flow included
  WallTrace inner, outer;
  RadialProfiles profiles;  ///< the same on all ranks
};

}  // namespace lidwright
