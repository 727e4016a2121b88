#include "solver/topography.hpp"

#include <cmath>
#include <numbers>

namespace lidwright {

double topography_rms(const Decomposition& d, const std::vector<double>& normal_stress) {
  const Geometry& g = d.geometry();
  const int wall = g.radial_cells();
  const Range columns = d.owned(At::Cell);
  double sum = 0;
  for (int j = columns.begin; j < columns.end; ++j)
    sum += g.area(RadialFace{wall, j}) *
           std::pow(normal_stress[static_cast<std::size_t>(j - columns.begin)], 2);
  return std::sqrt(d.sum(sum) / g.wall_area(wall));
}

TopographySpectrum topography_spectrum(const Geometry& g,
                                       const std::vector<double>& normal_stress) {
  const double begin = g.shell().lateral_begin, extent = g.shell().lateral_end - begin;
  TopographySpectrum s;
  for (int m = 1; m <= g.lateral_cells() / 2; ++m) {
    const double k = (g.periodic() ? 2 : 1) * std::numbers::pi * m / extent;
    double even = 0, odd = 0;
    for (int j = 0; j < g.lateral_cells(); ++j) {
      const double h = -normal_stress[static_cast<std::size_t>(j)] * g.lateral_width(j);
      even += h * std::cos(k * (g.cell_lateral(j) - begin));
      if (g.periodic()) odd += h * std::sin(k * (g.cell_lateral(j) - begin));
    }
    // The shortest wave that the columns tell from the others has one phase only.
    const bool shortest = g.periodic() && 2 * m == g.lateral_cells();
    s.wave_number.push_back(k);
    s.amplitude.push_back((shortest ? 1 : 2) / extent * std::hypot(even, odd));
  }
  return s;
}

}  // namespace lidwright
