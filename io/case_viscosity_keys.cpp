#include "io/case_bind.hpp"

namespace lidwright::case_text {
namespace {

/// The tables of a product of factors, and when they are there.
struct Product {
  std::string table;
  ProductDraft Draft::*place;
  Condition itself, exponential, arrhenius;
};

const Product& diffusion() {
  static const Product product = {
      "viscosity",
      &Draft::diffusion,
      {"with diffusion creep, which viscosity.dislocation.alone = true leaves out",
       [](const Draft& d) { return !d.dislocation_alone(); }},
      {"with [viscosity.exponential]", [](const Draft& d) { return d.diffusion.has_exponential; }},
      {"with [viscosity.arrhenius]", [](const Draft& d) { return d.diffusion.has_arrhenius; }}};
  return product;
}

constexpr Condition dislocation_creep = {"with [viscosity.dislocation]",
                                         [](const Draft& d) { return d.has_dislocation; }};

const Product& dislocation() {
  static const Product product = {
      "viscosity.dislocation",
      &Draft::dislocation_viscosity,
      dislocation_creep,
      {"with [viscosity.dislocation.exponential]",
       [](const Draft& d) { return d.dislocation_viscosity.has_exponential; }},
      {"with [viscosity.dislocation.arrhenius]",
       [](const Draft& d) { return d.dislocation_viscosity.has_arrhenius; }}};
  return product;
}

constexpr Condition offset_free = {
    "in [viscosity.arrhenius] with [numbers] (with [body] it follows from body.surface_temperature "
    "and "
    "body.temperature_drop)",
    [](const Draft& d) { return d.diffusion.has_arrhenius && !d.si; }};
constexpr Condition yielding = {"with [viscosity.yielding]",
                                [](const Draft& d) { return d.has_yielding; }};
constexpr Condition lithostatic_free = {
    "in [viscosity.yielding] with [numbers] (with [body] it follows from the body)",
    [](const Draft& d) { return d.has_yielding && !d.si; }};

std::vector<Key> factor_keys(const Product& p) {
  using L = ViscosityLayer;
  const auto layer = [&p](auto member) {
    return item(member, p.place, &ProductDraft::layered, &LayeredViscosity::layers);
  };
  return {
      {.path = p.table + ".constant",
       .access = said(p.place, &ProductDraft::constant),
       .unit = "eta_ref",
       .range = positive,
       .only = p.itself,
       .help = "constant factor"},
      {.path = p.table + ".layers",
       .access = list(p.place, &ProductDraft::layered, &LayeredViscosity::layers),
       .only = p.itself,
       .help = "factors by depth, shallowest first; each holds down to the next"},
      {.path = p.table + ".layers[].below",
       .access = layer(&L::below),
       .need = Need::Required,
       .quantity = Quantity::Length,
       .range = depths,
       .help = "depth of the layer's top below the outer wall"},
      {.path = p.table + ".layers[].factor",
       .access = layer(&L::factor),
       .need = Need::Required,
       .range = positive,
       .help = "factor of the viscosity in the layer"},
  };
}

std::vector<Key> exponential_keys(const Product& p) {
  using E = ExponentialViscosity;
  const auto at = [&p](auto member) { return said(p.place, &ProductDraft::exponential, member); };
  return {
      {.path = p.table + ".exponential.thermal_contrast",
       .access = at(&E::thermal_contrast),
       .range = positive,
       .only = p.exponential,
       .help = "viscosity at the surface temperature over that one drop hotter"},
      {.path = p.table + ".exponential.depth_contrast",
       .access = at(&E::depth_contrast),
       .range = positive,
       .only = p.exponential,
       .help = "viscosity at the inner wall over that at the outer, by depth alone"},
      {.path = p.table + ".exponential.unity_at",
       .access = at(&E::unity_at),
       .quantity = Quantity::Temperature,
       .only = p.exponential,
       .help = "temperature at which the thermal factor is 1"},
  };
}

std::vector<Key> arrhenius_keys(const Product& p) {
  using A = ArrheniusViscosity;
  const auto at = [&p](auto member) { return said(p.place, &ProductDraft::arrhenius, member); };
  return {
      {.path = p.table + ".arrhenius.activation_energy",
       .access = at(&A::energy),
       .need = Need::Required,
       .quantity = Quantity::ActivationEnergy,
       .range = not_negative,
       .only = p.arrhenius,
       .help = "energy E in exp[(E + p V)/(R T)]"},
      {.path = p.table + ".arrhenius.activation_volume",
       .access = at(&A::volume),
       .quantity = Quantity::ActivationVolume,
       .range = not_negative,
       .only = p.arrhenius,
       .help = "volume V in exp[(E + p V)/(R T)], p = rho g depth"},
      {.path = p.table + ".arrhenius.unity_at",
       .access = at(&A::unity_at),
       .quantity = Quantity::Temperature,
       .only = p.arrhenius,
       .help = "temperature at which the factor is 1; above absolute zero"},
      {.path = p.table + ".arrhenius.unity_at_depth",
       .access = at(&A::unity_at_depth),
       .quantity = Quantity::Length,
       .range = {.low = 0, .high = 1},
       .only = p.arrhenius,
       .help = "depth at which the factor is 1"},
  };
}

std::vector<Key> bound_keys() {
  return {
      {.path = "viscosity.lowest",
       .access = of_model(&Model::viscosity, &ViscosityLaw::lowest),
       .quantity = Quantity::Viscosity,
       .range = not_negative,
       .help = "viscosity is cut off here from below"},
      {.path = "viscosity.highest",
       .access = said(&Draft::highest_viscosity),
       .default_text = "no cut-off",
       .quantity = Quantity::Viscosity,
       .range = positive,
       .help = "viscosity is cut off here from above"},
  };
}

/// One for all Arrhenius factors; those of dislocation creep alone take the key of [numbers].
std::vector<Key> surface_keys() {
  return {{.path = "viscosity.arrhenius.surface_temperature",
           .access = said(&Draft::arrhenius_surface),
           .default_text = "numbers.surface_temperature; required without",
           .unit = "DeltaT",
           .range = positive,
           .only = offset_free,
           .help = "absolute temperature where T = 0; equal to numbers.surface_temperature if both "
                   "are given; serves [viscosity.dislocation.arrhenius] too"}};
}

std::vector<Key> dislocation_keys() {
  using D = DislocationCreep;
  const auto at = [](auto member) { return said(&Draft::dislocation, member); };
  return {
      {.path = "viscosity.dislocation.exponent",
       .access = at(&D::exponent),
       .range = {.low = 1, .high = 50},
       .only = dislocation_creep,
       .help = "n: strain goes as the n-th power of the stress; the other factors here give the "
               "viscosity A of rate = stress/(2 A) (stress/reference_stress)^(n - 1)"},
      {.path = "viscosity.dislocation.reference_stress",
       .access = at(&D::reference_stress),
       .need = Need::Required,
       .quantity = Quantity::Stress,
       .range = positive,
       .only = dislocation_creep,
       .help = "stress, second invariant of its deviator, at which the factors here give the "
               "viscosity of dislocation creep"},
      {.path = "viscosity.dislocation.alone",
       .access = at(&D::alone),
       .only = dislocation_creep,
       .help = "no diffusion creep beside it; else the rates of both add"},
  };
}

std::vector<Key> yielding_keys() {
  using Y = Yielding;
  const auto at = [](auto member) { return said(&Draft::yielding, member); };
  return {
      {.path = "viscosity.yielding.law",
       .access = at(&Y::law),
       .words = {"minimum", "harmonic-mean"},
       .only = yielding,
       .help = "how creep and plastic flow join: the smaller viscosity, or the harmonic mean of "
               "the two, which is twice that of creep where nothing yields"},
      {.path = "viscosity.yielding.cohesion",
       .access = at(&Y::cohesion),
       .quantity = Quantity::Stress,
       .range = not_negative,
       .only = yielding,
       .help = "yield stress at the surface; yield stresses are second invariants of the deviator"},
      {.path = "viscosity.yielding.friction",
       .access = at(&Y::friction),
       .range = not_negative,
       .only = yielding,
       .help = "coefficient: rise of the yield stress over that of the lithostatic pressure"},
      {.path = "viscosity.yielding.lithostatic",
       .access = said(&Draft::lithostatic),
       .default_text = "required with friction",
       .unit = "eta_ref kappa/d^2",
       .range = not_negative,
       .only = lithostatic_free,
       .help = "rho g d^3/(kappa eta_ref): lithostatic pressure at depth 1, were density "
               "and gravity uniform"},
      {.path = "viscosity.yielding.ceiling",
       .access = said(&Draft::yield_ceiling),
       .default_text = "none",
       .quantity = Quantity::Stress,
       .range = positive,
       .only = yielding,
       .help = "the yield stress rises no further"},
      {.path = "viscosity.yielding.floor",
       .access = at(&Y::floor),
       .quantity = Quantity::Viscosity,
       .range = not_negative,
       .only = yielding,
       .help = "viscosity of fast plastic flow, added to yield stress/(2 rate of strain); this or "
               "viscosity.lowest must be greater than 0"},
  };
}

}  // namespace

std::vector<Key> viscosity_keys() {
  std::vector<Key> keys;
  append(keys, factor_keys(diffusion()));
  append(keys, bound_keys());
  append(keys, exponential_keys(diffusion()));
  append(keys, arrhenius_keys(diffusion()));
  append(keys, surface_keys());
  append(keys, dislocation_keys());
  append(keys, factor_keys(dislocation()));
  append(keys, exponential_keys(dislocation()));
  append(keys, arrhenius_keys(dislocation()));
  append(keys, yielding_keys());
  return keys;
}

}  // namespace lidwright::case_text
