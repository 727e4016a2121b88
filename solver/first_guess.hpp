#pragma once

#include "solver/newton.hpp"
#include "solver/stored_temperature.hpp"

/// From a start that is far away: the simulation itself for a while, then Newton's method.
namespace lidwright {

/// Marches the equations' model from the initial state in stretches of about two overturns until
/// the residual is small and falls, then tries Newton's method; if that fails, marches on. The
/// outcome's remark says what was seen when no steady state is found. On one rank.
NewtonOutcome settle_by_marching(SteadyEquations&, CoupledSolver&, const SettleSettings&,
                                 const InitialSettings&, const StoredTemperature&,
                                 const SettleObserver&);

}  // namespace lidwright
