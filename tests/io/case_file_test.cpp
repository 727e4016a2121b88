#include "io/case_file.hpp"

#include <gtest/gtest.h>

#include <filesystem>
#include <fstream>
#include <limits>
#include <numbers>
#include <random>
#include <sstream>

#include "tests/io/same_case.hpp"

namespace lidwright {
namespace {

using std::numbers::pi;
using test::expect_round_trip;
using test::parts;

constexpr const char* small_case = R"(
[numbers]
rayleigh = 1e4
[shell]
geometry = "annulus"
radius_ratio = 0.5
[grid]
radial = 8
lateral = 32
[walls.inner]
temperature = 1
[walls.outer]
temperature = 0
)";

constexpr const char* small_body = R"(
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
geometry = "spherical-annulus"
[grid]
radial = 8
lateral = 32
[walls.inner]
heat_flux = 0.006
[walls.outer]
temperature = 200
[viscosity]
highest = 1e25
layers = [{ below = 400, factor = 30 }]
[viscosity.arrhenius]
activation_energy = 3e5
activation_volume = 2e-6
unity_at = 1200
unity_at_depth = 250
[heat]
uniform = 6e-9
[initial]
base = "boundary-layers"
interior = 900
layer_thickness = 50
noise = 5
[transport]
first_step = 0.01
[march]
end_time = 100
steady = 1e-3
)";

std::string contents(const std::string& path) {
  std::ifstream file(path);
  std::ostringstream text;
  text << file.rdbuf();
  return text.str();
}

TEST(CaseFile, DefaultsAreThoseOfTheStructs) {
  const Case made = parse_case(small_case, "small.toml");
  EXPECT_TRUE(parts(made.flow) == parts(FlowSettings{}));
  EXPECT_TRUE(parts(made.heat) == parts(HeatSettings{}));
  EXPECT_TRUE(parts(made.march) == parts(MarchSettings{}));
  EXPECT_TRUE(parts(made.settle) == parts(SettleSettings{}));
  EXPECT_TRUE(parts(made.output) == parts(OutputSettings{}));
  EXPECT_EQ(made.model.viscosity.highest, std::numeric_limits<double>::infinity());
  EXPECT_EQ(made.model.walls.inner.slip, Slip::Free);
  EXPECT_FALSE(made.body);
}

TEST(CaseFile, ShellFromRatioAndAngles) {
  const Shell circle = parse_case(small_case, "small.toml").model.shell;
  EXPECT_DOUBLE_EQ(circle.inner_radius, 1);  // 0.5/(1 - 0.5)
  EXPECT_EQ(circle.sides, Sides::Periodic);
  EXPECT_DOUBLE_EQ(circle.lateral_end, 2 * pi);
  const Shell sector = parse_case(small_case, "small.toml",
                                  {"shell.geometry=axisymmetric", "shell.extent=sector",
                                   "shell.from=30", "shell.opening=150"})
                           .model.shell;
  EXPECT_DOUBLE_EQ(sector.lateral_begin, pi / 6);
  EXPECT_EQ(sector.lateral_end, pi);  // exactly at the pole
  EXPECT_EQ(sector.sides, Sides::Reflecting);
  const Shell poles =
      parse_case(small_case, "small.toml", {"shell.geometry=axisymmetric"}).model.shell;
  EXPECT_EQ(poles.lateral_end, pi);
}

TEST(CaseFile, BoxOfGivenWidth) {
  const std::string text =
      "numbers.rayleigh = 1\nshell = { geometry = \"box\", width = 3, sides = \"periodic\" }\n"
      "grid = { radial = 4, lateral = 4 }\nwalls.inner.temperature = 1\n"
      "walls.outer = { temperature = 0, flow = \"no-slip\" }\n";
  const Model model = parse_case(text, "box.toml").model;
  EXPECT_EQ(model.shell.inner_radius, 0);
  EXPECT_EQ(model.shell.lateral_end, 3);
  EXPECT_EQ(model.shell.sides, Sides::Periodic);
  EXPECT_EQ(model.walls.outer.slip, Slip::None);
}

