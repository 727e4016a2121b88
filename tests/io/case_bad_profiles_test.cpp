#include <gtest/gtest.h>

#include "io/case_file.hpp"
#include "tests/io/bad_case.hpp"
#include "tests/io/scratch.hpp"

/// What a case of a compressible mantle is told when it is wrong, and a table of profiles beside
/// it.
namespace lidwright {
namespace {

using test::changed;
using test::expect_all;
using test::expect_message;
using test::good_body;
using test::good_case;
using test::liquid;
using test::message_of;
using test::Scratch;
using test::Settings;

const Settings with_table = {"reference.approximation=anelastic-liquid",
                             "reference.table=profile.csv"};

constexpr const char* extended =
    "[reference]\napproximation = \"extended-boussinesq\"\n";  // lines 16 and 17
constexpr const char* liquid_case = "[reference]\napproximation = \"anelastic-liquid\"\n";
constexpr const char* with_numbers =
    "rayleigh = 1e4\ndissipation = 0.5\nsurface_temperature = 0.1\n";

std::string compressible(const char* reference) {
  return changed(good_case, {"rayleigh = 1e4\n", with_numbers, "", ""}) + reference;
}

TEST(BadProfiles, Numbers) {
  expect_all(
      good_case,
      {
          {"", extended, "c.toml:2:2", "numbers.dissipation is missing and has no default"},
          {"1e4\n", "1e4\ndissipation = 0.5\n", "c.toml:4:1",
           "numbers.dissipation = 0.5: applies only with [numbers] and reference.approximation"},
          {"1e4\n", "1e4\nsurface_temperature = 0.5\n", "c.toml:4:1",
           "applies only with [numbers], and with [viscosity.arrhenius]"},
          {"", "[viscosity.arrhenius]\nactivation_energy = 3\n", "c.toml:16:12",
           "viscosity.arrhenius.surface_temperature is missing and has no default"},
          {"", "[reference]\napproximation = \"anelastic\"\n", "c.toml:17:1",
           "must be one of \"boussinesq\", \"extended-boussinesq\", \"anelastic-liquid\""},
          {"", "[reference]\ngruneisen = 1\n", "c.toml:17:1",
           "applies only with reference.approximation = \"anelastic-liquid\""},
          {"", "[reference]\ngravity_rise = 0\n", "c.toml:17:1", "at least 1e-06"},
          {"", "[reference]\ngravity_power = 20\n", "c.toml:17:1", "at most 10"},
          {"", "[reference]\nexpansivty_rise = 2\n", "c.toml:17:1",
           "did you mean 'expansivity_rise'"},
          {"\"annulus\"\nradius_ratio = 0.5\n", "\"box\"\n[reference]\ngravity_power = 1\n",
           "c.toml:7:1", "applies only with a curved shell.geometry"},
      });
  expect_all(compressible(extended),
             {
                 {"surface_temperature = 0.1\n", "", "c.toml:2:2",
                  "numbers.surface_temperature is missing and has no default"},
                 {"dissipation = 0.5", "dissipation = 0", "c.toml:4:1", "greater than 0"},
                 {"surface_temperature = 0.1", "surface_temperature = -1", "c.toml:5:1",
                  "at least 0 DeltaT"},
                 {"", "density_rise = 2\n", "c.toml:20:1",
                  "applies only with reference.approximation = \"anelastic-liquid\"; remove it"},
                 {"", "levels = [{ depth = 0, density = 1 }, { depth = 1, density = 2 }]\n",
                  "c.toml:20:24", "take that, or remove the density"},
                 {"temperature = 0\n", "temperature = -0.2\n", "c.toml:15:1",
                  "walls.outer.temperature = -0.2: is below absolute zero, -0.1 with"},
                 {"", "[viscosity.arrhenius]\nactivation_energy = 3\nsurface_temperature = 0.2\n",
                  "c.toml:22:1", "must equal numbers.surface_temperature = 0.1"},
             });
  expect_message(message_of(compressible(extended),
                            {"numbers.surface_temperature=0", "walls.outer.temperature=0.5",
                             "viscosity.arrhenius.activation_energy=3"}),
                 "--set 1", "greater than 0 with [viscosity.arrhenius]");
}

TEST(BadProfiles, Density) {
  const std::string good = compressible(liquid_case) + "gruneisen = 1.1\n";  // line 20
  expect_all(good, {
                       {"gruneisen = 1.1\n", "", "c.toml:19:1", "none of reference.gruneisen"},
                       {"", "density_rise = 2\n", "c.toml:19:1", "give exactly one"},
                       {"", "levels = [{ depth = 0, density = 1 }, { depth = 1, density = 2 }]\n",
                        "c.toml:19:1", "more than one of reference.gruneisen"},
                       {"= 1.1", "= -1", "c.toml:20:1", "greater than 0"},
                       {"= 1.1", "= 1e-3", "c.toml:20:1", "take Gamma near 1"},
                       {"= 1.1", "= 1e300", "c.toml:20:1", "take Gamma near 1"},
                       {"gruneisen = 1.1", "density_rise = 1", "c.toml:20:1", "greater than 1"},
                   });
}

TEST(BadProfiles, Levels) {
  const std::string good = std::string(good_case) +
                           "[reference]\nlevels = [\n{ depth = 0, gravity = 1 },\n"  // 18
                           "{ depth = 0.5, gravity = 2 },\n{ depth = 1, gravity = 3 }\n]\n";
  expect_all(
      good,
      {
          {"depth = 0.5", "depth = 0", "c.toml:19:3",
           "reference.levels[2].depth = 0 d: must be deeper than the one before it, 0 d"},
          {"depth = 0,", "depth = 0.1,", "c.toml:18:3",
           "reference.levels[1].depth = 0.1 d: must be 0, at the outer wall"},
          {"depth = 1,", "depth = 0.9,", "c.toml:20:3",
           "reference.levels[3].depth = 0.9 d: the last depth must be that of the inner wall, 1 d"},
          {"depth = 0.5", "depth = -0.5", "c.toml:19:3", "at least 0 d"},
          {"gravity = 2", "gravity = -2", "c.toml:19:16",
           "reference.levels[2].gravity = -2: must be greater than 0 (gravity there)"},
          {"gravity = 2", "gravity = 2, density = 1", "c.toml:18:1",
           "reference.levels[1].density is missing, but reference.levels[2].density is given"},
          {", gravity = 3", "", "c.toml:20:1", "reference.levels[3].gravity is missing"},
          {"{ depth = 0.5, gravity = 2 },\n{ depth = 1, gravity = 3 }", "", "c.toml:18:1",
           "the profiles have 1 depth; give at least 2"},
          {"depth = 0.5, gravity", "gravity", "c.toml:19:1",
           "reference.levels[2].depth is missing"},
          {"", "gravity_rise = 2\n", "c.toml:22:1",
           "reference.gravity_rise and reference.levels[1].gravity are both given"},
          {"", "gravity_power = 1\n", "c.toml:22:1", "remove one of them"},
          {"", "table = \"p.csv\"\n", "c.toml:22:1",
           "reference.table and reference.levels are both given; remove one"},
      });
  expect_message(message_of(good_case, {"reference.levels=[{depth=0},{depth=1}]"}), "--set 1",
                 "depths and nothing else");
}

class BadTable : public testing::Test {
 protected:
  /// The message on a table; `words` beside the place, which begins with the table's path.
  void expect_refused(const std::string& table, const std::string& place,
                      const std::string& words) {
    test::write_text(folder_ / "profile.csv", table);
    const std::string message = of(good_body, with_table);
    expect_message(message, (folder_ / "profile.csv") + place, words);
  }
  /// With `from` replaced by `to` in a good table.
  void expect_change(const std::string& from, const std::string& to, const std::string& place,
                     const std::string& words) {
    expect_refused(changed(good_, {from, to, "", ""}), place, words);
  }
  std::string of(const std::string& text, const Settings& settings) {
    try {
      parse_case(text, folder_ / "b.toml", settings);
    } catch (const InputError& error) {
      return error.what();
    }
    return "accepted";
  }

