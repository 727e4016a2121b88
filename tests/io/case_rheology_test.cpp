#include <gtest/gtest.h>

#include <fstream>
#include <limits>
#include <string>
#include <vector>

#include "io/case_file.hpp"
#include "io/linear_rules.hpp"
#include "tests/io/bad_case.hpp"
#include "tests/io/same_case.hpp"

/// Case files with dislocation creep and yielding.
namespace lidwright {
namespace {

using test::expect_all;
using test::expect_message;
using test::expect_round_trip;
using test::good_body;
using test::good_case;
using test::message_of;
using test::Settings;

constexpr double infinity = std::numeric_limits<double>::infinity();

const std::string creep = "[viscosity.dislocation]\nreference_stress = 300\n";   // from line 16
const std::string yield = "[viscosity.yielding]\nfloor = 1e-6\ncohesion = 5\n";  // from line 16

Case with(const std::string& tables, const Settings& settings = {}) {
  return parse_case(good_case + tables, "c.toml", settings);
}

constexpr const char* all_of_a_body = R"([viscosity]
lowest = 1e17
highest = 1e25
[viscosity.dislocation]
exponent = 3
reference_stress = 0.5
constant = 7
layers = [{ below = 400, factor = 20 }]
[viscosity.dislocation.exponential]
thermal_contrast = 10
unity_at = 700
[viscosity.dislocation.arrhenius]
activation_energy = 5e5
activation_volume = 1e-5
unity_at = 1200
unity_at_depth = 250
[viscosity.yielding]
law = "harmonic-mean"
cohesion = 20
friction = 0.2
ceiling = 150
floor = 1e18
)";

TEST(CaseRheology, WithoutTheTablesItIsLinear) {
  EXPECT_FALSE(with("").model.nonlinear());
  const Case made = with("", {"flow.most_newton_steps=7"});
  EXPECT_EQ(made.flow.most_newton_steps, 7);
  EXPECT_EQ(with("").flow.most_newton_steps, FlowSettings{}.most_newton_steps);
  expect_round_trip(made);
}

TEST(CaseRheology, DislocationCreepAndItsDefaults) {
  const DislocationCreep made = *with(creep).model.dislocation;
  EXPECT_EQ(made.reference_stress, 300);
  EXPECT_EQ(made.exponent, DislocationCreep{}.exponent);
  EXPECT_FALSE(made.alone);
  test::expect_same(made.viscosity, ViscosityLaw{});
}

TEST(CaseRheology, DislocationCreepHasFactorsOfItsOwn) {
  const Model made =
      with(creep, {"viscosity.constant=3", "viscosity.exponential.thermal_contrast=100",
                   "viscosity.dislocation.exponent=2.5", "viscosity.dislocation.constant=0.5",
                   "viscosity.dislocation.exponential.thermal_contrast=1e4",
                   "viscosity.dislocation.exponential.depth_contrast=8",
                   "viscosity.dislocation.exponential.unity_at=0.25",
                   "viscosity.dislocation.layers=[{below=0.5,factor=30}]"})
          .model;
  EXPECT_EQ(made.viscosity.constant, 3);
  EXPECT_EQ(made.viscosity.exponential->thermal_contrast, 100);
  EXPECT_TRUE(made.viscosity.layered.layers.empty());
  const ViscosityLaw& law = made.dislocation->viscosity;
  EXPECT_EQ(made.dislocation->exponent, 2.5);
  EXPECT_EQ(law.constant, 0.5);
  EXPECT_EQ(law.exponential->thermal_contrast, 1e4);
  EXPECT_EQ(law.exponential->depth_contrast, 8);
  EXPECT_EQ(law.exponential->unity_at, 0.25);
  EXPECT_EQ(law.layered.layers.at(0).below, 0.5);
  EXPECT_EQ(law.layered.layers.at(0).factor, 30);
  EXPECT_FALSE(law.arrhenius);
}

TEST(CaseRheology, ATableIsThereIfOneOfItsOwnIs) {
  const std::string key = "viscosity.dislocation.exponential.thermal_contrast=10";
  EXPECT_TRUE(message_of(good_case, {key})
                  .starts_with("--set 1: viscosity.dislocation.reference_stress is missing"));
  EXPECT_TRUE(with("", {key, "viscosity.dislocation.reference_stress=2"}).model.dislocation);
}

TEST(CaseRheology, OneSurfaceTemperatureServesBothCreeps) {
  const std::string energy = "viscosity.dislocation.arrhenius.activation_energy=9";
  const Case alone = with(creep, {energy, "numbers.surface_temperature=0.3"});
  EXPECT_EQ(alone.model.dislocation->viscosity.arrhenius->offset, 0.3);
  EXPECT_EQ(alone.model.dislocation->viscosity.arrhenius->energy, 9);
  EXPECT_EQ(alone.model.reference.surface_temperature, 0);  // no compression
  expect_round_trip(alone);
  const Case both = with(creep, {energy, "viscosity.arrhenius.activation_energy=4",
                                 "viscosity.arrhenius.surface_temperature=0.4"});
  EXPECT_EQ(both.model.viscosity.arrhenius->offset, 0.4);
  EXPECT_EQ(both.model.dislocation->viscosity.arrhenius->offset, 0.4);
  expect_round_trip(both);
}

TEST(CaseRheology, YieldingAndItsDefaults) {
  const Yielding plain =
      *with("[viscosity.yielding]\ncohesion = 5\n", {"viscosity.lowest=1e-6"}).model.yielding;
  EXPECT_EQ(plain.law, YieldingLaw::Minimum);
  EXPECT_EQ(plain.cohesion, 5);
  EXPECT_EQ(plain.friction, 0);
  EXPECT_EQ(plain.lithostatic, 0);
  EXPECT_EQ(plain.ceiling, infinity);
  EXPECT_EQ(plain.floor, 0);
  const Yielding full =
      *with(yield, {"viscosity.yielding.law=harmonic-mean", "viscosity.yielding.friction=0.6",
                    "viscosity.yielding.lithostatic=1e8", "viscosity.yielding.ceiling=3e5",
                    "viscosity.yielding.floor=1e-5"})
           .model.yielding;
  EXPECT_EQ(full.law, YieldingLaw::HarmonicMean);
  EXPECT_EQ(full.friction, 0.6);
  EXPECT_EQ(full.lithostatic, 1e8);
  EXPECT_EQ(full.ceiling, 3e5);
  EXPECT_EQ(full.floor, 1e-5);
}

// d = 1e6 m and kappa = 1e-6 m^2/s, so that the unit of stress is 1e20 * 1e-6/1e12 = 100 Pa.
TEST(CaseRheology, BodyIsMadeDimensionless) {
  const Model model = parse_case(std::string(good_body) + all_of_a_body, "c.toml").model;
  const auto near = [](double value, double expected) { EXPECT_NEAR(value / expected, 1, 1e-14); };
  near(model.dislocation->reference_stress, 5000);  // 5e5/100
  const ViscosityLaw& law = model.dislocation->viscosity;
  EXPECT_EQ(law.constant, 7);
  near(law.layered.layers.at(0).below, 0.4);  // 400/1000
  near(law.exponential->unity_at, 0.5);       // (700 - 200)/1000
  near(law.arrhenius->energy, 5e5 / 8314.46261815324);
  near(law.arrhenius->volume, 120000 / 8314.46261815324);  // 1e-5 * 3000 * 4 * 1e6/(R DeltaT)
  near(law.arrhenius->offset, 0.2);                        // 200/1000
  near(law.arrhenius->unity_at, 1);                        // (1200 - 200)/1000
  near(law.arrhenius->unity_at_depth, 0.25);
  near(model.yielding->cohesion, 2e5);   // 2e7/100
  near(model.yielding->ceiling, 1.5e6);  // 1.5e8/100
  near(model.yielding->floor, 0.01);     // 1e18/1e20
  EXPECT_EQ(model.yielding->friction, 0.2);
  // rho g d = 3000 * 4 * 1e6 = 1.2e10 Pa; and Ra/(alpha DeltaT) = 3.6e6/0.03
  near(model.yielding->lithostatic, 1.2e8);
  near(model.yielding->lithostatic, model.rayleigh / 0.03);
}

TEST(CaseRheology, RoundTripOfABody) {
  const Case made = parse_case(std::string(good_body) + all_of_a_body, "c.toml");
  const std::string written = write_case(made);
  for (const char* words : {"[body_used]", "reference_stress = 5000", "MPa", "lithostatic = "})
    EXPECT_NE(written.find(words), std::string::npos) << words;
  expect_round_trip(made);
}

TEST(CaseRheology, RoundTripOfNumbers) {
  expect_round_trip(with(creep));
  expect_round_trip(with(yield));
  expect_round_trip(with(
      creep + yield,
      {"viscosity.lowest=1e-4", "viscosity.highest=1e7",
       "viscosity.exponential.thermal_contrast=1e6", "viscosity.dislocation.exponent=3.1",
       "viscosity.dislocation.constant=3", "viscosity.dislocation.exponential.thermal_contrast=1e5",
       "viscosity.dislocation.arrhenius.activation_energy=7",
       "viscosity.dislocation.layers=[{below=0.1,factor=2}]", "numbers.surface_temperature=0.1",
       "viscosity.yielding.law=harmonic-mean", "viscosity.yielding.friction=0.1",
       "viscosity.yielding.lithostatic=3e7", "viscosity.yielding.ceiling=1e5",
       "viscosity.yielding.floor=1e-3"}));
}

// The keys of diffusion creep do not apply then, and must not be written.
TEST(CaseRheology, RoundTripOfAPowerLawAlone) {
  const Case made = with(creep, {"viscosity.dislocation.alone=true", "viscosity.highest=1e6"});
  EXPECT_TRUE(made.model.dislocation->alone);
  EXPECT_EQ(write_case(made).find("[viscosity]\nconstant"), std::string::npos);
  expect_round_trip(made);
}

/// The TOML blocks of docs/rheology.md.
std::vector<std::string> fragments_of_the_page() {
  std::ifstream page(LIDWRIGHT_SOURCE_DIR "/docs/rheology.md");
  std::vector<std::string> fragments;
  bool inside = false;
  for (std::string line; std::getline(page, line);) {
    if (line.starts_with("```")) {
      inside = !inside;
      if (inside) fragments.emplace_back();
    } else if (inside) {
      fragments.back() += line + '\n';
    }
  }
  return fragments;
}

TEST(CaseRheology, FragmentsOfItsPageAreGoodCases) {
  const std::vector<std::string> fragments = fragments_of_the_page();
  EXPECT_GE(fragments.size(), 6U);
  for (const std::string& fragment : fragments) {
    const bool si = fragment.find("# MPa") != std::string::npos;
    EXPECT_EQ(message_of((si ? good_body : good_case) + fragment), "accepted") << fragment;
  }
}

/// A case with one table more, whose lines count from 16, and settings.
struct Wrong {
  std::string table;
  Settings settings;
  std::string place, words;
};

void expect_all_wrong(const std::vector<Wrong>& table) {
  for (const Wrong& w : table)
    expect_message(message_of(good_case + w.table, w.settings), w.place, w.words);
}

TEST(BadRheology, ValuesOfDislocationCreep) {
  expect_all(
      std::string(good_case) + creep,
      {
          {"= 300", "= 0", "c.toml:17:1", "reference_stress = 0: must be greater than 0"},
          {"= 300", "= -3", "c.toml:17:1", "must be greater than 0 eta_ref kappa/d^2"},
          {"= 300", "= nan", "c.toml:17:1", "must be a finite number"},
          {"= 300", "= inf", "c.toml:17:1", "must be a finite number"},
          {"= 300", "= \"much\"", "c.toml:17:1", "must be a number"},
          {"reference_stress = 300\n", "", "c.toml:16:12",
           "viscosity.dislocation.reference_stress is missing and has no default"},
          {"reference_stress", "reference_strain", "c.toml:17:1",
           "did you mean 'reference_stress'"},
          {"[viscosity.dislocation]", "[viscosity.dislocations]", "c.toml:16:12",
           "did you mean 'dislocation'"},
          {"", "exponent = 0.9\n", "c.toml:18:1", "at least 1 and at most 50"},
          {"", "exponent = 51\n", "c.toml:18:1", "at least 1 and at most 50"},
          {"", "exponent = nan\n", "c.toml:18:1", "must be a finite number"},
          {"", "exponent = true\n", "c.toml:18:1", "must be a number"},
          {"", "alone = 1\n", "c.toml:18:1", "must be true or false"},
          {"", "constant = 0\n", "c.toml:18:1", "greater than 0"},
          {"", "layers = [{ below = 0.4, factor = 0 }]\n", "c.toml:18:26", "greater than 0"},
          {"", "layers = [{ below = 0.4 }]\n", "c.toml:18:11",
           "viscosity.dislocation.layers[1].factor is missing"},
          {"", "[viscosity.dislocation.exponential]\nthermal_contrast = 0\n", "c.toml:19:1",
           "greater than 0"},
          {"", "[viscosity.dislocation.arrhenius]\nunity_at = 1\n", "c.toml:18:24",
           "viscosity.dislocation.arrhenius.activation_energy is missing"},
          {"", "[viscosity.dislocation.arrhenius]\nactivation_energy = -1\n", "c.toml:19:1",
           "at least 0"},
          {"", "[viscosity.dislocation.arrhenius]\nsurface_temperature = 0.1\n", "c.toml:19:1",
           "unknown key viscosity.dislocation.arrhenius.surface_temperature (did you mean "},
          {"", "[flow]\nmost_newton_steps = 0\n", "c.toml:19:1", "at least 1"},
          {"", "[flow]\nmost_newton_steps = 2.5\n", "c.toml:19:1", "must be a whole number"},
      });
}

TEST(BadRheology, ValuesOfYielding) {
  expect_all(std::string(good_case) + yield,
             {
                 {"= 5", "= -5", "c.toml:18:1", "cohesion = -5: must be at least 0"},
                 {"= 5", "= nan", "c.toml:18:1", "must be a finite number"},
                 {"= 5", "= [5]", "c.toml:18:1", "must be a number"},
                 {"", "friction = -0.1\n", "c.toml:19:1", "at least 0"},
                 {"", "friction = inf\n", "c.toml:19:1", "must be a finite number"},
                 {"", "lithostatic = -1\n", "c.toml:19:1", "at least 0"},
                 {"", "ceiling = 0\n", "c.toml:19:1", "greater than 0"},
                 {"", "ceiling = inf\n", "c.toml:19:1", "must be a finite number"},
                 {"= 1e-6", "= -1", "c.toml:17:1", "floor = -1: must be at least 0"},
                 {"", "law = \"minimal\"\n", "c.toml:19:1", "did you mean 'minimum'"},
                 {"", "law = 2\n", "c.toml:19:1", "\"minimum\", \"harmonic-mean\""},
                 {"", "cohesoin = 3\n", "c.toml:19:1", "did you mean 'cohesion'"},
             });
}

TEST(BadRheology, APowerLawAlone) {
  const std::string alone = creep + "alone = true\n";
  expect_all_wrong({
      {alone, {}, "c.toml:18:1", "infinitely stiff at rest; give viscosity.highest"},
      {alone, {"viscosity.constant=3"}, "--set 1", "applies only with diffusion creep"},
      {alone, {"viscosity.layers=[{below=0.1,factor=2}]"}, "--set 1", "with diffusion creep"},
      {alone + "[viscosity.exponential]\n",
       {"viscosity.highest=9"},
       "c.toml:19:12",
       "[viscosity.exponential] is of diffusion creep"},
      {alone + "[viscosity.arrhenius]\nactivation_energy = 2\nsurface_temperature = 1\n",
       {"viscosity.highest=9"},
       "c.toml:19:12",
       "make it [viscosity.dislocation.arrhenius]"},
  });
  // A linear law is not stiff at rest.
  EXPECT_EQ(message_of(good_case + alone, {"viscosity.dislocation.exponent=1"}), "accepted");
}

TEST(BadRheology, DislocationCreepAgainstTheRest) {
  const std::string energy = "[viscosity.dislocation.arrhenius]\nactivation_energy = 2\n";
  expect_all_wrong({
      {creep + energy, {}, "c.toml:18:24", "numbers.surface_temperature is missing"},
      {creep + energy,
       {"numbers.surface_temperature=0"},
       "--set 1",
       "greater than 0 with [viscosity.dislocation.arrhenius]"},
      {creep + energy + "unity_at = -0.5\n",
       {"numbers.surface_temperature=0.5"},
       "c.toml:20:1",
       "viscosity.dislocation.arrhenius.unity_at: must be above absolute zero"},
      {creep + energy,
       {"numbers.surface_temperature=0.5", "walls.outer.temperature=-0.5"},
       "--set 2",
       "must be above absolute zero"},
      {creep + "layers = [{ below = 0.4, factor = 2 }, { below = 0.3, factor = 2 }]\n",
       {},
       "c.toml:18:42",
       "sort the layers by depth"},
      {creep, {"numbers.surface_temperature=0.5"}, "--set 1", "applies only with [numbers], and"},
  });
}

TEST(BadRheology, YieldingWithoutStrength) {
  const std::string empty = "[viscosity.yielding]\n";
  const Settings loose = {"viscosity.yielding.friction=0.2", "viscosity.yielding.lithostatic=1e7"};
  expect_all_wrong({
      {empty, {}, "c.toml:16:12", "both 0, so that the rock has no strength at all"},
      {yield, {"viscosity.yielding.floor=0"}, "c.toml:16:12", "nothing bounds the velocity"},
      {empty, loose, "c.toml:16:12", "nothing bounds the velocity"},
      {yield + "friction = 0.2\n",
       {},
       "c.toml:19:1",
       "viscosity.yielding.friction = 0.2: needs viscosity.yielding.lithostatic"},
      {yield + "friction = 0.2\nlithostatic = 0\n", {}, "c.toml:20:1", "must be greater than 0"},
  });
  for (const char* remedy : {"viscosity.yielding.floor=1e-3", "viscosity.lowest=1e-3"})
    EXPECT_EQ(message_of(good_case + empty, {loose[0], loose[1], remedy}), "accepted") << remedy;
}

TEST(BadRheology, WithABody) {
  const std::string tables =
      "[viscosity.yielding]\nfloor = 1e15\ncohesion = 5\nfriction = 0.1\n";  // from line 21
  expect_all(std::string(good_body) + tables,
             {
                 {"= 5", "= -5", "c.toml:23:1", "at least 0 MPa"},
                 {"", "lithostatic = 1e8\n", "c.toml:25:1", "with [body] it follows from the body"},
                 {"", "ceiling = 0\n", "c.toml:25:1", "greater than 0 MPa"},
                 {"", "[viscosity.dislocation]\nreference_stress = 0\n", "c.toml:26:1",
                  "greater than 0 MPa"},
             });
}

std::string complaint(const Model& model, Linearised what) {
  try {
    refuse_nonlinear(model, what, "c.toml");
  } catch (const InputError& error) {
    return error.what();
  }
  return "accepted";
}

TEST(BadRheology, WhatIsLinearised) {
  using enum Linearised;
  EXPECT_EQ(complaint(with("").model, SteadyState), "accepted");
  EXPECT_EQ(complaint(with("").model, Onset), "accepted");
  const Model power = with(creep).model, yields = with(yield).model;
  const Model alone =
      with(creep, {"viscosity.dislocation.alone=true", "viscosity.highest=9"}).model;
  const Model doubled = with(yield, {"viscosity.yielding.law=harmonic-mean"}).model;
  const auto expect = [](const Model& m, Linearised what, const char* words) {
    expect_message(complaint(m, what), "c.toml", words);
  };
  expect(power, SteadyState,
         "[viscosity.dislocation]: the viscosity depends on the rate of strain");
  expect(power, SteadyState, "march it instead");
  expect(yields, SteadyState, "[viscosity.yielding]: the viscosity depends on the rate of strain");
  expect(power, Onset, "that of diffusion creep: remove the table");
  expect(alone, Onset, "a power law has no linear onset");
  expect(alone, Onset, "viscosity.dislocation.alone = false");
  expect(yields, Onset, "the onset is that of the creep: remove the table");
  expect(doubled, Onset, "twice its viscosity");
}

}  // namespace
}  // namespace lidwright
