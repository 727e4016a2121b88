#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "mesh/geometry.hpp"
#include "physics/heat_sources.hpp"
#include "physics/reference.hpp"
#include "physics/rheology.hpp"
#include "physics/walls.hpp"

/// What the solver is told, dimensionless: one plain struct a module; default, unit and range
/// beside each member. Units: length d (shell thickness), time d^2/kappa, temperature DeltaT above
/// the surface temperature.
namespace lidwright {

/// The physical problem.
struct Model {
  Shell shell;
  Grid grid;
  Walls walls;
  double rayleigh =
      1e4;  ///< rho alpha g DeltaT d^3/(kappa eta), eta where the viscosity law gives 1; >= 0
  /// Of diffusion creep; its cut-offs hold for the effective viscosity of all that follows.
  ViscosityLaw viscosity;
  std::optional<DislocationCreep> dislocation;
  std::optional<Yielding> yielding;
  HeatSources heat;
  ReferenceProfiles reference;

  /// Does the viscosity depend on the rate of strain?
  bool nonlinear() const { return dislocation || yielding; }
  /// Of the creep that is alone, or of diffusion creep: what the temperature scale of the rheology
  /// and the Frank-Kamenetskii parameter are of.
  const ViscosityLaw& creep() const {
    return dislocation && dislocation->alone ? dislocation->viscosity : viscosity;
  }
};

/// T = base + modes + noise, clipped nowhere.
struct TemperatureMode {
  double lateral =
      1;  ///< number of half waves between reflecting sides, of whole waves when periodic; >= 0
  double radial = 1;  ///< number of half waves between the walls, >= 1
  double amplitude = 0.01;
};
enum class InitialBase { Conductive, BoundaryLayers };
struct InitialSettings {
  InitialBase base = InitialBase::Conductive;
  double interior = 0.5;         ///< boundary layers: temperature between them
  double layer_thickness = 0.1;  ///< boundary layers: scale of the error function, in (0, 0.5]
  std::vector<TemperatureMode> modes;  ///< amplitude sin(radial pi (r - r_i)) cos(lateral ...)
  double noise = 0;        ///< amplitude of white noise in each cell, uniform in [-noise, noise]
  std::uint64_t seed = 1;  ///< same field on any number of ranks
  std::string
      from;  ///< a checkpoint or run folder whose temperature replaces the base; empty: none
};

struct FlowSettings {
  double tolerance = 1e-6;    ///< relative velocity error in the dissipation norm, in (0, 0.1]
  int most_iterations = 200;  ///< of CG with a fresh factor, >= 1
  int memory = 4;             ///< former flows from which a solve starts, 1 to 8
  double refactor_cost = 20;  ///< cost of a factorisation in applications of the factor, >= 0
  /// Of a viscosity that depends on the rate of strain: Newton steps before the flow is given up,
  /// >= 1.
  int most_newton_steps = 60;
};

enum class HeatFlux { Central, Limited };
struct HeatSettings {
  HeatFlux flux = HeatFlux::Limited;  ///< advective flux
  double courant = 0.5;        ///< largest share of a cell's heat carried out in a step, in (0, 1]
  double accuracy = 1e-4;      ///< local error of a step, rms temperature, > 0
  double first_step = 1e-6;    ///< > 0
  double largest_step = 0.01;  ///< > 0
  double growth = 1.3;         ///< largest ratio of a step to the one before, in (1, 2]
};

/// How the equations of a Newton step are solved.
enum class LinearSolver { Automatic, Direct, Iterative };
struct SettleSettings {
  double tolerance = 1e-10;  ///< rms of dT/dt over (heat flow / heat capacity) of the shell, > 0
  int most_steps = 60;       ///< Newton steps on one grid, >= 1
  double most_time = 20;     ///< of the march to a first guess on the coarsest grid, > 0
  HeatFlux flux = HeatFlux::Central;
  int coarsest = 16;  ///< radial cells of the coarsest grid to start from, >= 8
  LinearSolver linear = LinearSolver::Automatic;
};

/// When a march has found out what it was for.
enum class MarchUntil { Time, Known };
struct MarchSettings {
  double end_time = 0.1;  ///< > 0; the latest end, whatever `until` says
  MarchUntil until = MarchUntil::Time;
  std::string known_quantities =
      "nusselt_outer, velocity_rms, temperature_mean";  ///< columns of the history
  double known_error =
      0.02;               ///< relative half width of the 95 % interval of their means, in (0, 1)
  long most_steps = 0;    ///< 0: no limit
  double wall_clock = 0;  ///< s; 0: no limit
  double steady = 0;      ///< rms of dT/dt below which the run is steady; 0: never
};

}  // namespace lidwright
