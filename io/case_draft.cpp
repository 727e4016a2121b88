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
  draft.arrhenius.offset = absolute_surface_temperature(draft.body);
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

}  // namespace

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
  if (draft.has_exponential) model.viscosity.exponential = draft.exponential;
  if (draft.has_arrhenius) model.viscosity.arrhenius = draft.arrhenius;
  model.viscosity.highest =
      draft.highest_viscosity.value_or(std::numeric_limits<double>::infinity());
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
  draft.has_exponential = model.viscosity.exponential.has_value();
  draft.has_arrhenius = model.viscosity.arrhenius.has_value();
  draft.exponential = model.viscosity.exponential.value_or(ExponentialViscosity{});
  draft.arrhenius = model.viscosity.arrhenius.value_or(ArrheniusViscosity{});
  if (std::isfinite(model.viscosity.highest)) draft.highest_viscosity = model.viscosity.highest;
  draft.body_used = from.body.has_value();
  draft.body = from.body.value_or(Body{});
  return draft;
}

}  // namespace lidwright::case_text
