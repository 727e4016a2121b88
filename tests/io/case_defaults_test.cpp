#include <gtest/gtest.h>

#include <algorithm>

#include "io/case_file.hpp"
#include "tests/io/scratch.hpp"

namespace lidwright {
namespace {

constexpr const char* body_case = R"(
[body]
radius = 2000
core_radius = 1000
gravity = 4
density = 3000
expansivity = 3e-5
conductivity = 3
heat_capacity = 1000
surface_temperature = 200
temperature_drop = 1000
reference_viscosity = 1e20
[shell]
geometry = "annulus"
[grid]
radial = 8
lateral = 32
[walls.inner]
temperature = 1200
[walls.outer]
insulating = true
)";

class DefaultsTaken : public testing::Test {
 protected:
  void SetUp() override { test::write_text(file_, body_case); }
  const lidwright::DefaultTaken* find(const std::string& table, const std::string& name,
                                      const std::vector<std::string>& settings = {}) {
    taken_ = defaults_taken(file_, settings);
    const auto found = std::find_if(taken_.begin(), taken_.end(), [&](const auto& d) {
      return d.table == table && d.name == name;
    });
    return found == taken_.end() ? nullptr : &*found;
  }
  test::Scratch scratch_;
  std::string file_ = scratch_ / "c.toml";
  std::vector<lidwright::DefaultTaken> taken_;
};

TEST_F(DefaultsTaken, InTheUnitsOfTheFile) {
  // 0.01 d^2/kappa, d = 1e6 m, kappa = 1e-6 m^2/s: 1e16 s over 3.15576e13 s a million years.
  const auto* step = find("transport", "largest_step");
  ASSERT_TRUE(step);
  EXPECT_NEAR(std::stod(step->value), 316.8808781402895, 1e-9);
  EXPECT_EQ(step->unit, "Myr");
}

TEST_F(DefaultsTaken, NotWhatFileOrCommandLineSay) {
  EXPECT_FALSE(find("grid", "radial"));
  EXPECT_TRUE(find("transport", "courant"));
  EXPECT_FALSE(find("transport", "courant", {"transport.courant=0.5"}));
}

TEST_F(DefaultsTaken, NotOneOfSeveralKeysThatMustBeGiven) {
  EXPECT_FALSE(find("walls.outer", "temperature"));
  EXPECT_FALSE(find("walls.outer", "heat_flux"));
  ASSERT_TRUE(find("walls.outer", "flow"));
  EXPECT_EQ(find("walls.outer", "flow")->value, "\"free-slip\"");
}

TEST_F(DefaultsTaken, OnlyWhatApplies) {
  EXPECT_FALSE(find("shell", "width"));  // of a box
  EXPECT_FALSE(find("viscosity.exponential", "unity_at"));
  EXPECT_TRUE(
      find("viscosity.exponential", "unity_at", {"viscosity.exponential.thermal_contrast=10"}));
  ASSERT_TRUE(find("shell", "extent"));
  EXPECT_EQ(find("shell", "extent")->value, "\"full-circle\"");
  EXPECT_EQ(find("viscosity", "highest")->value, "no cut-off");
}

TEST_F(DefaultsTaken, RefusesAsReadCaseDoes) {
  EXPECT_THROW(defaults_taken(file_, {"grid.radial=1"}), InputError);
  EXPECT_THROW(defaults_taken(scratch_ / "none.toml"), InputError);
}

}  // namespace
}  // namespace lidwright
