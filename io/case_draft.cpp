#include "io/case_draft.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <numbers>

#include "io/case_units.hpp"

namespace lidwright::case_text {
namespace {

using std::numbers::pi;

double radians(double degrees) { return degrees * pi / 180; }

double degrees(double angle) { return exact_inverse(radians, angle, angle * 180 / pi); }

/// Never beyond the pole or the full circle by round-off.
double end_angle(double from, double opening, double most) {
  return std::min(radians(from + opening), most);
}

double widest(const Shell& shell) {
  return shell.shape == Shape::AxisymmetricShell ? pi : 2 * pi + shell.lateral_begin;
}

void set_lateral_range(Shell& shell, const Draft& draft) {
  shell.lateral_begin = 0;
  if (draft.box()) {
    shell.lateral_end = draft.width;
    return;
  }
  const Extent extent = draft.extent_or_default();
  shell.sides = extent == Extent::FullCircle ? Sides::Periodic : Sides::Reflecting;
  if (extent == Extent::FullCircle) shell.lateral_end = 2 * pi;
  if (extent == Extent::PoleToPole) shell.lateral_end = pi;
  if (extent == Extent::Hemisphere) shell.lateral_end = pi / 2;
  if (extent != Extent::Sector) return;
  shell.lateral_begin = radians(draft.from);
  shell.lateral_end = end_angle(draft.from, *draft.opening, widest(shell));
}

void set_wall(Wall& wall, const WallDraft& draft) {
  wall.slip = draft.flow;
  if (draft.temperature)
    wall.thermal = FixedTemperature{*draft.temperature};
  else
    wall.thermal = FixedHeatFlux{draft.heat_flux.value_or(0)};
}

void derive_from_body(Draft& draft) {
  draft.radius_ratio = radius_ratio(draft.body);
  draft.made.model.rayleigh = rayleigh_number(draft.body);
}

RadialProfile with_table(RadialProfile profile, const TabulatedProperty& property,
                         const ReferenceDraft& draft) {
  profile.depths.clear(), profile.values.clear();
  if (!tabulated(draft, property)) return profile;
  for (const ReferenceLevel& level : draft.levels) {
    profile.depths.push_back(level.depth);
    profile.values.push_back(*(level.*property.value));
  }
  return profile;
}

void set_reference(ReferenceProfiles& profiles, const Draft& draft) {
  profiles.dissipation_number = draft.compressible() ? draft.dissipation() : 0;
  profiles.surface_temperature = draft.compressible() ? draft.absolute_surface() : 0;
  profiles.density.rise = draft.density_rise();
  for (const TabulatedProperty& property : tabulated_properties())
    profiles.*property.profile = with_table(profiles.*property.profile, property, draft.reference);
}

WallDraft take_apart(const Wall& wall) {
  WallDraft draft;
  draft.flow = wall.slip;
  if (const auto* fixed = std::get_if<FixedTemperature>(&wall.thermal)) {
    draft.temperature = fixed->value;
    return draft;
  }
  const double outward = std::get<FixedHeatFlux>(wall.thermal).outward;
  if (outward == 0 && !std::signbit(outward))
    draft.insulating = true;
  else
    draft.heat_flux = outward;
  return draft;
}

Extent extent_of(const Shell& shell) {
  if (shell.sides == Sides::Periodic) return Extent::FullCircle;
  if (shell.shape != Shape::AxisymmetricShell || shell.lateral_begin != 0) return Extent::Sector;
  if (shell.lateral_end == pi) return Extent::PoleToPole;
  return shell.lateral_end == pi / 2 ? Extent::Hemisphere : Extent::Sector;
}

void take_apart_shell(Draft& draft, const Shell& shell) {
  if (draft.box()) {
    draft.width = shell.lateral_end - shell.lateral_begin;
    return;
  }
  const double r = shell.inner_radius;
  draft.radius_ratio = exact_inverse(inner_radius_of, r, r / (1 + r));
  draft.extent = extent_of(shell);
  if (draft.extent != Extent::Sector) return;
  draft.from = degrees(shell.lateral_begin);
  const auto end = [&](double opening) { return end_angle(draft.from, opening, widest(shell)); };
  draft.opening = exact_inverse(end, shell.lateral_end, degrees(shell.lateral_end) - draft.from);
}

Approximation approximation_of(const ReferenceProfiles& profiles) {
  if (!profiles.density.constant()) return Approximation::AnelasticLiquid;
  return profiles.dissipation_number > 0 ? Approximation::ExtendedBoussinesq
                                         : Approximation::Boussinesq;
}

/// All tables of a case that was read have the same depths.
std::vector<ReferenceLevel> levels_of(const ReferenceProfiles& profiles) {
  std::vector<ReferenceLevel> levels;
  for (const TabulatedProperty& property : tabulated_properties()) {
    const RadialProfile& profile = profiles.*property.profile;
    if (profile.depths.empty()) continue;
    levels.resize(profile.depths.size());
    for (std::size_t k = 0; k < levels.size(); ++k) {
      levels[k].depth = profile.depths[k];
      levels[k].*property.value = profile.values[k];
    }
  }
  return levels;
}

void take_apart_reference(Draft& draft, const Model& model) {
  const ReferenceProfiles& profiles = model.reference;
  draft.reference.approximation = approximation_of(profiles);
  draft.reference.levels = levels_of(profiles);
  if (profiles.density.rise != 1) draft.reference.density_rise = profiles.density.rise;
  // The surface temperature is said once, where the approximation or else the viscosity needs it.
  if (draft.compressible())
    draft.reference.surface_temperature = profiles.surface_temperature;
  else if (model.viscosity.arrhenius)
    draft.arrhenius_surface = model.viscosity.arrhenius->offset;
  else if (model.dislocation && model.dislocation->viscosity.arrhenius)
    draft.reference.surface_temperature = model.dislocation->viscosity.arrhenius->offset;
}

void set_product(ViscosityLaw& law, const ProductDraft& draft, double offset) {
  law.constant = draft.constant;
  law.layered = draft.layered;
  if (draft.has_exponential) law.exponential = draft.exponential;
  if (!draft.has_arrhenius) return;
  law.arrhenius = draft.arrhenius;
  law.arrhenius->offset = offset;
}

void set_rheology(Model& model, const Draft& draft) {
  constexpr double infinity = std::numeric_limits<double>::infinity();
  const double offset = draft.absolute_surface();
  set_product(model.viscosity, draft.diffusion, offset);
  model.viscosity.highest = draft.highest_viscosity.value_or(infinity);
  if (draft.has_dislocation) {
    model.dislocation = draft.dislocation;
    set_product(model.dislocation->viscosity, draft.dislocation_viscosity, offset);
  }
  if (!draft.has_yielding) return;
  model.yielding = draft.yielding;
  model.yielding->ceiling = draft.yield_ceiling.value_or(infinity);
  model.yielding->lithostatic =
      draft.si ? lithostatic_number(draft.body) : draft.lithostatic.value_or(0);
}

ProductDraft take_apart(const ViscosityLaw& law) {
  return {law.constant,
          law.layered,
          law.exponential.has_value(),
          law.arrhenius.has_value(),
          law.exponential.value_or(ExponentialViscosity{}),
          law.arrhenius.value_or(ArrheniusViscosity{})};
}

void take_apart_rheology(Draft& draft, const Model& model) {
  draft.diffusion = take_apart(model.viscosity);
  if (std::isfinite(model.viscosity.highest)) draft.highest_viscosity = model.viscosity.highest;
  draft.has_dislocation = model.dislocation.has_value();
  draft.dislocation = model.dislocation.value_or(DislocationCreep{});
  draft.dislocation_viscosity = take_apart(draft.dislocation.viscosity);
  draft.has_yielding = model.yielding.has_value();
  if (!model.yielding) return;
  draft.yielding = *model.yielding;
  draft.lithostatic = model.yielding->lithostatic;
  if (std::isfinite(model.yielding->ceiling)) draft.yield_ceiling = model.yielding->ceiling;
}

}  // namespace

const std::vector<TabulatedProperty>& tabulated_properties() {
  using L = ReferenceLevel;
  using P = ReferenceProfiles;
  static const std::vector<TabulatedProperty> all = {
      {"density", &L::density, &P::density},
      {"expansivity", &L::expansivity, &P::expansivity},
      {"gravity", &L::gravity, &P::gravity},
      {"conductivity", &L::conductivity, &P::conductivity},
      {"heat_capacity", &L::heat_capacity, &P::heat_capacity},
  };
  return all;
}

bool tabulated(const ReferenceDraft& draft, const TabulatedProperty& property) {
  return !draft.levels.empty() && (draft.levels.front().*property.value).has_value();
}

double Draft::absolute_surface() const {
  if (si) return absolute_surface_temperature(body);
  return reference.surface_temperature.value_or(arrhenius_surface.value_or(0));
}

double Draft::dissipation() const {
  return si ? dissipation_number(body) : made.model.reference.dissipation_number;
}

double Draft::density_rise() const {
  if (reference.gruneisen) return std::exp(dissipation() / *reference.gruneisen);
  return reference.density_rise.value_or(1);
}

Extent Draft::extent_or_default() const {
  return extent.value_or(axisymmetric() ? Extent::PoleToPole : Extent::FullCircle);
}

double inner_radius_of(double radius_ratio) { return radius_ratio / (1 - radius_ratio); }

Case assemble(Draft draft) {
  if (draft.si) derive_from_body(draft);
  Model& model = draft.made.model;
  model.shell.inner_radius = draft.box() ? 0 : inner_radius_of(*draft.radius_ratio);
  set_lateral_range(model.shell, draft);
  set_wall(model.walls.inner, draft.inner);
  set_wall(model.walls.outer, draft.outer);
  set_rheology(model, draft);
  set_reference(model.reference, draft);
  if (draft.si || draft.body_used) draft.made.body = draft.body;
  return draft.made;
}

Draft take_apart(const Case& from) {
  Draft draft;
  draft.made = from;
  const Model& model = from.model;
  take_apart_shell(draft, model.shell);
  draft.inner = take_apart(model.walls.inner);
  draft.outer = take_apart(model.walls.outer);
  take_apart_rheology(draft, model);
  take_apart_reference(draft, model);
  draft.body_used = from.body.has_value();
  draft.body = from.body.value_or(Body{});
  return draft;
}

}  // namespace lidwright::case_text
