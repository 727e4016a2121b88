#pragma once

#include <vector>

#include "solver/power.hpp"

/// Dynamic topography h = -sigma_rr/(delta_rho g) of the outer wall, in the units of the stress,
/// eta kappa/d^2: > 0 where the flow pushes the wall outwards.
namespace lidwright {

/// Root mean square over the outer wall; `normal_stress` as in Stresses. Collective.
double topography_rms(const Decomposition&, const std::vector<double>& normal_stress);

/// Amplitude of each lateral wave number.
struct TopographySpectrum {
  std::vector<double> wave_number;  ///< per unit of the lateral coordinate: 2 pi m/L on a full
                                    ///< circle, pi m/L between reflecting sides, m = 1, 2, ...
  std::vector<double> amplitude;    ///< >= 0, eta kappa/d^2
};

/// Up to half as many waves (between sides: half waves) as columns, from the normal stress of all
/// columns; L the extent in the lateral coordinate. The waves are cos and sin of the lateral
/// coordinate, between reflecting sides cos alone, which in the axisymmetric shell are no
/// eigenfunctions of the sphere. Where columns are equally wide, half the sum of the amplitudes'
/// squares is the mean square over the lateral coordinate, less what is beyond.
TopographySpectrum topography_spectrum(const Geometry&, const std::vector<double>& normal_stress);

}  // namespace lidwright
