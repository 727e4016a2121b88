#include "io/onset_table.hpp"

#include <array>
#include <cmath>
#include <numbers>

#include "io/csv.hpp"

namespace lidwright {
namespace {

constexpr std::array<Column, 9> columns{{
    {"mode", "1", "whole waves along a periodic shell, half waves between reflecting sides"},
    {"order", "1 or 1/d",
     "annuli: waves in the whole circle; axisymmetric shell: degree l; box: wavenumber"},
    {"wavenumber", "1/d", "at mid-depth; in the axisymmetric shell sqrt(l(l + 1)) over the radius"},
    {"rayleigh", "1", "neutral Rayleigh number, extrapolated when there is an error bar"},
    {"error", "1", "half width of its error bar; 0: none was asked for"},
    {"observed_order", "1", "of convergence on the three grids; nan: none"},
    {"on_own_grid", "1", "Rayleigh number on the case's own radial cells, four times the coarsest"},
    {"on_coarsest_grid", "1",
     "on a quarter of the radial cells; the same as before: not asked for"},
    {"critical", "1", "1 for the least Rayleigh number, else 0"},
}};

}  // namespace

std::string onset_table(const OnsetCurve& curve) {
  std::string text = table_head("lidwright onset of convection, mode by mode", columns);
  for (std::size_t k = 0; k < curve.points.size(); ++k) {
    const OnsetPoint& p = curve.points[k];
    const std::array<double, 9> row{static_cast<double>(p.wave.number),
                                    p.wave.order,
                                    p.wave.wavenumber,
                                    p.rayleigh.value,
                                    p.rayleigh.half_width,
                                    p.rayleigh.order,
                                    p.on_grids.back(),
                                    p.on_grids.front(),
                                    static_cast<int>(k) == curve.least ? 1.0 : 0.0};
    text += table_row(row);
  }
  return text;
}

}  // namespace lidwright
