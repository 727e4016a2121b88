#pragma once

#include <memory>
#include <vector>

#include "mesh/decomposition.hpp"
#include "solver/settings.hpp"

/// A model's reference state on the rows of its mesh.
namespace lidwright {

/// The mesh of a model, with its reference density. Throws nothing of its own.
std::shared_ptr<const Geometry> make_geometry(const Model&);
std::shared_ptr<const Decomposition> decompose(const Model&, MPI_Comm);

/// Reference profiles at rows of cells and radial faces (the density is in Geometry), from the
/// inner wall outwards; all in units of the values that the dimensionless numbers are made with.
struct MantleRows {
  MantleRows(const Geometry&, const ReferenceProfiles&);
  double dissipation_number;     ///< Di
  double surface_temperature;    ///< absolute, of T = 0
  std::vector<double> buoyancy;  ///< alpha g at radial faces: of a unit mass, per Ra T
  std::vector<double> face_conductivity, cell_conductivity;
  std::vector<double> heat_capacity;  ///< cp of a unit mass, at cells
  bool uniform_heat_capacity;
  /// (T + T_surf) at a row over that at the surface on one adiabat, exp of the integral of Di alpha
  /// g / cp over depth.
  std::vector<double> adiabatic_rise;
  /// Heat flow from wall to wall at unit temperature drop without flow and sources: Nu = 1. Exact
  /// for uniform conductivity, else to the quadrature's 1e-10.
  double conductive_heat_flow;
};

/// Lithostatic pressure at rows of cells, the integral of rho g over depth in units of the values
/// that the dimensionless numbers are made with.
std::vector<double> lithostatic_pressure(const Geometry&, const ReferenceProfiles&);

}  // namespace lidwright
