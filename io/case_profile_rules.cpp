#include <fmt/format.h>

#include <cmath>

#include "io/case_rules.hpp"
#include "io/case_values.hpp"

namespace lidwright::case_text {
namespace {

/// More would make a stored case longer than a case may be.
constexpr std::size_t most_levels = 2000;
/// How far, in shell thicknesses, the first and the last level may be off the walls.
constexpr double off_wall = 1e-6;

/// What a level's property is called where the user wrote it, and where that is.
struct LevelText {
  const Draft& draft;
  const Entries& entries;

  std::string path(std::size_t k) const { return fmt::format("reference.levels[{}]", k + 1); }
  std::string place(std::size_t k) const { return entries.place(path(k)); }
  std::string place(std::size_t k, const char* name) const {
    return entries.place(fmt::format("{}.{}", path(k), name));
  }
  std::string name(std::size_t k, const char* property) const {
    return draft.reference.table.empty() ? fmt::format("{}.{}", path(k), property)
                                         : fmt::format("column '{}'", property);
  }
  std::string length(double thicknesses) const {
    const Conversion there = conversion(Quantity::Length, draft.units());
    const Units units = units_of(Quantity::Length);
    return fmt::format("{:.10g} {}", there.written(thicknesses),
                       draft.si ? units.si : units.dimensionless);
  }
  std::string depth(std::size_t k) const {
    return fmt::format("{} = {}", name(k, "depth"), length(draft.reference.levels[k].depth));
  }
};

void check_depths(const LevelText& text) {
  const auto& levels = text.draft.reference.levels;
  if (levels.size() < 2 || levels.size() > most_levels)
    refuse(text.place(0), fmt::format("the profiles have {} depth{}; give at least 2 (the walls) "
                                      "and at most {}",
                                      levels.size(), levels.size() == 1 ? "" : "s", most_levels));
  for (std::size_t k = 1; k < levels.size(); ++k)
    if (levels[k].depth <= levels[k - 1].depth)
      refuse(text.place(k, "depth"),
             fmt::format("{}: must be deeper than the one before it, {}; sort by depth, shallowest "
                         "first",
                         text.depth(k), text.length(levels[k - 1].depth)));
  if (levels.front().depth > off_wall)
    refuse(text.place(0, "depth"),
           fmt::format("{}: must be 0, at the outer wall; add that depth", text.depth(0)));
  const std::size_t last = levels.size() - 1;
  if (std::abs(levels[last].depth - 1) > off_wall)
    refuse(text.place(last, "depth"),
           fmt::format("{}: the last depth must be that of the inner wall, {}; end the profiles "
                       "there",
                       text.depth(last), text.length(1)));
}

void check_complete(const LevelText& text, const TabulatedProperty& property) {
  const ReferenceDraft& draft = text.draft.reference;
  for (std::size_t k = 1; k < draft.levels.size(); ++k) {
    const bool here = (draft.levels[k].*property.value).has_value();
    if (here == tabulated(draft, property)) continue;
    const std::size_t lacking = here ? 0 : k, other = here ? k : 0;
    refuse(text.place(lacking),
           fmt::format("{} is missing, but {} is given; give it at every "
                       "level or at none",
                       text.name(lacking, property.name), text.name(other, property.name)));
  }
}

void check_not_twice(const LevelText& text, const TabulatedProperty& property) {
  const RadialProfile& profile = text.draft.made.model.reference.*property.profile;
  if (!tabulated(text.draft.reference, property)) return;
  const auto refuse_both = [&](const std::string& key) {
    refuse(text.entries.place(key),
           fmt::format("{} and {} are both given; a property has one profile, remove one of them",
                       key, text.name(0, property.name)));
  };
  if (profile.rise != 1) refuse_both(fmt::format("reference.{}_rise", property.name));
  if (profile.radius_power != 0) refuse_both(fmt::format("reference.{}_power", property.name));
}

void check_levels(const LevelText& text) {
  const ReferenceDraft& draft = text.draft.reference;
  if (draft.levels.empty() && draft.table.empty()) return;
  check_depths(text);
  bool any = false;
  for (const TabulatedProperty& property : tabulated_properties()) {
    check_complete(text, property);
    check_not_twice(text, property);
    any = any || tabulated(draft, property);
  }
  if (!any) refuse(text.place(0), "the profiles have depths and nothing else; add a property");
}

void check_gruneisen(const Draft& draft, const Entries& entries) {
  constexpr double most = 1e6;
  const double rise = draft.density_rise();
  if (!draft.reference.gruneisen || (rise > 1 && rise <= most)) return;
  refuse(entries.place("reference.gruneisen"),
         fmt::format("reference.gruneisen = {}: the density at the inner wall would be exp({:.4g}/"
                     "{}) = {:.4g} times that at the outer, and must be greater than 1 and at most "
                     "{}; take Gamma near 1",
                     *draft.reference.gruneisen, draft.dissipation(), *draft.reference.gruneisen,
                     rise, most));
}

void check_density(const LevelText& text) {
  const Draft& draft = text.draft;
  const bool in_table = tabulated(draft.reference, tabulated_properties().front());
  if (in_table && !draft.anelastic())
    refuse(text.place(0, "density"),
           fmt::format("{}: the density is uniform unless reference.approximation = "
                       "\"anelastic-liquid\"; take that, or remove the density",
                       text.name(0, "density")));
  if (!draft.anelastic()) return;
  const auto place = text.entries.place("reference.approximation");
  const int given = draft.reference.gruneisen.has_value() +
                    draft.reference.density_rise.has_value() + static_cast<int>(in_table);
  if (given != 1)
    refuse(place, fmt::format("reference.approximation = \"anelastic-liquid\": {} of "
                              "reference.gruneisen, reference.density_rise and a density in "
                              "reference.table or reference.levels {}; give exactly one",
                              given == 0 ? "none" : "more than one",
                              given == 0 ? "is given" : "are given"));
  check_gruneisen(draft, text.entries);
}

void check_surface_given(const Draft& draft, const Entries& entries) {
  const auto& of_numbers = draft.reference.surface_temperature;
  const auto& of_arrhenius = draft.arrhenius_surface;
  if (draft.compressible() && !of_numbers)
    refuse(entries.place("numbers"),
           "numbers.surface_temperature is missing and has no default; give number (absolute "
           "temperature where T = 0, in units of the temperature drop)");
  if (draft.diffusion.has_arrhenius && !of_numbers && !of_arrhenius)
    refuse(entries.place("viscosity.arrhenius"),
           "viscosity.arrhenius.surface_temperature is missing and has no default; give number "
           "(absolute temperature where T = 0, in units of the temperature drop)");
  if (draft.any_arrhenius() && !of_numbers && !of_arrhenius)
    refuse(entries.place("viscosity.dislocation.arrhenius"),
           "numbers.surface_temperature is missing and has no default, and [viscosity.arrhenius] "
           "does not say it either; give number (absolute temperature where T = 0, in units of the "
           "temperature drop)");
  if (of_numbers && of_arrhenius && *of_numbers != *of_arrhenius)
    refuse(entries.place("viscosity.arrhenius.surface_temperature"),
           fmt::format("viscosity.arrhenius.surface_temperature = {}: must equal "
                       "numbers.surface_temperature = {}; remove one of them, it serves for both",
                       *of_arrhenius, *of_numbers));
  if (draft.any_arrhenius() && draft.absolute_surface() <= 0)
    refuse(entries.place("numbers.surface_temperature"),
           fmt::format("numbers.surface_temperature = 0: must be greater than 0 with [{}], whose "
                       "viscosity is infinite at absolute zero",
                       draft.diffusion.has_arrhenius ? "viscosity.arrhenius"
                                                     : "viscosity.dislocation.arrhenius"));
}

void check_walls_above_zero(const Draft& draft, const Entries& entries) {
  if (!draft.compressible()) return;
  for (const bool inner : {true, false}) {
    const WallDraft& wall = inner ? draft.inner : draft.outer;
    const std::string path = fmt::format("walls.{}.temperature", inner ? "inner" : "outer");
    if (wall.temperature && *wall.temperature + draft.absolute_surface() < 0)
      refuse(entries.place(path),
             fmt::format("{} = {}: is below absolute zero, {} with numbers.surface_temperature; "
                         "raise it",
                         path, *wall.temperature, -draft.absolute_surface()));
  }
}

}  // namespace

void check_reference(const Draft& draft, const Entries& entries) {
  if (!draft.si) check_surface_given(draft, entries);
  check_walls_above_zero(draft, entries);
  const LevelText text{draft, entries};
  check_levels(text);
  check_density(text);
}

}  // namespace lidwright::case_text
