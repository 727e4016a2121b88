#include "tests/support/onset_cases.hpp"

#include <cmath>
#include <map>
#include <numbers>

#include "study/error_bars.hpp"

namespace lidwright {
namespace {

using std::numbers::pi;

Slip slip(const std::string& word) { return word == "free" ? Slip::Free : Slip::None; }

Shell shell_of(const std::string& geometry, double radius_ratio) {
  const double inner = radius_ratio / (1 - radius_ratio);
  if (geometry == "sphere") return {Shape::AxisymmetricShell, inner, 0, pi, Sides::Reflecting};
  const Shape shape = geometry == "annulus" ? Shape::Annulus : Shape::SphericalAnnulus;
  return {shape, inner, 0, 2 * pi, Sides::Periodic};
}

/// Temperature unit Q d^2/k: the source is 1.
void heat_within(Model& m) { m.heat.uniform = 1; }

void insulate_core(Model& m) { m.walls.inner.thermal = FixedHeatFlux{0}; }

/// T = (r_o^2 - r^2)/2, so dT/dr = -2 beta r with beta = 1/2: source 6 beta.
void heat_core_as_shell(Model& m) {
  const double inner = m.shell.inner_radius;
  m.heat.uniform = 3;
  m.walls.inner.thermal = FixedTemperature{((inner + 1) * (inner + 1) - inner * inner) / 2};
}

void set_heating(Model& m, const std::string& heating) {
  if (heating == "betar") heat_core_as_shell(m);
  if (heating != "internal") return;
  heat_within(m);
  insulate_core(m);
}

void set_slip(Model& m, const ReferenceRow& row, const char* inner, const char* outer) {
  m.walls.inner.slip = slip(row.text(inner));
  m.walls.outer.slip = slip(row.text(outer));
}

OnsetCase shell_case(const ReferenceRow& row, const std::string& geometry,
                     const std::string& heating, const char* mode) {
  OnsetCase c;
  c.model.shell = shell_of(geometry, row.number("f"));
  set_slip(c.model, row, "inner_bc", "outer_bc");
  set_heating(c.model, heating);
  c.number = static_cast<int>(row.number(mode));
  c.rayleigh = row.number("Ra_c");
  c.critical = row.text("critical") == "1";
  c.name = geometry + " " + heating + " " + row.text("f") + " " + row.text("inner_bc") + " " +
           row.text("outer_bc");
  return c;
}

/// With heating "betar" the table has 2 beta gamma r_o^6/(kappa nu), lengths in r_o.
OnsetCase central_gravity_case(const ReferenceRow& row) {
  OnsetCase c = shell_case(row, "sphere", row.text("heating"), "l");
  c.name += " g~r";
  c.model.reference.gravity.radius_power = 1;
  if (row.text("heating") == "betar") c.rayleigh /= std::pow(c.model.shell.inner_radius + 1, 5);
  return c;
}

/// Half a wave of the plane layer.
Shell half_wave(double wavenumber) {
  return {Shape::Box, 0, 0, pi / wavenumber, Sides::Reflecting};
}

/// Every row is the least over the wavenumber.
OnsetCase viscosity_case(const ReferenceRow& row) {
  OnsetCase c;
  const bool plane = row.text("geometry") == "plane";
  c.model.shell =
      plane ? half_wave(row.number("k_c")) : shell_of(row.text("geometry"), row.number("f"));
  set_slip(c.model, row, "inner_bc", "outer_bc");
  c.model.viscosity.exponential = ExponentialViscosity{row.number("contrast"), 1, 0.5};
  c.number = plane ? 1 : static_cast<int>(row.number("k_c"));
  c.rayleigh = row.number("Ra_half");
  c.critical = true;
  c.name = row.text("geometry") + " contrast " + row.text("contrast") + " " + row.text("inner_bc") +
           " " + row.text("outer_bc");
  return c;
}

OnsetCase plane_case(const ReferenceRow& row) {
  OnsetCase c;
  c.model.shell = half_wave(row.number("k_c"));
  set_slip(c.model, row, "bottom_bc", "top_bc");
  const bool within = row.text("heating") == "internal", flux = row.text("bottom_T") == "flux";
  if (within) heat_within(c.model);
  if (flux) c.model.walls.inner.thermal = FixedHeatFlux{within ? 0.0 : 1.0};
  if (within && !flux) c.model.walls.inner.thermal = FixedTemperature{0};
  c.rayleigh = row.number("Ra_c");
  c.critical = true;
  c.name = "plane " + row.text("heating") + " " + row.text("bottom_T") + " " +
           row.text("bottom_bc") + " " + row.text("top_bc");
  return c;
}

OnsetCase case_of(const std::string& table, const ReferenceRow& row) {
  if (table == "plane") return plane_case(row);
  if (table == "expvisc") return viscosity_case(row);
  if (table == "sphere_gr") return central_gravity_case(row);
  const std::size_t cut = table.find('_');
  const std::string geometry = table.substr(0, cut);
  return shell_case(row, geometry, table.substr(cut + 1), geometry == "sphere" ? "l" : "m");
}

}  // namespace

void PrintTo(const OnsetCase& c, std::ostream* out) { *out << c.name << " mode " << c.number; }

std::vector<OnsetCase> onset_cases(const std::string& table) {
  std::vector<OnsetCase> cases;
  for (const ReferenceRow& row : reference_table("onset_" + table + ".csv"))
    cases.push_back(case_of(table, row));
  return cases;
}

Extrapolated::Extrapolated(const Model& model, int radial_cells) {
  for (const int cells : {radial_cells / 4, radial_cells / 2, radial_cells})
    grids_.emplace_back(model, cells);
}

double Extrapolated::operator()(int number) {
  std::vector<double> values;
  for (NeutralModes& grid : grids_) {
    const auto shape = grid(number);
    if (!shape) throw std::runtime_error("no neutral Rayleigh number");
    values.push_back(shape->rayleigh);
  }
  return error_bar(values, 1e-9 * values.back()).value;
}

}  // namespace lidwright
