#pragma once

#include "solver/implicit_conduction.hpp"

/// Heat in time.
namespace lidwright {

/// Mean heat flows of a step.
struct StepHeat {
  WallHeat through;
  double viscous = 0;    ///< heating
  double adiabatic = 0;  ///< work done, > 0 cools
  double carried = 0;    ///< gained by advection; 0 by conservation where cp is uniform
  /// Without sources.
  double gain() const { return through.inner - through.outer + viscous - adiabatic + carried; }
};

/// One step of the three-stage IMEX scheme ARK2 of Giraldo, Kelly & Constantinescu 2013 (SIAM J.
/// Sci. Comput. 35, B1162; coefficients from memory, order tested): TR-BDF2 for conduction
/// (L-stable), an explicit scheme with non-negative weights for advection. Second order,
/// conservative to round-off, and a steady state of the space-discrete equations is one of the
/// scheme, whatever the step.
class HeatStepper {
 public:
  HeatStepper(std::shared_ptr<const Decomposition>, const Walls&, const HeatSources&, HeatFlux,
              const ReferenceProfiles& = {});

  /// Flow and viscous heating of cells (empty: none) at one time.
  struct Forcing {
    CornerField psi;
    CellField viscous;
  };
  /// T(t + dt) from T(t), the flow at t and the flow foreseen at t + dt (straight line between);
  /// all with ghosts. Returns the mean heat flows over the step. Collective.
  StepHeat step(const CellField& temperature, const Forcing& now, const Forcing& then, double dt,
                CellField& next);

  HeatStepper(const HeatStepper&) = delete;
  HeatStepper& operator=(const HeatStepper&) = delete;

  const HeatOperator& heat() const { return heat_; }

 private:
  struct Stage;
  Stage stage(const CellField& temperature, const Forcing&) const;

  HeatOperator heat_;
  ImplicitConduction implicit_;
};

}  // namespace lidwright
