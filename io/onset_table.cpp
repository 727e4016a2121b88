#include "io/onset_table.hpp"

#include <fmt/format.h>

#include <array>
#include <cmath>
#include <numbers>

#include "io/case_file.hpp"
#include "io/csv.hpp"
#include "io/number_table.hpp"

namespace lidwright {
namespace {

constexpr std::string_view title = "lidwright onset of convection, mode by mode";

constexpr std::array<Column, 9> columns{{
    {"mode", "1", "whole waves along a periodic shell, half waves between reflecting sides"},
    {"order", "1 or 1/d",
     "annuli: waves in the whole circle; axisymmetric shell: degree l; box: wavenumber"},
    {"wavenumber", "1/d", "at mid-depth; in the axisymmetric shell sqrt(l(l + 1)) over the radius"},
    {"rayleigh", "1", "neutral Rayleigh number, extrapolated when there is an error bar"},
    {"error", "1", "half width of its error bar; 0: none was asked for"},
    {"observed_order", "1", "of convergence on the three grids; nan: none"},
    {"on_own_grid", "1", "Rayleigh number on the case's own radial cells, four times the coarsest"},
    {"on_coarsest_grid", "1",
     "on a quarter of the radial cells; the same as before: not asked for"},
    {"critical", "1", "1 for the least Rayleigh number, else 0"},
}};

}  // namespace

std::string onset_table(const OnsetCurve& curve) {
  std::string text = table_head(title, columns);
  for (std::size_t k = 0; k < curve.points.size(); ++k) {
    const OnsetPoint& p = curve.points[k];
    const std::array<double, 9> row{static_cast<double>(p.wave.number),
                                    p.wave.order,
                                    p.wave.wavenumber,
                                    p.rayleigh.value,
                                    p.rayleigh.half_width,
                                    p.rayleigh.order,
                                    p.on_grids.back(),
                                    p.on_grids.front(),
                                    static_cast<int>(k) == curve.least ? 1.0 : 0.0};
    text += table_row(row);
  }
  return text;
}

OnsetCurve read_onset(const std::string& text, const std::string& path) {
  if (!text.starts_with("# " + std::string(title)))
    throw InputError(fmt::format("{}: not a table that onset has written", path));
  const NumberTable t = parse_numbers(text, path);
  if (t.rows() == 0) throw InputError(fmt::format("{}: holds no mode", path));
  const auto at = [&](const char* name, std::size_t k) {
    if (const auto* column = t.find(name)) return (*column)[k];
    throw InputError(fmt::format("{}: has no column '{}'", path, name));
  };
  OnsetCurve curve;
  for (std::size_t k = 0; k < t.rows(); ++k) {
    OnsetPoint p;
    p.wave.number = static_cast<int>(at("mode", k));
    p.rayleigh.value = at("rayleigh", k);
    p.rayleigh.half_width = at("error", k);
    curve.points.push_back(p);
    if (at("critical", k) != 0) curve.least = static_cast<int>(k);
  }
  return curve;
}

}  // namespace lidwright
