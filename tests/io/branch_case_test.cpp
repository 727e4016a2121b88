#include "io/branch_case.hpp"

#include <fmt/format.h>
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <variant>

#include "tests/io/scratch.hpp"

namespace lidwright {
namespace {

using testing::AllOf;
using testing::HasSubstr;

const std::string annulus = R"(
[numbers]
rayleigh = 1e4
[shell]
geometry = "annulus"
radius_ratio = {ratio}
[grid]
radial = 16
lateral = 32
[walls.inner]
temperature = 1
[walls.outer]
temperature = 0
)";

const std::string body = R"(
[body]
radius = 3000
core_radius = 1500
gravity = 9
density = 3500
expansivity = 2e-5
conductivity = 4
heat_capacity = 1200
surface_temperature = 250
temperature_drop = 1500
reference_viscosity = {viscosity}
[shell]
geometry = "annulus"
[grid]
radial = 16
lateral = 32
[walls.inner]
temperature = {inner}
[walls.outer]
temperature = 250
)";

/// As a folder keeps it.
std::string kept(const std::string& text) { return write_case(parse_case(text, "case.toml")); }

std::string with_body(double viscosity, double inner) {
  return fmt::format(fmt::runtime(body), fmt::arg("viscosity", viscosity),
                     fmt::arg("inner", inner));
}

TEST(BranchCase, HasTheShellOfItsState) {
  const auto with = [](double ratio) {
    return kept(fmt::format(fmt::runtime(annulus), fmt::arg("ratio", ratio)));
  };
  EXPECT_EQ(write_case(case_along(with(0.5), "kept.toml", "shell.radius_ratio", 0.8)), with(0.8));
}

TEST(BranchCase, TakesTheValueInTheUnitsOfTheBody) {
  const Case c =
      case_along(kept(with_body(1e21, 1750)), "kept.toml", "walls.inner.temperature", 2050);
  EXPECT_DOUBLE_EQ(std::get<FixedTemperature>(c.model.walls.inner.thermal).value, 1.2);
}

TEST(BranchCase, HasTheBodyOfItsStateWhereTheRestStays) {
  const Case c =
      case_along(kept(with_body(1e21, 1750)), "kept.toml", "body.reference_viscosity", 1e22);
  EXPECT_EQ(c.body->reference_viscosity, 1e22);
  EXPECT_EQ(std::get<FixedTemperature>(c.model.walls.inner.thermal).value, 1);
}

TEST(BranchCase, IsRefusedWhereTheFirstDoesNotTell) {
  for (const char* key : {"body.temperature_drop", "body.radius"})
    EXPECT_THAT(test::message_of<InputError>(
                    [&] { case_along(kept(with_body(1e21, 1750)), "kept.toml", key, 2000); }),
                AllOf(HasSubstr("kept.toml"), HasSubstr(key), HasSubstr("--set")));
}

}  // namespace
}  // namespace lidwright
