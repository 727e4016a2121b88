#include <fmt/format.h>

#include "io/case_rules.hpp"

/// What must hold between the keys of [viscosity] and its sub-tables.
namespace lidwright::case_text {
namespace {

void check_bounds(const Draft& draft, const Entries& entries) {
  if (draft.highest_viscosity && *draft.highest_viscosity < draft.made.model.viscosity.lowest)
    refuse(
        entries.place("viscosity.highest"),
        "viscosity.highest: is less than viscosity.lowest; the upper cut-off must be the larger");
}

void check_unity(const ProductDraft& product, const std::string& table, const Draft& draft,
                 const Entries& entries) {
  const std::string path = table + ".arrhenius.unity_at";
  if (product.has_arrhenius && product.arrhenius.unity_at + draft.absolute_surface() <= 0)
    refuse(
        entries.place(path),
        path + ": must be above absolute zero, where an Arrhenius viscosity is infinite; raise it");
}

void check_walls_warm(const Draft& draft, const Entries& entries) {
  const double offset = draft.absolute_surface();
  for (const WallDraft* wall : {&draft.inner, &draft.outer})
    if (wall->temperature && *wall->temperature + offset <= 0)
      refuse(
          entries.place(wall == &draft.inner ? "walls.inner.temperature"
                                             : "walls.outer.temperature"),
          fmt::format(
              "walls.{}.temperature: must be above absolute zero, where an Arrhenius viscosity is "
              "infinite; raise it or the absolute surface temperature",
              wall == &draft.inner ? "inner" : "outer"));
}

/// Its single keys are refused where they are read; an Arrhenius or exponential table is not.
void check_alone(const Draft& draft, const Entries& entries) {
  if (!draft.dislocation_alone()) return;
  for (const char* factor : {"exponential", "arrhenius"}) {
    const std::string table = fmt::format("viscosity.{}", factor);
    if (entries.has_table(table))
      refuse(entries.place(table),
             fmt::format("[{}] is of diffusion creep, which viscosity.dislocation.alone = true "
                         "leaves out; remove the table, or make it [viscosity.dislocation.{}]",
                         table, factor));
  }
  if (draft.dislocation.exponent > 1 && !draft.highest_viscosity)
    refuse(
        entries.place("viscosity.dislocation.alone"),
        "viscosity.dislocation.alone = true: a power law alone is infinitely stiff at rest; give "
        "viscosity.highest, or let diffusion creep act beside it (alone = false)");
}

void check_strength(const Draft& draft, const Entries& entries) {
  const Yielding& yielding = draft.yielding;
  if (yielding.cohesion == 0 && yielding.friction == 0)
    refuse(entries.place("viscosity.yielding"),
           "[viscosity.yielding]: viscosity.yielding.cohesion and viscosity.yielding.friction are "
           "both 0, so that the rock has no strength at all; give one of them, greater than 0, or "
           "remove the table");
  if (yielding.floor == 0 && draft.made.model.viscosity.lowest == 0)
    refuse(
        entries.place("viscosity.yielding"),
        "[viscosity.yielding]: viscosity.yielding.floor and viscosity.lowest are both 0, so that "
        "under a load above the yield stress nothing bounds the velocity; give one of them, "
        "greater than 0 (1e-5 to 1e-3 of the coldest rock's viscosity is usual)");
}

void check_yielding(const Draft& draft, const Entries& entries) {
  if (!draft.has_yielding) return;
  check_strength(draft, entries);
  if (draft.si || draft.yielding.friction == 0) return;
  if (!draft.lithostatic)
    refuse(entries.place("viscosity.yielding.friction"),
           fmt::format("viscosity.yielding.friction = {}: needs viscosity.yielding.lithostatic, "
                       "which is missing and has no default: give number (rho g d^3/(kappa "
                       "eta_ref), which is numbers.rayleigh/(alpha DeltaT))",
                       draft.yielding.friction));
  if (*draft.lithostatic == 0)
    refuse(entries.place("viscosity.yielding.lithostatic"),
           "viscosity.yielding.lithostatic = 0: must be greater than 0 with "
           "viscosity.yielding.friction, which has no effect without a pressure");
}

}  // namespace

void check_rheology(const Draft& draft, const Entries& entries) {
  check_alone(draft, entries);
  check_sorted(draft.diffusion.layered.layers, "viscosity.layers", entries);
  check_sorted(draft.dislocation_viscosity.layered.layers, "viscosity.dislocation.layers", entries);
  check_bounds(draft, entries);
  check_unity(draft.diffusion, "viscosity", draft, entries);
  if (draft.has_dislocation)
    check_unity(draft.dislocation_viscosity, "viscosity.dislocation", draft, entries);
  if (draft.any_arrhenius()) check_walls_warm(draft, entries);
  check_yielding(draft, entries);
}

}  // namespace lidwright::case_text
