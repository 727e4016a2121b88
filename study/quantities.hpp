#pragma once

#include <optional>
#include <string>
#include <vector>

#include "solver/diagnostics.hpp"
#include "solver/settings.hpp"
#include "solver/snapshot.hpp"

/// What published benchmarks quote of a state, by name. Units and signs of
/// solver/diagnostics.hpp. Each is evaluated so that its error is a smooth second order of the
/// cells' size, as the fields' own is, and can be extrapolated.
namespace lidwright {

/// A state on one grid, on one rank that holds all of it.
struct SteadyView {
  const Model& model;
  const HistoryRow& row;
  const Snapshot& snapshot;
};

/// Heat flux of a wall at a reflecting side, k DeltaT/d.
double flux_top_left(const SteadyView&);
double flux_top_right(const SteadyView&);
double flux_bottom_left(const SteadyView&);
double flux_bottom_right(const SteadyView&);
/// Normal stress of the outer wall (its mean over the wall is 0) at a reflecting side.
double stress_top_left(const SteadyView&);
double stress_top_right(const SteadyView&);

/// On the line half-way between reflecting sides: the lowest temperature in the inner half of the
/// shell and the highest in the outer one, away from walls, and their heights above the inner wall.
double midline_minimum(const SteadyView&);
double midline_minimum_height(const SteadyView&);
double midline_maximum(const SteadyView&);
double midline_maximum_height(const SteadyView&);

/// Largest speed along the outer wall, kappa/d.
double surface_speed_max(const SteadyView&);
/// Heat flow through the outer wall over its area, k DeltaT/d.
double surface_flux_mean(const SteadyView&);
/// Dissipation over volume, eta kappa^2/d^4.
double dissipation_mean(const SteadyView&);
/// <rho alpha g T u_r>: work of the buoyancy over volume and Ra, kappa DeltaT/d. In the steady
/// Boussinesq box Nu - 1.
double work_over_rayleigh(const SteadyView&);
/// <tau : e>/Ra: dissipation over volume and Ra.
double dissipation_over_rayleigh(const SteadyView&);
/// Least and largest viscosity, walls and sides included: its logarithm is continued from the cells
/// to the walls, and to reflecting sides, about which it is even.
double viscosity_min(const SteadyView&);
double viscosity_max(const SteadyView&);
/// (Di/Ra) <tau : e>: heat produced by dissipation, volume mean, k DeltaT/d^2 (phi of King et al.
/// 2010).
double dissipation_heating(const SteadyView&);
/// Di <alpha rho g u_r (T + T_surface)>: heat lost to adiabatic expansion, volume mean (W of King
/// et al. 2010).
double adiabatic_cooling(const SteadyView&);

/// By the name used in tables: one of steady_quantity_names(). Empty: no such quantity.
std::optional<double> steady_quantity(const std::string& name, const SteadyView&);
const std::vector<std::string>& steady_quantity_names();

}  // namespace lidwright
