#pragma once

#include <array>
#include <vector>

#include "mesh/operators.hpp"
#include "physics/walls.hpp"
#include "solver/viscosity_field.hpp"

/// The discrete power functional of a linear viscous shell,
///     J(psi) = sum_cells V eta (e_rr^2 + e_tt^2 + e_pp^2) + sum_corners V eta_k 2 e_rt^2 -
///     sum_faces V rho b u,
/// with deviatoric strain rates e and the buoyancy b of a unit mass,
/// whose minimum is the flow: K psi = f with K = G^T W G, symmetric positive definite. K is applied
/// in factored form (forming it first loses digits like h^-4).
///
/// A corner's viscosity is the harmonic mean over the quarter cells that meet there, weighted by
/// volume: shear stress is continuous across a jump of viscosity while shear rate is not, so the
/// corner's power is the least that any split of the shear among the quarters can have
/// (docs/decisions/corner-viscosity.md).
namespace lidwright {

/// The radial parts of the rows of G (mesh/operators.hpp), tabulated so that a product with K runs
/// down columns.
struct RadialTable {
  explicit RadialTable(const Geometry&);
  // Cells.
  std::vector<double> per_width;    ///< 1 / width
  std::vector<double> per_stretch;  ///< 1 / stretch
  std::vector<double> half_curvature;
  std::vector<double> per_side;  ///< velocity of a unit mass flow through the side, radial part
  std::vector<double> inner_dilatation, outer_dilatation;
  // Faces; the last two 0 at walls.
  std::vector<double> per_area;       ///< velocity of a unit mass flow, radial part
  std::vector<double> lateral_shear;  ///< weight of du across a corner, times the lateral distance
  std::vector<double> outer_shear;    ///< weight of v above a corner
  std::vector<double> inner_shear;    ///< weight of v below a corner, > 0 and to be subtracted
};

class Power {
 public:
  Power(std::shared_ptr<const Decomposition>, const Walls&);

  /// Viscosity at cells, ghosts up to date; > 0.
  void set_viscosity(const CellField& eta) { set_viscosity(ViscosityField{eta, {}, {}}); }
  void set_viscosity(ViscosityField);
  const CellField& viscosity() const { return eta_.cells; }
  const ViscosityField& viscosity_field() const { return eta_; }
  Slip inner_slip() const { return inner_slip_; }
  Slip outer_slip() const { return outer_slip_; }

  /// Net flow round a full circle is an unknown when a wall grips: psi is then one number on the
  /// outer wall.
  bool through_flow() const { return through_flow_; }
  /// Is psi 0 by the boundary conditions (walls and reflecting sides)? The outer wall's common
  /// value is not.
  bool fixed(Corner) const;
  bool common(Corner k) const { return through_flow_ && k.i == geometry().radial_cells(); }

  /// force = G^T W G psi at owned corners; psi with ghosts; no boundary condition is applied.
  void apply(const CornerField& psi, CornerField& force) const;
  /// 0 at fixed corners, and the sum over the outer wall in the place (radial_cells, 0) for the
  /// common value.
  void to_unknowns(CornerField& force, Vec) const;
  /// The unknowns of a flow; the other way round than `from_unknowns`.
  void flow_to_unknowns(CornerField psi, Vec) const;
  /// psi with ghosts, walls set.
  void from_unknowns(Vec, CornerField& psi) const;

  /// psi-force of the buoyancy b of a unit mass at radial faces: f(corner) = d (b left - b right),
  /// d the radial distance.
  void add_buoyancy(const RadialFaceField& b, CornerField& force) const;

  /// Normal stress weights 2 V eta of a cell and shear weight 4 V eta_k of a corner: dissipation is
  /// the sum of weight * (strain rate)^2 (for shear the factor counts e_rt and e_tr).
  double cell_weight(Cell c) const { return cell_weight_[c]; }
  double corner_weight(Corner k) const { return corner_weight_[k]; }
  bool has_shear(Corner k) const;
  /// The cells around a corner with their shares of what it dissipates; cells beyond walls have
  /// share 0 and the corner's own neighbour inside the mesh as place.
  struct Share {
    Cell cell;
    double share;
  };
  std::array<Share, 4> shares(Corner k) const;
  ShearRow shear_row(Corner k) const;
  /// Corners whose shear the held columns determine.
  Range shear_columns() const;

  const Geometry& geometry() const { return decomposition_->geometry(); }
  const Decomposition& decomposition() const { return *decomposition_; }
  std::shared_ptr<const Decomposition> decomposition_pointer() const { return decomposition_; }

 private:
  void set_corner_weights();
  /// The quarters that meet in a corner off the sides: cell, its viscosity there, volume, and shear
  /// rate over the corner's.
  struct Quarter {
    Cell cell;
    double viscosity, volume, share;
  };
  struct Quarters {
    std::array<Quarter, 4> all;
    std::size_t count = 0;
    const Quarter* begin() const { return all.data(); }
    const Quarter* end() const { return all.data() + count; }
  };
  Quarters quarters(Corner) const;
  void apply_normal(const CornerField& psi, CornerField& force) const;
  void apply_shear_inside(const CornerField& psi, CornerField& force) const;
  void apply_shear_at_walls(const CornerField& psi, CornerField& force) const;

  std::shared_ptr<const Decomposition> decomposition_;
  Slip inner_slip_, outer_slip_;
  bool through_flow_;
  ViscosityField eta_;
  CellField cell_weight_;
  CornerField corner_weight_;
  RadialTable table_;
};

/// Integral of tau : e over the shell. Collective.
double dissipation(const Power&, const CornerField& psi);
/// Its parts: integral of tau : e over each owned cell. What a corner dissipates goes to its
/// quarter cells in inverse proportion to their viscosities, as they bear one stress.
CellField dissipation_of_cells(const Power&, const CornerField& psi);
/// Second invariant sqrt(e : e / 2), shear averaged over the cell's corners: of an owned cell, and
/// of all of them.
double strain_rate(const Power&, const CornerField& psi, Cell);
CellField strain_rate(const Power&, const CornerField& psi);

}  // namespace lidwright
