#include "io/case_units.hpp"

namespace lidwright::case_text {

Units units_of(Quantity quantity) {
  switch (quantity) {
    case Quantity::Number:
      return {"", ""};
    case Quantity::Length:
      return {"d", "km"};
    case Quantity::Temperature:
      return {"DeltaT above surface", "K"};
    case Quantity::TemperatureDifference:
      return {"DeltaT", "K"};
    case Quantity::HeatFlux:
      return {"k DeltaT/d", "W/m^2"};
    case Quantity::HeatSource:
      return {"k DeltaT/d^2", "W/m^3"};
    case Quantity::Time:
      return {"d^2/kappa", "Myr"};
    case Quantity::TemperatureRate:
      return {"DeltaT kappa/d^2", "K/Myr"};
    case Quantity::Viscosity:
      return {"eta_ref", "Pa s"};
    case Quantity::Stress:
      return {"eta_ref kappa/d^2", "MPa"};
    case Quantity::ActivationEnergy:
      return {"R DeltaT", "J/mol"};
    case Quantity::ActivationVolume:
      return {"R DeltaT/(rho g d)", "m^3/mol"};
    case Quantity::Density:
      return {"1", "kg/m^3"};
    case Quantity::Expansivity:
      return {"1", "1/K"};
    case Quantity::Gravity:
      return {"1", "m/s^2"};
    case Quantity::Conductivity:
      return {"1", "W/m/K"};
    case Quantity::HeatCapacity:
      return {"1", "J/kg/K"};
    case Quantity::Kilometres:
      return {"km", "km"};
  }
  return {};
}

double Conversion::written(double stored) const {
  const double guess = (stored * scale + zero) / unit;
  return exact_inverse([this](double x) { return this->stored(x); }, stored, guess);
}

Conversion conversion(Quantity quantity, const std::optional<Body>& body) {
  if (quantity == Quantity::Kilometres) return {.unit = 1000};
  if (!body) return {};
  const Scales s = scales_of(*body);
  switch (quantity) {
    case Quantity::Number:
    case Quantity::Kilometres:
      return {};
    case Quantity::Length:
      return {.unit = 1000, .scale = s.length};
    case Quantity::Temperature:
      return {.zero = body->surface_temperature, .scale = s.temperature};
    case Quantity::TemperatureDifference:
      return {.scale = s.temperature};
    case Quantity::HeatFlux:
      return {.scale = s.heat_flux};
    case Quantity::HeatSource:
      return {.scale = s.heat_source};
    case Quantity::Time:
      return {.unit = million_years, .scale = s.time};
    case Quantity::TemperatureRate:
      return {.unit = 1 / million_years, .scale = s.temperature / s.time};
    case Quantity::Viscosity:
      return {.scale = s.viscosity};
    case Quantity::Stress:
      return {.unit = 1e6, .scale = s.stress};
    case Quantity::ActivationEnergy:
      return {.scale = s.activation_energy};
    case Quantity::ActivationVolume:
      return {.scale = s.activation_volume};
    case Quantity::Density:
      return {.scale = body->density};
    case Quantity::Expansivity:
      return {.scale = body->expansivity};
    case Quantity::Gravity:
      return {.scale = body->gravity};
    case Quantity::Conductivity:
      return {.scale = body->conductivity};
    case Quantity::HeatCapacity:
      return {.scale = body->heat_capacity};
  }
  return {};
}

}  // namespace lidwright::case_text