TEST(CaseFile, SettingsReplaceWhatTheFileSays) {
  const Case made =
      parse_case(small_case, "small.toml",
                 {"grid.radial=16", "title=two words", "march.end_time=0.25", "numbers.rayleigh=7",
                  "initial.modes=[{lateral=2, amplitude=0.5}]", "title=2024"});
  EXPECT_EQ(made.model.grid.radial, 16);
  EXPECT_EQ(made.title, "2024");
  EXPECT_EQ(made.march.end_time, 0.25);
  EXPECT_EQ(made.model.rayleigh, 7);
  ASSERT_EQ(made.initial.modes.size(), 1U);
  EXPECT_EQ(made.initial.modes[0].lateral, 2);
  EXPECT_EQ(made.initial.modes[0].radial, 1);  // its default
}

TEST(CaseFile, StartOfAnotherRunIsFoundFromTheCaseFile) {
  const Case made = parse_case(small_case, "/runs/cases/a.toml", {"initial.from=../old"});
  EXPECT_EQ(made.initial.from, "/runs/old");
}

// d = 1000 km = 1e6 m; kappa = 3/(3000 * 1000) = 1e-6 m^2/s; d^2/kappa = 1e18 s.
TEST(CaseFile, BodyIsMadeDimensionless) {
  const Case made = parse_case(small_body, "body.toml");
  const Model& model = made.model;
  const auto near = [](double value, double expected) { EXPECT_NEAR(value / expected, 1, 1e-14); };
  near(model.shell.inner_radius, 1);  // 1000/(2000 - 1000)
  // 3000 * 3e-5 * 4 * 1000 * 1e18/(1e-6 * 1e20) = 360 * 1e18/1e14
  near(model.rayleigh, 3.6e6);
  // k DeltaT/d = 3 * 1000/1e6 = 3e-3 W/m^2
  near(std::get<FixedHeatFlux>(model.walls.inner.thermal).outward, 2);
  EXPECT_EQ(std::get<FixedTemperature>(model.walls.outer.thermal).value, 0);
  near(model.viscosity.highest, 1e5);                  // 1e25/1e20
  near(model.viscosity.layered.layers[0].below, 0.4);  // 400/1000
  const ArrheniusViscosity& law = *model.viscosity.arrhenius;
  near(law.energy, 3e5 / 8314.46261815324);  // R DeltaT
  // V * rho g d/(R DeltaT) = 2e-6 * 3000 * 4 * 1e6/(R DeltaT) = 24000/8314.46
  near(law.volume, 24000 / 8314.46261815324);
  near(law.offset, 0.2);  // 200/1000
  near(law.unity_at, 1);  // (1200 - 200)/1000
  near(law.unity_at_depth, 0.25);
  near(model.heat.uniform, 2);       // k DeltaT/d^2 = 3e-9 W/m^3
  near(made.initial.interior, 0.7);  // (900 - 200)/1000
  near(made.initial.layer_thickness, 0.05);
  near(made.initial.noise, 0.005);
  // 1 Myr = 3.15576e13 s, so 100 Myr = 3.15576e15 s
  near(made.march.end_time, 3.15576e-3);
  near(made.heat.first_step, 3.15576e-7);
  // 1e-3 K/Myr = 1e-3/3.15576e13 K/s, times 1e18 s/1000 K
  near(made.march.steady, 1e-3 * 1e15 / 3.15576e13);
  EXPECT_EQ(made.heat.largest_step, HeatSettings{}.largest_step);
  ASSERT_TRUE(made.body);
  EXPECT_EQ(made.body->radius, 2e6);
}

TEST(CaseFile, BoxWithABodyIsAsDeepAsItsMantle) {
  const Case made = parse_case(small_body, "body.toml", {"shell.geometry=box", "shell.width=2500"});
  EXPECT_DOUBLE_EQ(made.model.shell.lateral_end, 2.5);
  EXPECT_EQ(made.model.shell.inner_radius, 0);
  expect_round_trip(made);
}

