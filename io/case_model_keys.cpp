#include "io/case_bind.hpp"

namespace lidwright::case_text {
namespace {

constexpr Condition box = {R"(with shell.geometry = "box")",
                           [](const Draft& d) { return d.box(); }};
constexpr Condition curved = {R"(with a curved shell.geometry, not in the "box")",
                              [](const Draft& d) { return !d.box(); }};
constexpr Condition ratio_free = {
    "in a curved shell with [numbers] (with [body] it follows from body.core_radius and "
    "body.radius)",
    [](const Draft& d) { return !d.box() && !d.si; }};
constexpr Condition sector = {R"(with shell.extent = "sector")", [](const Draft& d) {
                                return !d.box() && d.extent_or_default() == Extent::Sector;
                              }};
constexpr Condition reflecting_box = {
    R"(in a box with shell.sides = "reflecting")",
    [](const Draft& d) { return d.box() && d.made.model.shell.sides == Sides::Reflecting; }};
constexpr Condition body = {"with [body]", [](const Draft& d) { return d.si; }};
constexpr Condition body_used = {"with [body_used]", [](const Draft& d) { return d.body_used; }};
constexpr Condition compressible_numbers = {
    R"(with [numbers] and reference.approximation = "extended-boussinesq" or "anelastic-liquid")",
    [](const Draft& d) { return !d.si && d.compressible(); }};
constexpr Condition absolute_numbers = {
    R"(with [numbers], and with [viscosity.arrhenius], [viscosity.dislocation.arrhenius] or )"
    R"(reference.approximation = "extended-boussinesq" or "anelastic-liquid")",
    [](const Draft& d) { return !d.si && (d.compressible() || d.any_arrhenius()); }};
}  // namespace

std::vector<Key> scale_keys() {
  const auto number = [](const char* name, double Body::*member, std::string_view unit,
                         std::string_view help, Quantity quantity = Quantity::Number) {
    return Key{.path = std::string("body.") + name,
               .access = said(&Draft::body, member),
               .need = Need::Required,
               .quantity = quantity,
               .unit = unit,
               .range = positive,
               .only = body,
               .help = help};
  };
  return {
      {.path = "title", .access = of_case(&Case::title), .help = "what the case is, for people"},
      {.path = "numbers.rayleigh",
       .access = of_model(&Model::rayleigh),
       .need = Need::Required,
       .range = not_negative,
       .only = numbers,
       .help = "rho alpha g DeltaT d^3/(kappa eta_ref), with the viscosity eta_ref where the law "
               "gives 1"},
      {.path = "numbers.dissipation",
       .access = of_model(&Model::reference, &ReferenceProfiles::dissipation_number),
       .need = Need::Required,
       .range = {.low = 0, .high = 100, .low_open = true},
       .only = compressible_numbers,
       .help = "Di = alpha g d/cp; with [body] it follows from the body"},
      {.path = "numbers.surface_temperature",
       .access = said(&Draft::reference, &ReferenceDraft::surface_temperature),
       .default_text = "required; with [viscosity.arrhenius] alone, that table may say it",
       .unit = "DeltaT",
       .range = not_negative,
       .only = absolute_numbers,
       .help = "absolute temperature where T = 0; with [body] it follows from the body"},
      number("radius", &Body::radius, "", "radius of the outer wall", Quantity::Kilometres),
      number("core_radius", &Body::core_radius, "",
             "radius of the inner wall, less than body.radius", Quantity::Kilometres),
      number(
          "gravity", &Body::gravity, "m/s^2",
          "gravity in the mantle; this and the next four: where the profile in [reference] is 1"),
      number("density", &Body::density, "kg/m^3", "density of the mantle"),
      number("expansivity", &Body::expansivity, "1/K", "thermal expansivity, by volume"),
      number("conductivity", &Body::conductivity, "W/m/K", "thermal conductivity"),
      number("heat_capacity", &Body::heat_capacity, "J/kg/K", "heat capacity at constant pressure"),
      number("surface_temperature", &Body::surface_temperature, "K",
             "absolute temperature that counts as 0 in dimensionless terms"),
      number("temperature_drop", &Body::temperature_drop, "K",
             "temperature difference that counts as 1 in dimensionless terms"),
      number("reference_viscosity", &Body::reference_viscosity, "Pa s",
             "viscosity where the viscosity law gives 1"),
  };
}

/// The body's keys once more, under the name that leaves the rest of the file dimensionless.
std::vector<Key> body_used_keys() {
  std::vector<Key> keys;
  for (Key key : scale_keys()) {
    if (key.table() != "body") continue;
    key.path = "body_used." + key.name();
    key.only = body_used;
    keys.push_back(key);
  }
  return keys;
}

std::vector<Key> shell_keys() {
  return {
      {.path = "shell.geometry",
       .access = of_model(&Model::shell, &Shell::shape),
       .need = Need::Required,
       .words = {"box", "annulus", "spherical-annulus", "axisymmetric"},
       .help = "shape of the mantle"},
      {.path = "shell.radius_ratio",
       .access = said(&Draft::radius_ratio),
       .need = Need::Required,
       .range = {0, 1, true, true},
       .only = ratio_free,
       .help = "inner radius over outer radius"},
      {.path = "shell.extent",
       .access = said(&Draft::extent),
       .default_text = R"("full-circle"; axisymmetric: "pole-to-pole")",
       .words = {"full-circle", "sector", "pole-to-pole", "hemisphere"},
       .only = curved,
       .help = "part of the shell; all but the full circle have reflecting sides; pole-to-pole, "
               "hemisphere and sector for the axisymmetric shell, full-circle and sector for the "
               "others"},
      {.path = "shell.from",
       .access = said(&Draft::from),
       .unit = "degrees",
       .range = {.low = 0, .high = 360, .high_open = true},
       .only = sector,
       .help = "where the sector begins: longitude, or colatitude in the axisymmetric shell"},
      {.path = "shell.opening",
       .access = said(&Draft::opening),
       .need = Need::Required,
       .unit = "degrees",
       .range = {.low = 0.001, .high = 360},
       .only = sector,
       .help =
           "angle of the sector; an axisymmetric one ends at the pole, at 180 degrees, or before"},
      {.path = "shell.width",
       .access = said(&Draft::width),
       .quantity = Quantity::Length,
       .range = {.low = 0, .high = 1000, .low_open = true},
       .only = box,
       .help = "width of the box, from side to side"},
      {.path = "shell.sides",
       .access = of_model(&Model::shell, &Shell::sides),
       .words = {"periodic", "reflecting"},
       .only = box,
       .help = "what the sides of the box do"},
      {.path = "grid.radial",
       .access = of_model(&Model::grid, &Grid::radial),
       .need = Need::Required,
       .range = cells,
       .help = "cells from wall to wall"},
      {.path = "grid.lateral",
       .access = of_model(&Model::grid, &Grid::lateral),
       .need = Need::Required,
       .range = cells,
       .help = "cells along the shell"},
      {.path = "grid.inner_refinement",
       .access = of_model(&Model::grid, &Grid::radial_grading, &Grading::first),
       .range = refinement,
       .help = "height of a cell in mid-shell over that at the inner wall"},
      {.path = "grid.outer_refinement",
       .access = of_model(&Model::grid, &Grid::radial_grading, &Grading::last),
       .range = refinement,
       .help = "height of a cell in mid-shell over that at the outer wall"},
      {.path = "grid.left_refinement",
       .access = of_model(&Model::grid, &Grid::lateral_grading, &Grading::first),
       .range = refinement,
       .only = reflecting_box,
       .help = "width of a cell in the middle over that at the left side"},
      {.path = "grid.right_refinement",
       .access = of_model(&Model::grid, &Grid::lateral_grading, &Grading::last),
       .range = refinement,
       .only = reflecting_box,
       .help = "width of a cell in the middle over that at the right side"},
  };
}

std::vector<Key> wall_keys(const std::string& table, WallDraft Draft::*wall) {
  constexpr std::string_view one_of_three =
      "one of temperature, heat_flux, insulating must be given";
  return {
      {.path = table + ".temperature",
       .access = said(wall, &WallDraft::temperature),
       .default_text = one_of_three,
       .quantity = Quantity::Temperature,
       .help = "temperature held at the wall"},
      {.path = table + ".heat_flux",
       .access = said(wall, &WallDraft::heat_flux),
       .default_text = one_of_three,
       .quantity = Quantity::HeatFlux,
       .help =
           "heat flux outwards: it enters through the inner wall and leaves through the outer one "
           "where positive"},
      {.path = table + ".insulating",
       .access = said(wall, &WallDraft::insulating),
       .default_text = one_of_three,
       .help = "no heat passes the wall; only true is meaningful"},
      {.path = table + ".flow",
       .access = said(wall, &WallDraft::flow),
       .words = {"free-slip", "no-slip"},
       .help = "does the mantle slide along the wall or stick to it"},
  };
}

std::vector<Key> heat_keys() {
  return {
      {.path = "heat.uniform",
       .access = of_model(&Model::heat, &HeatSources::uniform),
       .quantity = Quantity::HeatSource,
       .help = "heat produced in each volume of the mantle"},
      {.path = "heat.layers",
       .access = list(&Draft::made, &Case::model, &Model::heat, &HeatSources::layers),
       .help = "heat production by depth, shallowest first; each holds down to the next"},
      {.path = "heat.layers[].below",
       .access = heat_layer(&HeatLayer::below),
       .need = Need::Required,
       .quantity = Quantity::Length,
       .range = depths,
       .help = "depth of the layer's top below the outer wall"},
      {.path = "heat.layers[].source",
       .access = heat_layer(&HeatLayer::source),
       .need = Need::Required,
       .quantity = Quantity::HeatSource,
       .help = "heat production in the layer, instead of heat.uniform"},
  };
}

}  // namespace lidwright::case_text
