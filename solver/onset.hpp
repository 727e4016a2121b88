#pragma once

#include <memory>
#include <optional>
#include <vector>

#include "solver/heat.hpp"
#include "solver/lateral_mode.hpp"
#include "solver/settings.hpp"
#include "solver/snapshot.hpp"

/// Onset of convection: the Rayleigh number at which a disturbance of one lateral mode about the
/// conductive state of the discrete equations neither grows nor decays, everything but
/// Model::rayleigh held fixed. Stationary onset only.
namespace lidwright {

/// A lateral mode by its number: whole waves along a periodic shell, half waves between reflecting
/// sides; from pole to pole that is the degree l.
struct Wave {
  int number = 1;
  double order = 1;       ///< box: wavenumber, 1/d; annuli: waves in the whole circle, maybe not
                          ///< whole in a sector; axisymmetric shell: l with l(l + 1) the eigenvalue
  double wavenumber = 1;  ///< at mid-depth, 1/d; the wavelength is 2 pi over it
};
Wave wave_of(const Shell&, int number);

/// A neutral disturbance along the radius; along the shell it goes as the lateral mode.
struct NeutralShape {
  int number = 1;  ///< of the lateral mode
  double rayleigh = 0;
  std::vector<double> temperature;  ///< at cells, from the inner wall
  std::vector<double> psi;          ///< at faces, walls (0) included; times z of LateralMode
};

/// The conductive profile at all cells held.
CellField temperature_at_rest(const HeatOperator&);

/// Neutral modes on one radial grid. Box and annuli are solved in the sector of half a wave, with
/// as many uniform cells along it as across the shell; the axisymmetric shell as a whole, with
/// about square cells or more, one lateral mode at a time. Not collective.
class NeutralModes {
 public:
  /// `radial_cells` replaces that of the model's grid; the grading stays.
  NeutralModes(const Model&, int radial_cells);

  /// Of least positive Rayleigh number; none when no positive one is neutral. Throws SolveError.
  std::optional<NeutralShape> operator()(int number);

 private:
  Model model_for(int number) const;
  void assemble(const Model&);

  Model model_;
  std::shared_ptr<const Geometry> geometry_;  ///< of the mesh that is assembled
  RestBlocks blocks_;
};

/// The disturbance on the model's own mesh, shared out among the ranks: temperature, velocities and
/// stream function, largest temperature 1; viscosity is that of the conductive state. The step is
/// the mode's number, the time 0. Collective.
Snapshot onset_snapshot(const Model&, const NeutralShape&, MPI_Comm);

}  // namespace lidwright