  Scratch folder_;
  const std::string good_ =
      "depth [km],density [kg/m^3]\n0,3000\n# upper mantle\n500, 3500\n1000,4000\n";
};

TEST_F(BadTable, GoodOne) {
  test::write_text(folder_ / "profile.csv", good_);
  EXPECT_EQ(of(good_body, with_table), "accepted");
}

TEST_F(BadTable, Head) {
  expect_change("density [kg/m^3]", "densty [kg/m^3]", ":1:12",
                "unknown column 'densty [kg/m^3]' (did you mean 'density'?); separated by commas, "
                "columns may be depth [km], density [kg/m^3], expansivity [1/K], gravity [m/s^2], "
                "conductivity [W/m/K], heat_capacity [J/kg/K]");
  expect_change("[kg/m^3]", "[g/cm^3]", ":1:12",
                "column 'density' is in [g/cm^3]: must be in [kg/m^3], as the case has a [body]; "
                "write density [kg/m^3] and convert the numbers");
  expect_change("density [kg/m^3]", "density", ":1:12", "column 'density' has no unit: must be in");
  expect_change("depth [km]", "gravity [m/s^2]", ":1", "column 'depth' is missing");
  expect_change("depth [km]", "depth [km],depth [km]", ":1:12", "column 'depth' is there twice");
  expect_change("depth [km],", "depth [km];", ":1:1", "column 'depth' is in [km];density");
  expect_refused("0,3000\n1000,4000\n", ":1:1", "unknown column '0'");
}

TEST_F(BadTable, Numbers) {
  expect_change(" 3500", "-3500", ":4:5",
                "column 'density' = -3500: must be greater than 0 kg/m^3");
  expect_change(" 3500", "nan", ":4:5", "column 'density' = nan: must be a finite number");
  expect_change(" 3500", "inf", ":4:5", "must be a finite number");
  expect_change("3500", "3500 kg", ":4:6", "column 'density' = \"3500 kg\": must be a number");
  expect_change("3500", "1e999", ":4:6", "must be a number");
  expect_change("3500", "", ":4:6", "column 'density' = \"\": must be a number");
  expect_change("500, 3500", "500", ":4", "has 1 number, the first line names 2 columns");
  expect_change("500, 3500", "500, 3500, 7", ":4", "has 3 numbers, the first line names 2 columns");
  expect_change("500", "-500", ":4:1", "column 'depth' = -500: must be at least 0 km");
}

TEST_F(BadTable, Depths) {
  expect_change("500,", "0,", ":4:1",
                "column 'depth' = 0 km: must be deeper than the one before it, 0 km; sort by");
  expect_change("500,", "1200,", ":5:1", "must be deeper than the one before it, 1200 km");
  expect_change("\n0,", "\n10,", ":2:1", "column 'depth' = 10 km: must be 0, at the outer wall");
  expect_change("1000", "1001", ":5:1",
                "column 'depth' = 1001 km: the last depth must be that of the inner wall, 1000 km");
  expect_refused("depth [km],density [kg/m^3]\n0,3000\n", ":2", "the profiles have 1 depth;");
  expect_refused("depth [km],density [kg/m^3]\n", "", "the profiles have 0 depths;");
  expect_refused("depth [km]\n0\n1000\n", ":2", "depths and nothing else; add a property");
  expect_refused("# nothing\n", "", "is empty; its first line names the columns");
  std::string longest = "depth [km],density [kg/m^3]\n";
  for (int k = 0; k <= 2000; ++k) longest += std::to_string(k / 2.0) + ",3000\n";
  expect_refused(longest, ":2",
                 "the profiles have 2001 depths; give at least 2 (the walls) and at "
                 "most 2000");
}

TEST_F(BadTable, AgainstTheCase) {
  test::write_text(folder_ / "profile.csv", good_);
  const std::string path = folder_ / "profile.csv";
  expect_message(of(good_body, {"reference.table=profile.csv"}), path + ":2:3",
                 "column 'density': the density is uniform unless");
  expect_message(of(good_case, liquid({"reference.table=profile.csv"})), path + ":1:1",
                 "column 'depth' is in [km]: must be in [d], as the case has no [body]");
  test::write_text(path, "depth [d],gravity [1]\n0,1\n1,2\n");
  expect_message(of(good_case, {"reference.table=profile.csv", "reference.gravity_rise=3"}),
                 "--set 2", "reference.gravity_rise and column 'gravity' are both given");
}

TEST_F(BadTable, File) {
  const auto message = [&](const char* table) {
    return of(std::string(good_case) + "[reference]\ntable = \"" + table + "\"\n", {});
  };
  const std::string place = (folder_ / "b.toml") + ":17:1";
  expect_message(message("none.csv"), place,
                 "reference.table = \"none.csv\": " + (folder_ / "none.csv") +
                     " cannot be opened (No such file or directory)");
  expect_message(message("none.csv"), place, "a relative path starts at the case file");
  expect_message(message("../"), place, "is a folder; give the file itself");
  expect_message(message("/dev/zero"), place, "is longer than 1 MiB; take fewer depths");
}

}  // namespace
}  // namespace lidwright