TEST(CaseFile, RoundTripOfABody) {
  const Case made = parse_case(small_body, "body.toml");
  EXPECT_NE(write_case(made).find("[body_used]"), std::string::npos);
  expect_round_trip(made);
}

TEST(CaseFile, RoundTripOfAllCases) {
  int cases = 0;
  for (const auto& file : std::filesystem::directory_iterator(LIDWRIGHT_SOURCE_DIR "/cases")) {
    if (file.path().extension() != ".toml") continue;
    expect_round_trip(read_case(file.path().string()));
    ++cases;
  }
  EXPECT_GE(cases, 6);
}

TEST(CaseFile, RoundTripOfAnyNumbers) {
  std::mt19937_64 random(5);
  std::uniform_real_distribution<double> share(0, 1);
  for (int n = 0; n < 300; ++n) {
    const double from = 100 * share(random), ratio = 1e-3 + 0.998 * share(random);
    const auto text = [](double x) { return std::to_string(x); };
    expect_round_trip(parse_case(
        small_case, "small.toml",
        {"shell.radius_ratio=" + text(ratio), "shell.extent=sector", "shell.from=" + text(from),
         "shell.opening=" + text(1e-3 + 79 * share(random)), "shell.geometry=axisymmetric"}));
    expect_round_trip(
        parse_case(small_body, "body.toml",
                   {"body.radius=" + text(2000 + 9000 * share(random)),
                    "body.core_radius=" + text(1999 * share(random) + 1), "viscosity.layers=[]",
                    "viscosity.arrhenius.unity_at_depth=0", "initial.layer_thickness=0.001"}));
  }
}

TEST(CaseFile, RoundTripOfEverythingAtOnce) {
  expect_round_trip(parse_case(small_case, "small.toml",
                               {"title=a \"quoted\" \\ title, \xc3\xa9",
                                "walls.inner.flow=no-slip",
                                "walls.inner.temperature=0.1",
                                "viscosity.exponential.thermal_contrast=1e6",
                                "viscosity.exponential.depth_contrast=3",
                                "viscosity.lowest=1e-3",
                                "viscosity.highest=1e300",
                                "viscosity.layers=[{below=0.1,factor=0.3}]",
                                "heat.layers=[{below=0,source=-1},{below=0.3,source=5e-324}]",
                                "heat.uniform=3",
                                "initial.base=boundary-layers",
                                "initial.interior=0.3",
                                "initial.seed=9223372036854775807",
                                "initial.from=/old/run",
                                "flow.memory=2",
                                "flow.most_newton_steps=8",
                                "transport.flux=central",
                                "march.most_steps=2147483648",
                                "march.until=known",
                                "march.known.quantities=velocity_rms",
                                "march.known.relative_error=0.1",
                                "settle.tolerance=1e-7",
                                "settle.most_steps=9",
                                "settle.most_time=0.7",
                                "settle.flux=limited",
                                "settle.coarsest=9",
                                "settle.linear=iterative",
                                "output.normal_stress=false",
                                "output.checkpoint_every=0"}));
  Case made = parse_case(small_case, "small.toml");
  made.title = "line\nbreak\ttab\x01";
  made.model.walls.inner.thermal = FixedHeatFlux{};
  expect_round_trip(made);
}

TEST(CaseReference, PageInDocsIsUpToDate) {
  EXPECT_EQ(contents(LIDWRIGHT_SOURCE_DIR "/docs/case.md"), keys_as_markdown());
}

TEST(CaseReference, TextFitsEightyColumns) {
  std::istringstream text(keys_as_text());
  for (std::string line; std::getline(text, line);) EXPECT_LE(line.size(), 80U) << line;
}

TEST(CaseReference, NamesEveryKeyThatIsWritten) {
  const std::string page = keys_as_markdown();
  for (const char* key :
       {"radius_ratio", "layers[].factor", "end_time", "modes[].amplitude", "seed"})
    EXPECT_NE(page.find("| `" + std::string(key) + "` |"), std::string::npos) << key;
}

}  // namespace
}  // namespace lidwright
