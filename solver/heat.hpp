#pragma once

#include <memory>

#include "mesh/field.hpp"
#include "physics/heat_sources.hpp"
#include "physics/walls.hpp"
#include "solver/mantle.hpp"
#include "solver/settings.hpp"

/// Heat in a given flow, finite volumes:
///     V rho cp dT/dt = - cp sum of outward (flow * T_face) - sum of outward (-area k dT/dn) + V H
///                      - adiabatic work + viscous heating,
/// with the very flows through faces that conserve mass. Adiabatic work is that of the faces'
/// buoyancy, Di alpha g distance * flow * (T_face + T_surf), shared by the two cells of a face in
/// proportion to their halves of its distance: its sum is Di/Ra times the work of buoyancy. Viscous
/// heating is Di/Ra times the dissipation of the power functional's own strain rates.
namespace lidwright {

/// Heat flow through each wall, > 0 along +r.
struct WallHeat {
  double inner = 0, outer = 0;
};
class HeatOperator {
 public:
  HeatOperator(std::shared_ptr<const Decomposition>, const Walls&, const HeatSources&, HeatFlux,
               const ReferenceProfiles& = {});

  /// Gain by advection at owned cells; T and psi with ghosts. Adds to `rate`.
  void add_advection(const CellField& temperature, const CornerField& psi, CellField& rate) const;
  /// Gain by conduction, walls included; returns the heat through the walls on this rank. Adds to
  /// `rate`.
  WallHeat add_conduction(const CellField& temperature, CellField& rate) const;
  /// Gain by sources. Adds to `rate`.
  void add_sources(CellField& rate) const;
  /// Gain by adiabatic work (negative where matter rises). Adds to `rate`.
  void add_adiabatic_work(const CellField& temperature, const CornerField& psi,
                          CellField& rate) const;

  /// Conducted heat through a wall's face of column j.
  double wall_flux(const CellField&, RadialFace wall) const;
  /// Temperature of the wall at column j (follows from the flux where the flux is given).
  double wall_temperature(const CellField&, RadialFace wall) const;
  /// Conducted and advected heat through any radial face, > 0 along +r.
  double conducted(const CellField&, RadialFace) const;
  double advected(const CellField&, const CornerField& psi, RadialFace) const;

  /// Integral of H over the shell.
  double total_source() const { return total_source_; }
  double source(int row) const { return source_[static_cast<std::size_t>(row)]; }
  /// Heat that warms a cell by one: V rho cp.
  double capacity(Cell c) const {
    return geometry().volume(c) * capacity_per_volume_[static_cast<std::size_t>(c.i)];
  }
  double total_capacity() const { return total_capacity_; }
  /// Conducted heat per temperature drop across a face; half a cell's at walls.
  double conductance(RadialFace) const;
  double conductance(LateralFace) const;  ///< 0 on reflecting sides
  /// Temperature at a radial face by which buoyancy acts: the mean of its cells; at walls that of
  /// the wall and the cell.
  double face_temperature(const CellField&, RadialFace) const;
  /// Adiabatic work on a face, per mass flow and unit absolute temperature, that its inner and its
  /// outer cell do.
  double adiabatic_inside(int face) const {
    return adiabatic_inside_[static_cast<std::size_t>(face)];
  }
  double adiabatic_outside(int face) const {
    return adiabatic_outside_[static_cast<std::size_t>(face)];
  }
  const MantleRows& mantle() const { return mantle_; }
  const ReferenceProfiles& reference() const { return reference_; }
  /// Largest share of a cell's content that flows out of it in unit time. Collective.
  double outflow_rate(const CornerField& psi) const;

  const Geometry& geometry() const { return decomposition_->geometry(); }
  const Decomposition& decomposition() const { return *decomposition_; }
  std::shared_ptr<const Decomposition> decomposition_pointer() const { return decomposition_; }
  const Walls& walls() const { return walls_; }

 private:
  void set_adiabatic_work();
  double radial_neighbour(const CellField&, int i, int j) const;
  template <class Carried>
  void carry_radially(const CellField&, const CornerField& psi, int j, Carried,
                      std::vector<double>& heat) const;
  template <class Carried>
  void carry_laterally(const CellField&, const CornerField& psi, int j, Carried,
                       std::vector<double>& heat) const;
  void conduct_laterally(const CellField&, int j, std::vector<double>& heat) const;

  std::shared_ptr<const Decomposition> decomposition_;
  Walls walls_;
  HeatFlux flux_;
  ReferenceProfiles reference_;
  MantleRows mantle_;
  std::vector<double> capacity_per_volume_;                   ///< rho cp of each row
  std::vector<double> adiabatic_inside_, adiabatic_outside_;  ///< of each radial face; walls 0
  std::vector<double> source_;                                ///< of each row of cells
  std::vector<double> radial_conductance_;   ///< of the face below each row, without its lateral
                                             ///< factor; 0 at the wall
  std::vector<double> lateral_conductance_;  ///< of each row, without its lateral factor
  double total_source_ = 0, total_capacity_ = 0;
};

}  // namespace lidwright
