#pragma once

#include "solver/newton.hpp"
#include "solver/stored_temperature.hpp"

/// From a start that is far away: the simulation itself for a while, then Newton's method.
namespace lidwright {

/// Marches the equations' model from the initial state in stretches of about two overturns until it
/// changes slowly and ever more so, then tries Newton's method; if that fails, marches on. The
/// march has the limited flux whatever the equations have: on a coarse grid central fluxes may
/// oscillate for ever where the flow is steady. When no steady state is found, the equations hold
/// the last temperature of the march and the outcome's remark says what was seen. On one rank.
NewtonOutcome settle_by_marching(SteadyEquations&, CoupledSolver&, const SettleSettings&,
                                 const InitialSettings&, const StoredTemperature&, long most_steps,
                                 const SettleObserver&);

}  // namespace lidwright
