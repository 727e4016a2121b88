#include "io/figure_words.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <string_view>
#include <utility>

#include "io/canvas.hpp"
#include "io/page_words.hpp"
#include "io/plain_text.hpp"

namespace lidwright {
namespace {

using Replacement = std::pair<std::string_view, std::string_view>;

constexpr std::array<Replacement, 25> words{{
    {"nusselt_outer", "Nusselt number, outer wall"},
    {"nusselt_inner", "Nusselt number, inner wall"},
    {"heat_flow_outer", "heat flow, outer wall"},
    {"heat_flow_inner", "heat flow, inner wall"},
    {"temperature_mean", "mean temperature"},
    {"temperature_min", "least temperature"},
    {"temperature_max", "largest temperature"},
    {"temperature_inner", "temperature, inner wall"},
    {"temperature_outer", "temperature, outer wall"},
    {"temperature_internal", "temperature of the interior"},
    {"temperature_change_rate", "rms rate of temperature"},
    {"velocity_rms", "rms velocity"},
    {"velocity_rms_outer", "rms velocity, outer wall"},
    {"velocity_rms_inner", "rms velocity, inner wall"},
    {"velocity_rms_lid_base", "rms velocity, base of the lid"},
    {"lid_thickness_velocity", "lid thickness, by velocity"},
    {"lid_thickness_isotherm", "lid thickness, by isotherm"},
    {"lid_thickness_advection", "lid thickness, by advection"},
    {"lid_thickness_conduction", "outer thermal boundary layer"},
    {"boundary_layer_inner", "inner thermal boundary layer"},
    {"rayleigh_internal", "Rayleigh number of the interior"},
    {"frank_kamenetskii", "Frank-Kamenetskii parameter"},
    {"heat_source", "internal heating"},
    {"stress_rms_outer", "rms stress, outer wall"},
    {"topography_rms_outer", "rms topography, outer wall"},
}};

/// Part of a value below which nobody reads its error: a smaller one is given as this.
constexpr double most_digits = 1e-6;

bool flat(Shape shape) { return shape == Shape::Box || shape == Shape::Annulus; }

/// The powers that depend on the number of dimensions, written out.
std::string in_dimensions(std::string unit, Shape shape) {
  unit = replaced(unit, " d^(n-2)", flat(shape) ? "" : " d");
  return replaced(unit, " d^(n-4)", flat(shape) ? "/d^2" : "/d");
}

}  // namespace

std::string column_words(const std::string& column) {
  for (const auto& [name, meaning] : words)
    if (name == column) return std::string(meaning);
  std::string text = column;
  std::replace(text.begin(), text.end(), '_', ' ');
  return plot::as_markup(text);
}

std::string unit_markup(const std::string& of_a_table, Shape shape) {
  if (of_a_table == "s") return of_a_table;
  std::string text = plot::as_markup(page::unit(in_dimensions(of_a_table, shape)));
  std::string markup;
  for (const char c : text)
    markup += c == 'd' || c == 'k' || c == 'T' ? fmt::format("<i>{}</i>", c) : std::string(1, c);
  for (const char* greek : {"\u03ba", "\u03b7"})
    markup = replaced(markup, greek, fmt::format("<i>{}</i>", greek));
  return markup;
}

Shown shown_column(const std::string& column, const std::string& unit, const Case& c) {
  if (c.body)
    if (const auto in = page::in_body(unit, *c.body, column.starts_with("temperature")))
      return {in->scale, in->offset, plot::as_markup(in->unit)};
  return {1, 0, unit_markup(unit, c.model.shell.shape)};
}

Shown shown_time(const Case& c) { return shown_column("time", "d^2/kappa", c); }

std::string with_error(double value, double error) {
  const page::Stated s =
      page::stated(value, error > 0 ? std::max(error, most_digits * std::abs(value)) : error);
  if (s.error.empty()) return s.value;
  const std::size_t value_power = s.value.find(" \u00d7 "), error_power = s.error.find(" \u00d7 ");
  if (value_power == std::string::npos || error_power == std::string::npos)
    return fmt::format("{} \u00b1 {}", s.value, s.error);
  return fmt::format("({} \u00b1 {}){}", s.value.substr(0, value_power),
                     s.error.substr(0, error_power), s.value.substr(value_power));
}

}  // namespace lidwright
