#include "io/case_rules.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "io/case_values.hpp"
#include "io/history.hpp"
#include "io/history_table.hpp"

namespace lidwright::case_text {
namespace {

/// A cell count beyond this overflows the 32-bit indices of the linear algebra.
constexpr double most_cells = 1e8;

void check_extent(const Draft& draft, const Entries& entries) {
  if (draft.box()) return;
  const Extent extent = draft.extent_or_default();
  const std::string place = entries.place("shell.extent");
  if (draft.axisymmetric() && extent == Extent::FullCircle)
    refuse(place,
           "shell.extent = \"full-circle\": an axisymmetric shell ends at its axis; take "
           "\"pole-to-pole\", \"hemisphere\" or \"sector\"");
  if (!draft.axisymmetric() && (extent == Extent::PoleToPole || extent == Extent::Hemisphere))
    refuse(place, fmt::format("shell.extent = \"{}\": only an axisymmetric shell has poles; take "
                              "\"full-circle\" or \"sector\"",
                              extent == Extent::PoleToPole ? "pole-to-pole" : "hemisphere"));
  if (draft.axisymmetric() && extent == Extent::Sector && draft.from + *draft.opening > 180)
    refuse(entries.place("shell.opening"),
           fmt::format(
               "shell.opening = {}: the sector ends beyond the pole; shell.from + shell.opening "
               "must be at most 180 degrees",
               *draft.opening));
}

void check_grid(const Draft& draft, const Entries& entries) {
  const Grid& grid = draft.made.model.grid;
  const double cells = static_cast<double>(grid.radial) * grid.lateral;
  if (cells > most_cells)
    refuse(entries.place("grid.lateral"),
           fmt::format(
               "grid.radial = {} and grid.lateral = {}: {:.3g} cells are too many; take at most "
               "{:g} in all",
               grid.radial, grid.lateral, cells, most_cells));
}

void check_wall(const WallDraft& wall, const std::string& table, const Entries& entries) {
  const auto place = [&](const char* name) { return entries.place(table + "." + name); };
  if (wall.insulating && !*wall.insulating)
    refuse(place("insulating"),
           fmt::format("{}.insulating = false: says nothing about the wall; give "
                       "temperature or heat_flux instead",
                       table));
  if (wall.temperature && wall.heat_flux)
    refuse(place("heat_flux"),
           fmt::format("{}: temperature and heat_flux are both given; a wall takes "
                       "one of them, remove the other",
                       table));
  if (wall.insulating && (wall.temperature || wall.heat_flux))
    refuse(place("insulating"),
           fmt::format(
               "{}: insulating and {} are both given; a wall takes one of them, remove the other",
               table, wall.temperature ? "temperature" : "heat_flux"));
  if (!wall.temperature && !wall.heat_flux && !wall.insulating)
    refuse(entries.place(table),
           fmt::format("[{}] has no thermal condition; give one of temperature, "
                       "heat_flux, insulating = true",
                       table));
}

void check_walls(const Draft& draft, const Entries& entries) {
  check_wall(draft.inner, "walls.inner", entries);
  check_wall(draft.outer, "walls.outer", entries);
  if (!draft.inner.temperature && !draft.outer.temperature)
    refuse(entries.place("walls.outer"),
           "no wall holds a temperature: heat fluxes alone leave it undetermined up to a constant, "
           "and "
           "there is no steady state; give walls.outer.temperature or walls.inner.temperature");
}

void choose_factors(ProductDraft& product, const std::string& table, const Entries& entries) {
  product.has_exponential = entries.has_table(table + ".exponential");
  product.has_arrhenius = entries.has_table(table + ".arrhenius");
}

void check_initial(const Draft& draft, const Entries& entries) {
  const auto& modes = draft.made.initial.modes;
  const bool periodic = draft.box() ? draft.made.model.shell.sides == Sides::Periodic
                                    : draft.extent_or_default() == Extent::FullCircle;
  for (std::size_t k = 0; periodic && k < modes.size(); ++k) {
    if (modes[k].lateral == std::floor(modes[k].lateral)) continue;
    const std::string path = fmt::format("initial.modes[{}].lateral", k + 1);
    refuse(entries.place(path),
           fmt::format("{} = {}: must be a whole number of waves where the shell is "
                       "periodic, or the field has a jump",
                       path, modes[k].lateral));
  }
}

void check_steps(const Draft& draft, const Entries& entries) {
  const HeatSettings& heat = draft.made.heat;
  if (heat.first_step > heat.largest_step)
    refuse(entries.place("transport.first_step"),
           "transport.first_step: is longer than transport.largest_step; make it at most as long");
}

/// Each name a column whose mean says something.
void check_known(const Draft& draft, const Entries& entries) {
  if (draft.made.march.until != MarchUntil::Known) return;
  std::vector<std::string> columns;
  for (const Column& c : history_columns())
    if (!is_bookkeeping(std::string(c.name))) columns.emplace_back(c.name);
  for (const std::string& name : names_in(draft.made.march.known_quantities)) {
    if (std::find(columns.begin(), columns.end(), name) != columns.end()) continue;
    refuse(entries.place("march.known.quantities"),
           fmt::format("march.known.quantities: '{}' is no column of history.csv with a mean{}; "
                       "take some of {}, with commas between",
                       name, nearest(name, columns), fmt::join(columns, ", ")));
  }
}

}  // namespace

void choose_tables(Draft& draft, const Entries& entries) {
  draft.si = entries.has_table("body");
  draft.body_used = entries.has_table("body_used");
  choose_factors(draft.diffusion, "viscosity", entries);
  choose_factors(draft.dislocation_viscosity, "viscosity.dislocation", entries);
  draft.has_dislocation = entries.has_table("viscosity.dislocation");
  draft.has_yielding = entries.has_table("viscosity.yielding");
  const bool numbers = entries.has_table("numbers");
  if (numbers && draft.si)
    refuse(entries.place("body"),
           "[body] and [numbers] are both given; a case is either in SI units with "
           "[body] or dimensionless with [numbers], remove one");
  if (!numbers && !draft.si)
    refuse(entries.file(),
           "neither [numbers] nor [body] is given; add [numbers] with rayleigh for a "
           "dimensionless case, or [body] for one in SI units");
  if (draft.si && draft.body_used)
    refuse(entries.place("body_used"),
           "[body_used] belongs to a dimensionless case; with [body], remove it");
}

void check_body(const Draft& draft, const Entries& entries) {
  if (!draft.si && !draft.body_used) return;
  const std::string table = draft.si ? "body" : "body_used";
  if (draft.body.core_radius >= draft.body.radius)
    refuse(entries.place(table + ".core_radius"),
           fmt::format("{0}.core_radius = {1}: must be less than {0}.radius = {2} (km)", table,
                       draft.body.core_radius / 1000, draft.body.radius / 1000));
  const Scales scales = scales_of(draft.body);
  for (const double derived :
       {rayleigh_number(draft.body), radius_ratio(draft.body), scales.time, scales.heat_source,
        scales.activation_volume, scales.stress, lithostatic_number(draft.body),
        absolute_surface_temperature(draft.body), dissipation_number(draft.body)})
    if (!std::isnormal(derived))
      refuse(entries.place(table),
             fmt::format("[{}]: its scales overflow or vanish, so its numbers are far from any "
                         "body's; check their units",
                         table));
}

void check_together(const Draft& draft, const Entries& entries) {
  check_extent(draft, entries);
  check_grid(draft, entries);
  check_walls(draft, entries);
  check_reference(draft, entries);
  check_rheology(draft, entries);
  check_sorted(draft.made.model.heat.layers, "heat.layers", entries);
  check_initial(draft, entries);
  check_steps(draft, entries);
  check_known(draft, entries);
}

}  // namespace lidwright::case_text
