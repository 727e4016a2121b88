#include "physics/laws.hpp"

#include <cmath>

namespace lidwright::laws {

double wall_coefficient(double layer_coefficient) {
  return layer_coefficient * std::pow(2.0, 4.0 / 3);
}

double nusselt_local_stability(double rayleigh, double critical) {
  return 1.04 * std::cbrt(rayleigh / critical);
}

double nusselt_steady_cells(double rayleigh) { return 0.294 * std::cbrt(rayleigh); }

double nusselt_moore(double rayleigh) {
  return rayleigh > critical_free ? 0.206 * std::pow(rayleigh - critical_free, 0.318) : 0;
}

double internal_heating_coefficient() { return std::pow(1.70, -4.0 / 3); }

double drip_flux(double coefficient, double interior_rayleigh, double rheological_scale) {
  return coefficient * std::cbrt(interior_rayleigh) * std::pow(rheological_scale, 4.0 / 3);
}

double nusselt_moresi_solomatov(double hot_rayleigh, double theta) {
  return 1.89 * std::pow(theta, -1.02) * std::pow(hot_rayleigh, 0.2);
}

double nusselt_deschamps_lin(double interior_rayleigh, double theta) {
  return 1.46 * std::pow(interior_rayleigh, 0.27) * std::pow(theta, -1.21);
}

double interior_deschamps_lin(double theta) { return 1 - 1.23 / theta; }

Lid lid_by_contrast(double contrast) {
  if (contrast <= mobile_below) return Lid::Mobile;
  return contrast <= stagnant_above ? Lid::Sluggish : Lid::Stagnant;
}

}  // namespace lidwright::laws
