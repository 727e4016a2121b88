#include "tests/support/exact_flow.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <map>
#include <numbers>

#include "tests/support/reference_table.hpp"

/// The analytic flows that the solver is measured against, themselves against the tables (computed
/// with 40 to 50 digits by an independent closed form).
namespace lidwright {
namespace {

using std::numbers::pi;

ShellForcing forcing_of(Shape shape, const ReferenceRow& row, const std::string& wave_column) {
  ShellForcing f;
  f.shape = shape;
  f.n = static_cast<int>(row.number(wave_column));
  f.k = std::stoi(row.text("forcing").substr(std::string("smooth_").size()));
  f.inner = row.text("inner_bc") == "F" ? Slip::Free : Slip::None;
  f.outer = row.text("outer_bc") == "F" ? Slip::Free : Slip::None;
  if (row.text("eta") != "1") {  // L:radius:viscosity
    const std::string layers = row.text("eta").substr(2);
    f.jump_at = std::stod(layers);
    f.outer_viscosity = std::stod(layers.substr(layers.find(':') + 1));
  }
  return f;
}

struct Worst {
  double velocity = 0, stress = 0;
};

/// Largest difference over the largest value of the same case.
void compare(Shape shape, const std::string& file, const std::string& wave_column) {
  std::map<std::string, std::vector<ReferenceRow>> cases;
  for (const ReferenceRow& row : reference_table(file))
    cases[row.text("forcing") + row.text(wave_column) + row.text("inner_bc") + row.text("eta")]
        .push_back(row);
  EXPECT_EQ(cases.size(), 36u);
  for (const auto& [name, rows] : cases) {
    const ExactShellFlow exact(forcing_of(shape, rows.front(), wave_column));
    Worst error, size;
    for (const ReferenceRow& row : rows) {
      const FlowProfile y = exact(row.number("r"));
      const auto widen = [&](double& worst, double& most, double value, const char* column) {
        worst = std::max(worst, std::abs(value - row.number(column)));
        most = std::max(most, std::abs(row.number(column)));
      };
      widen(error.velocity, size.velocity, y.normal_velocity, "U");
      widen(error.velocity, size.velocity, y.tangential_velocity, "V");
      widen(error.stress, size.stress, y.normal_stress, "S");
      widen(error.stress, size.stress, y.shear_stress, "T");
    }
    EXPECT_LT(error.velocity, 1e-12 * size.velocity) << file << " " << name;
    EXPECT_LT(error.stress, 1e-12 * size.stress) << file << " " << name;
  }
}

TEST(ExactShellFlow, AgreesWithTheTables) {
  compare(Shape::Annulus, "stokes_annulus.csv", "n");
  compare(Shape::SphericalAnnulus, "stokes_sphericalannulus.csv", "m");
  compare(Shape::AxisymmetricShell, "stokes_sphere_axisym.csv", "l");
}

/// Number behind `key=` in a semicolon list.
double named(const std::string& list, const std::string& key) {
  const std::size_t at = list.find(key + "=");
  return std::stod(list.substr(at + key.size() + 1));
}

TEST(ExactStepFlow, AgreesWithTheTable) {
  int rows = 0;
  for (const ReferenceRow& row : reference_table("stokes_box.csv")) {
    if (row.text("family") != "step_x") continue;
    const std::string& c = row.text("case");
    const int n = std::stoi(c.substr(c.find("sin(") + 4));
    const ExactStepFlow exact(n, named(c, "x_c"), named(c, "eta_right"));
    const double x = row.number("x"), z = row.number("z");
    const double up = std::cos(n * pi * z), side = std::sin(n * pi * z);
    const FlowProfile y = exact(x);
    EXPECT_NEAR(y.normal_velocity * up, row.number("u_x"), 1e-14) << c << " " << x << " " << z;
    EXPECT_NEAR(y.tangential_velocity * side, row.number("u_z"), 1e-14) << c;
    EXPECT_NEAR(y.normal_stress * up, row.number("sxx"), 1e-13) << c;
    EXPECT_NEAR(y.shear_stress * side, row.number("sxz"), 1e-13) << c;
    const double eta = x <= named(c, "x_c") ? 1 : named(c, "eta_right");
    EXPECT_NEAR(exact.along_stress(x, eta) * up, row.number("szz"), 1e-12) << c << " " << x;
    ++rows;
  }
  EXPECT_EQ(rows, 168);
}

TEST(ExactExponentialFlow, AgreesWithTheTable) {
  int rows = 0;
  for (const ReferenceRow& row : reference_table("stokes_box.csv")) {
    if (row.text("family") != "exp_z") continue;
    const std::string& c = row.text("case");
    const double vertical =
        c.find("sin(2 z)") != c.npos ? 2 : (c.find("sin(2 pi z)") != c.npos ? 2 * pi : pi);
    const double horizontal = c.find("cos(3 pi x)") != c.npos ? 3 * pi : pi;
    const ExactExponentialFlow exact(vertical, horizontal, named(c, "eta(1)/eta(0)"));
    const double x = row.number("x"), z = row.number("z");
    const double up = std::cos(horizontal * x), side = std::sin(horizontal * x);
    const FlowProfile y = exact(z);
    EXPECT_NEAR(y.tangential_velocity * side, row.number("u_x"), 1e-14)
        << c << " " << x << " " << z;
    EXPECT_NEAR(y.normal_velocity * up, row.number("u_z"), 1e-14) << c;
    EXPECT_NEAR(y.normal_stress * up, row.number("szz"), 1e-13) << c;
    EXPECT_NEAR(y.shear_stress * side, row.number("sxz"), 1e-13) << c;
    ++rows;
  }
  EXPECT_EQ(rows, 168);
}

}  // namespace
}  // namespace lidwright
