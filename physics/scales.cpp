#include "physics/scales.hpp"

namespace lidwright {

double thickness(const Body& body) { return body.radius - body.core_radius; }

double diffusivity(const Body& body) {
  return body.conductivity / (body.density * body.heat_capacity);
}

double radius_ratio(const Body& body) { return body.core_radius / body.radius; }

double rayleigh_number(const Body& body) {
  const double d = thickness(body);
  return body.density * body.expansivity * body.gravity * body.temperature_drop * d * d * d /
         (diffusivity(body) * body.reference_viscosity);
}

double lithostatic_number(const Body& body) {
  return body.density * body.gravity * thickness(body) / scales_of(body).stress;
}

double dissipation_number(const Body& body) {
  return body.expansivity * body.gravity * thickness(body) / body.heat_capacity;
}

double absolute_surface_temperature(const Body& body) {
  return body.surface_temperature / body.temperature_drop;
}

Scales scales_of(const Body& body) {
  const double d = thickness(body), kappa = diffusivity(body);
  const double gas_energy = gas_constant * body.temperature_drop;
  return {
      .length = d,
      .time = d * d / kappa,
      .velocity = kappa / d,
      .temperature = body.temperature_drop,
      .heat_flux = body.conductivity * body.temperature_drop / d,
      .heat_source = body.conductivity * body.temperature_drop / (d * d),
      .viscosity = body.reference_viscosity,
      .stress = body.reference_viscosity * kappa / (d * d),
      .activation_energy = gas_energy,
      .activation_volume = gas_energy / (body.density * body.gravity * d),
  };
}

double dimensionless_temperature(double kelvin, const Body& body) {
  return (kelvin - body.surface_temperature) / body.temperature_drop;
}

double kelvin(double dimensionless_temperature, const Body& body) {
  return body.surface_temperature + dimensionless_temperature * body.temperature_drop;
}

}  // namespace lidwright
