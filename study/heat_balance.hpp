#pragma once

#include <memory>
#include <vector>

#include "solver/mantle.hpp"

/// Steady heat balance of a convecting shell by boundary-layer laws (physics/laws.hpp): each wall's
/// flux follows from the drop across its layer, and the interior takes the temperature at which as
/// much leaves as enters and is produced. This carries laws of a plane layer over to curved shells,
/// mixed heating, depth-dependent properties and an adiabatic interior; only where all of that is
/// absent is it the very law. Dimensionless. Pure.
namespace lidwright {

/// Which viscosity the outer boundary layer of a mantle without a lid feels.
enum class LayerViscosity { Interior, Film };

/// q = a (drop)^(4/3) (local Ra)^(1/3) through a layer, or drips under a stagnant lid.
struct BalanceLaws {
  bool stagnant = false;
  double drips = 0;  ///< C of the lid's base, when stagnant
  double outer = 0;  ///< a of the outer layer, when not
  double inner = 0;  ///< a of the inner layer
  LayerViscosity viscosity = LayerViscosity::Interior;
};

struct HeatBalance {
  double interior = 0;           ///< temperature below the outer layer or lid
  double hot_wall = 0;           ///< temperature of the inner wall
  double nusselt_outer = 1;      ///< as the history has it; > 0 leaves
  double lid = 0;                ///< thickness of the stagnant lid; 0: none
  double outer_layer = 0;        ///< thermal boundary layer below the surface or the lid
  double inner_layer = 0;        ///< at the inner wall; 0: none
  double interior_rayleigh = 0;  ///< with the viscosity of the interior, unit drop
  double theta = 0;              ///< drop from wall to wall times |d ln(eta)/dT| of the interior
  double settling = 0;           ///< time in which an excess of heat leaves, d^2/kappa
};

/// Solves it; needs an outer wall of fixed temperature (else the result is that of no convection).
HeatBalance heat_balance(const Model&, const Geometry&, const BalanceLaws&);

}  // namespace lidwright
