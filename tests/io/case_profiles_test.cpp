#include <gtest/gtest.h>

#include <cmath>
#include <random>

#include "io/case_file.hpp"
#include "tests/io/bad_case.hpp"
#include "tests/io/same_case.hpp"
#include "tests/io/scratch.hpp"

/// Compressible mantles in a case: what is read and written back.
namespace lidwright {
namespace {

using test::expect_round_trip;
using test::good_body;
using test::good_case;
using test::liquid;
using test::Scratch;
using test::Settings;

Case read_good(const Settings& settings) { return parse_case(good_case, "c.toml", settings); }

TEST(CaseProfiles, BoussinesqByDefault) {
  const ReferenceProfiles profiles = read_good({}).model.reference;
  EXPECT_EQ(profiles.dissipation_number, 0);
  EXPECT_EQ(profiles.surface_temperature, 0);
  for (const RadialProfile* p : {&profiles.density, &profiles.expansivity, &profiles.gravity,
                                 &profiles.conductivity, &profiles.heat_capacity})
    EXPECT_TRUE(p->constant());
}

TEST(CaseProfiles, ExtendedBoussinesqHasUniformDensity) {
  const ReferenceProfiles profiles =
      read_good({"reference.approximation=extended-boussinesq", "numbers.dissipation=0.25",
                 "numbers.surface_temperature=0.1"})
          .model.reference;
  EXPECT_EQ(profiles.dissipation_number, 0.25);
  EXPECT_EQ(profiles.surface_temperature, 0.1);
  EXPECT_TRUE(profiles.density.constant());
}

TEST(CaseProfiles, DensityFromGruneisenOrRise) {
  const auto rise = [](const char* setting) {
    return read_good(liquid({setting})).model.reference.density.rise;
  };
  EXPECT_DOUBLE_EQ(rise("reference.gruneisen=1.25"), std::exp(0.4));  // Di/Gamma = 0.5/1.25
  EXPECT_EQ(rise("reference.density_rise=1.5"), 1.5);
}

TEST(CaseProfiles, RisesAndPowerOfTheOthers) {
  const ReferenceProfiles profiles =
      read_good({"reference.expansivity_rise=0.25", "reference.gravity_rise=1.1",
                 "reference.gravity_power=-2", "reference.conductivity_rise=2",
                 "reference.heat_capacity_rise=1.05"})
          .model.reference;
  EXPECT_DOUBLE_EQ(profiles.expansivity(0.5, 2), 0.5);  // 0.25^0.5
  EXPECT_DOUBLE_EQ(profiles.gravity(1, 2), 1.1 * 4);    // (1/2)^-2
  EXPECT_EQ(profiles.conductivity(1, 2), 2);
  EXPECT_EQ(profiles.heat_capacity(1, 2), 1.05);
  EXPECT_EQ(profiles.dissipation_number, 0);
}

TEST(CaseProfiles, LevelsByHand) {
  const ReferenceProfiles profiles =
      read_good({"reference.levels=[{depth=0,expansivity=1},{depth=0.5,expansivity=0.5},"
                 "{depth=1,expansivity=0.25}]"})
          .model.reference;
  EXPECT_EQ(profiles.expansivity(0.75, 2), 0.375);
  EXPECT_TRUE(profiles.gravity.constant());
}

// d = 1000 km: Di = 3e-5 * 4 * 1e6/1000 = 0.12, surface 200 K of a drop of 1000 K.
TEST(CaseProfiles, DissipationOfABody) {
  const Case made = parse_case(
      good_body, "b.toml", {"reference.approximation=anelastic-liquid", "reference.gruneisen=1.2"});
  EXPECT_DOUBLE_EQ(made.model.reference.dissipation_number, 0.12);
  EXPECT_EQ(made.model.reference.surface_temperature, 0.2);
  EXPECT_DOUBLE_EQ(made.model.reference.density.rise, std::exp(0.1));  // 0.12/1.2
  expect_round_trip(made);
}

TEST(CaseProfiles, SurfaceTemperatureIsSaidOnce) {
  const auto offset = [](const Settings& settings) {
    const Case made = read_good(settings);
    expect_round_trip(made);
    return made.model.viscosity.arrhenius->offset;
  };
  const char* energy = "viscosity.arrhenius.activation_energy=5";
  EXPECT_EQ(offset(liquid({energy, "reference.density_rise=2"})), 0.1);
  EXPECT_EQ(offset({energy, "numbers.surface_temperature=0.3"}), 0.3);
  EXPECT_EQ(offset({energy, "viscosity.arrhenius.surface_temperature=0.3"}), 0.3);
  EXPECT_EQ(offset(liquid({energy, "reference.density_rise=2",
                           "viscosity.arrhenius.surface_temperature=0.1"})),
            0.1);
}

// --- a table beside the case ---

constexpr const char* table_of_body =
    "\xEF\xBB\xBF# density from outside inwards\r\n"
    "gravity [m/s^2] , depth [km],density[kg/m^3],heat_capacity [J/kg/K]\r\n"
    "4,0,3000,1000\r\n"
    "\r\n"
    "  5 , 250 , 3600 , 1e3   # a comment\r\n"
    "6,1000,4500,1100";

const Settings with_table = {"reference.approximation=anelastic-liquid",
                             "reference.table=profile.csv"};

TEST(CaseProfiles, TableOfABody) {
  const Scratch folder;
  test::write_text(folder / "profile.csv", table_of_body);
  const Case made = parse_case(good_body, folder / "b.toml", with_table);
  const ReferenceProfiles& profiles = made.model.reference;
  EXPECT_EQ(profiles.density.depths, (std::vector<double>{0, 0.25, 1}));
  EXPECT_EQ(profiles.density.values, (std::vector<double>{1, 1.2, 1.5}));
  EXPECT_EQ(profiles.gravity.values, (std::vector<double>{1, 1.25, 1.5}));
  EXPECT_EQ(profiles.heat_capacity.values, (std::vector<double>{1, 1, 1.1}));
  EXPECT_TRUE(profiles.expansivity.constant());
  expect_round_trip(made);
}

TEST(CaseProfiles, DimensionlessTableInAnotherFolder) {
  const Scratch folder;
  std::filesystem::create_directory(folder / "tables");
  test::write_text(folder / "tables/p.csv", "depth [d],conductivity [1]\n0,1\n1,2.5\n");
  const Case made = parse_case(good_case, folder / "c.toml", {"reference.table=tables/p.csv"});
  EXPECT_EQ(made.model.reference.conductivity(0.5, 2), 1.75);
  const Case absolute =
      parse_case(good_case, "c.toml", {"reference.table=" + (folder / "tables/p.csv")});
  test::expect_same(made, absolute);
}

TEST(CaseProfiles, StoredCaseNeedsNoTable) {
  std::string written;
  Case made;
  {
    const Scratch folder;
    test::write_text(folder / "profile.csv", table_of_body);
    made = parse_case(good_body, folder / "b.toml", with_table);
    written = write_case(made);
  }
  EXPECT_NE(written.find("{ depth = 0.25, density = 1.2, gravity = 1.25"), std::string::npos)
      << written;
  test::expect_same(made, parse_case(written, "elsewhere/case.toml"));
}

TEST(CaseProfiles, RoundTripOfAnyNumbers) {
  std::mt19937_64 random(7);
  std::uniform_real_distribution<double> share(0, 1);
  const auto any = [&] { return std::to_string(1e-3 + share(random)); };
  for (int n = 0; n < 100; ++n) {
    expect_round_trip(read_good(
        {"reference.approximation=anelastic-liquid", "numbers.surface_temperature=" + any(),
         "numbers.dissipation=" + any(), "reference.gruneisen=1" + any().substr(1),
         "reference.gravity_power=-" + any(), "reference.expansivity_rise=" + any()}));
    const std::string gravity = ",gravity=" + any() + ",density=" + any();
    expect_round_trip(parse_case(
        good_body, "b.toml",
        {"reference.approximation=anelastic-liquid", "body.gravity=" + any(),
         "body.radius=" + std::to_string(1500 + 500 * share(random)), "body.core_radius=500",
         "shell.geometry=box", "body.density=" + any(), "reference.conductivity_rise=" + any(),
         "reference.levels=[{depth=0" + gravity + "},{depth=" + any() + gravity + "},{depth=1e3" +
             gravity + "}]",
         "body.radius=1500"}));
  }
}

TEST(CaseProfiles, LongestTableMakesACaseThatCanBeRead) {
  const Scratch folder;
  std::string table =
      "depth [d],density [1],expansivity [1],gravity [1],conductivity [1],"
      "heat_capacity [1]\n";
  for (int k = 0; k < 2000; ++k) {
    table += std::to_string(k / 1999.0);
    for (int c = 0; c < 5; ++c) table += "," + std::to_string(1 + k / 3e8) + "123456789";
    table += "\n";
  }
  test::write_text(folder / "p.csv", table);
  expect_round_trip(parse_case(good_case, folder / "c.toml", liquid({"reference.table=p.csv"})));
}

}  // namespace
}  // namespace lidwright
