#include "io/case_bind.hpp"

namespace lidwright::case_text {
namespace {

constexpr Condition anelastic = {R"(with reference.approximation = "anelastic-liquid")",
                                 [](const Draft& d) { return d.anelastic(); }};
constexpr Condition curved = {R"(with a curved shell.geometry, not in the "box")",
                              [](const Draft& d) { return !d.box(); }};

Key rise(const char* name, RadialProfile ReferenceProfiles::*profile, std::string_view help) {
  return {.path = std::string("reference.") + name,
          .access = of_model(&Model::reference, profile, &RadialProfile::rise),
          .range = ratio,
          .help = help};
}

Key at_level(const char* name, std::optional<double> ReferenceLevel::*member, Quantity quantity,
             std::string_view help) {
  return {.path = std::string("reference.levels[].") + name,
          .access = reference_level(member),
          .quantity = quantity,
          .range = positive,
          .help = help};
}

std::vector<Key> level_keys() {
  using L = ReferenceLevel;
  return {
      {.path = "reference.levels[].depth",
       .access = reference_level(&L::depth),
       .need = Need::Required,
       .quantity = Quantity::Length,
       .range = not_negative,
       .help = "depth below the outer wall"},
      at_level("density", &L::density, Quantity::Density,
               R"(density there, only with reference.approximation = "anelastic-liquid")"),
      at_level("expansivity", &L::expansivity, Quantity::Expansivity, "expansivity there"),
      at_level("gravity", &L::gravity, Quantity::Gravity, "gravity there"),
      at_level("conductivity", &L::conductivity, Quantity::Conductivity, "conductivity there"),
      at_level("heat_capacity", &L::heat_capacity, Quantity::HeatCapacity, "heat capacity there"),
  };
}

}  // namespace

std::vector<Key> reference_keys() {
  using R = ReferenceDraft;
  using P = ReferenceProfiles;
  std::vector<Key> keys = {
      {.path = "reference.approximation",
       .access = said(&Draft::reference, &R::approximation),
       .words = {"boussinesq", "extended-boussinesq", "anelastic-liquid"},
       .help = "boussinesq: no compression; extended: heat of compression and of friction; "
               "anelastic-liquid: a density that rises with depth besides"},
      {.path = "reference.gruneisen",
       .access = said(&Draft::reference, &R::gruneisen),
       .range = positive,
       .only = anelastic,
       .help = "Gamma of an adiabatic density exp(Di depth/Gamma). One of gruneisen, density_rise "
               "and a density in the table or the levels must be given"},
      {.path = "reference.density_rise",
       .access = said(&Draft::reference, &R::density_rise),
       .range = {.low = 1, .high = 1e6, .low_open = true},
       .only = anelastic,
       .help = "density at the inner wall over that at the outer, exponential between"},
      rise("expansivity_rise", &P::expansivity,
           "thermal expansivity at the inner wall over that at the outer, exponential between"),
      rise("gravity_rise", &P::gravity,
           "gravity at the inner wall over that at the outer, exponential between"),
      rise("conductivity_rise", &P::conductivity,
           "thermal conductivity at the inner wall over that at the outer, exponential between"),
      rise("heat_capacity_rise", &P::heat_capacity,
           "heat capacity at the inner wall over that at the outer, exponential between"),
      {.path = "reference.gravity_power",
       .access = of_model(&Model::reference, &P::gravity, &RadialProfile::radius_power),
       .range = {.low = -10, .high = 10},
       .only = curved,
       .help = "gravity goes with this power of the radius: 1 as in a uniform sphere, -2 as around "
               "a heavy core"},
      {.path = "reference.table",
       .access = said(&Draft::reference, &R::table),
       .help = "CSV file of properties by depth; a relative path starts at the case file; empty: "
               "none. Its first line names columns and units, as in depth [km],gravity [m/s^2]; "
               "the columns are the keys of levels"},
      {.path = "reference.levels",
       .access = list(&Draft::reference, &R::levels),
       .help = "the same as such a file: properties at depths from 0 to the whole shell, joined by "
               "straight lines; a property is given at every level or at none"},
  };
  for (Key& key : level_keys()) keys.push_back(std::move(key));
  return keys;
}

}  // namespace lidwright::case_text
