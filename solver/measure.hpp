#pragma once

#include "physics/rheology.hpp"
#include "solver/heat.hpp"
#include "solver/power.hpp"
#include "solver/snapshot.hpp"

/// What is measured on a temperature and its flow, however they were found.
namespace lidwright {

/// A temperature, its flow and the operators both belong to; fields with ghosts.
struct StateView {
  const Power& power;
  const HeatOperator& heat;
  const CellField& temperature;
  const CornerField& psi;
  double rayleigh;
  const ViscosityLaw& law;
};

/// Buoyancy of a unit mass, Ra alpha g T, at radial faces, ghosts included; next to a wall, T is
/// the mean of the wall and the cell.
RadialFaceField buoyancy(const HeatOperator&, const CellField& temperature, double rayleigh);
/// Viscosity at cells, ghosts included.
CellField viscosity_of(const ViscosityLaw&, const CellField& temperature);
/// Viscous heating of each owned cell, Di/Ra times its dissipation; empty when Di or Ra is 0.
CellField viscous_heating(const StateView&);

/// All of a row that follows from the state; the rest stays as it is by default. Collective.
HistoryRow measure(const StateView&);
/// Collective.
RadialProfiles profiles(const StateView&);
/// Step and time are left 0. Collective.
Snapshot snapshot(const StateView&, bool with_stress);

}  // namespace lidwright
