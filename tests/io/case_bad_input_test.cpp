#include <gtest/gtest.h>
#include <sys/stat.h>
#include <unistd.h>

#include <filesystem>
#include <fstream>
#include <string>

#include "io/case_file.hpp"
#include "tests/io/bad_case.hpp"

/// Every bad input has a message with its place and a remedy.
namespace lidwright {
namespace {

using test::expect_all;
using test::expect_message;
using test::good_body;
using test::good_case;
using test::message_of;

TEST(BadCase, Syntax) {
  expect_all(good_case,
             {
                 {"radius_ratio = 0.5", "radius_ratio = ", "c.toml:6:16", "not valid TOML"},
                 {"radius_ratio = 0.5", "radius_ratio 0.5", "c.toml:6:14", "not valid TOML"},
                 {"[grid]", "[grid", "c.toml:7:6", "not valid TOML"},
                 {"\"test\"", "\"test", "c.toml:1:14", "not valid TOML"},
                 {"lateral = 32", "radial = 32", "c.toml:9:10", "cannot redefine"},
                 {"[march]", "[grid]", "c.toml:14:1", "cannot redefine"},
                 {"\"test\"", "\"te\xff\xfest\"", "c.toml:1:11", "not valid TOML"},
                 {"radial = 8", "radial = 99999999999999999999", "c.toml:8:30", "not valid TOML"},
                 {"radial = 8", "radial = 8 8", "c.toml:8:12", "not valid TOML"},
                 {"title", std::string("\0title", 6), "c.toml:1:1", "not valid TOML"},
             });
}

TEST(BadCase, UnknownNames) {
  expect_all(good_case,
             {
                 {"radius_ratio", "radius_raito", "c.toml:6:1", "did you mean 'radius_ratio'"},
                 {"[grid]", "[gird]", "c.toml:7:2", "unknown table [gird] (did you mean 'grid'"},
                 {"[walls.outer]", "[walls.outr]", "c.toml:12:8",
                  "unknown table [walls.outr] (did you mean 'outer'"},
                 {"title", "rayleigh = 3\ntitle", "c.toml:1:1", "did you mean numbers.rayleigh"},
                 {"title", "zzzzzz = 3\ntitle", "c.toml:1:1", "'lidwright keys' lists all keys"},
                 {"", "[viscosity]\nlayers = [{ below = 0.1, factr = 3 }]\n", "c.toml:17:26",
                  "did you mean 'factor'"},
                 {"", "[viscosity]\nlayers = [{ below = 0.1, factor = 3, colour = 3 }]\n",
                  "c.toml:17:38", "its keys are below, factor"},
                 {"end_time", "end-time", "c.toml:15:1", "did you mean 'end_time'"},
             });
}

TEST(BadCase, WrongTypes) {
  expect_all(
      good_case,
      {
          {"= 0.5", "= \"half\"", "c.toml:6:1",
           "shell.radius_ratio = \"half\": must be a number, greater than 0"},
          {"= 0.5", "= true", "c.toml:6:1", "must be a number"},
          {"= 0.5", "= [0.5]", "c.toml:6:1", "shell.radius_ratio = a list: must be a number"},
          {"= 0.5", "= 1979-05-27", "c.toml:6:1", "must be a number"},
          {"radial = 8", "radial = 8.0", "c.toml:8:1", "must be a whole number, at least 4"},
          {"radial = 8", "radial = \"8\"", "c.toml:8:1", "must be a whole number"},
          {"\"annulus\"", "3", "c.toml:5:1", "must be one of \"box\", \"annulus\""},
          {"\"test\"", "5", "c.toml:1:1", "must be text in quotes"},
          {"[march]", "[output]\nnormal_stress = 1\n[march]", "c.toml:15:1",
           "must be true or false"},
          {"title = \"test\"", "flow = 3", "c.toml:1:1", "flow = 3: flow is a table"},
          {"[march]", "[march.end_time]", "c.toml:14:8",
           "march.end_time = a table: must be a number"},
          {"", "[viscosity]\nlayers = 3\n", "c.toml:17:1", "must be a list of tables"},
          {"", "[viscosity]\nlayers = [3]\n", "c.toml:17:11",
           "viscosity.layers[1] = 3: must be a table"},
          {"", "[viscosity]\nlayers = [{ below = 0.1, factor = \"a\" }]\n", "c.toml:17:26",
           "viscosity.layers[1].factor = \"a\": must be a number"},
      });
}

TEST(BadCase, OutOfRange) {
  expect_all(
      good_case,
      {
          {"= 0.5", "= -0.5", "c.toml:6:1",
           "shell.radius_ratio = -0.5: must be greater than 0 and less than 1 (inner radius over "
           "outer radius)"},
          {"= 0.5", "= 1", "c.toml:6:1", "less than 1"},
          {"= 0.5", "= 0.0", "c.toml:6:1", "greater than 0"},
          {"= 0.5", "= nan", "c.toml:6:1", "must be a finite number"},
          {"= 1e4", "= inf", "c.toml:3:1", "must be a finite number"},
          {"= 1e4", "= -inf", "c.toml:3:1", "must be a finite number"},
          {"= 1e4", "= -1", "c.toml:3:1", "at least 0"},
          {"= 1e4", "= 1e999", "c.toml:3:17", "not valid TOML"},
          {"radial = 8", "radial = 3", "c.toml:8:1", "at least 4"},
          {"radial = 8", "radial = 5000000000", "c.toml:8:1", "at most 100000"},
          {"lateral = 32", "lateral = -32", "c.toml:9:1", "at least 4"},
          {"radial = 8\nlateral = 32", "radial = 50000\nlateral = 50000", "c.toml:9:1", "too many"},
          {"end_time = 0.1", "end_time = 0", "c.toml:15:1", "greater than 0"},
          {"end_time = 0.1", "end_time = 0.1\nmost_steps = -1", "c.toml:16:1", "at least 0"},
          {"", "[flow]\ntolerance = 0.2\n", "c.toml:17:1", "greater than 0 and at most 0.1"},
          {"", "[flow]\nmemory = 9\n", "c.toml:17:1", "at least 1 and at most 8"},
          {"", "[transport]\ngrowth = 1\n", "c.toml:17:1", "greater than 1 and at most 2"},
          {"", "[transport]\ncourant = 1.5\n", "c.toml:17:1", "at most 1"},
          {"", "[initial]\nseed = -1\n", "c.toml:17:1", "at least 0"},
          {"", "[initial]\nnoise = -0.1\n", "c.toml:17:1", "at least 0"},
          {"", "[output]\nhistory_every = 0\n", "c.toml:17:1", "at least 1"},
          {"", "[output]\ncheckpoints_kept = 0\n", "c.toml:17:1", "at least 1"},
          {"", "[viscosity]\nconstant = 0\n", "c.toml:17:1", "greater than 0"},
          {"", "[settle]\ntolerance = 0\n", "c.toml:17:1", "greater than 0 and at most 0.1"},
          {"", "[settle]\nmost_steps = 0\n", "c.toml:17:1", "at least 1"},
          {"", "[settle]\nmost_time = 0.0\n", "c.toml:17:1", "greater than 0"},
          {"", "[settle]\ncoarsest = 7\n", "c.toml:17:1", "at least 8"},
          {"", "[settle]\nflux = \"upwind\"\n", "c.toml:17:1", "\"central\", \"limited\""},
          {"", "[settle]\nlinear = \"directly\"\n", "c.toml:17:1", "did you mean 'direct'"},
          {"", "[viscosity]\nlayers = [{ below = 1, factor = 2 }]\n", "c.toml:17:13",
           "viscosity.layers[1].below = 1: must be at least 0 and less than 1 d"},
          {"lateral = 32", "lateral = 32\ninner_refinement = 0.5", "c.toml:10:1", "at least 1"},
          {"\"annulus\"", "\"anulus\"", "c.toml:5:1", "(did you mean 'annulus'?)"},
          {"temperature = 1", "temperature = 1\nflow = \"slippery\"", "c.toml:12:1",
           "must be one of \"free-slip\", \"no-slip\""},
      });
}

TEST(BadCase, Missing) {
  expect_all(good_case,
             {
                 {"geometry = \"annulus\"\n", "", "c.toml:4:2",
                  "shell.geometry is missing and has no default"},
                 {"radius_ratio = 0.5\n", "", "c.toml:4:2", "shell.radius_ratio is missing"},
                 {"radial = 8\n", "", "c.toml:7:2", "grid.radial is missing"},
                 {"[numbers]\nrayleigh = 1e4\n", "", "c.toml", "neither [numbers] nor [body]"},
                 {"rayleigh = 1e4\n", "", "c.toml:2:2", "numbers.rayleigh is missing"},
                 {"temperature = 1\n", "", "c.toml:10:8", "[walls.inner] has no thermal condition"},
                 {"[walls.outer]\ntemperature = 0\n", "", "c.toml:10:2",
                  "[walls.outer] has no thermal condition"},
                 {"radius_ratio = 0.5", "radius_ratio = 0.5\nextent = \"sector\"", "c.toml:4:2",
                  "shell.opening is missing"},
                 {"", "[viscosity]\nlayers = [{ below = 0.1 }]\n", "c.toml:17:11",
                  "viscosity.layers[1].factor is missing"},
                 {"", "[viscosity.arrhenius]\nsurface_temperature = 0.2\n", "c.toml:16:12",
                  "viscosity.arrhenius.activation_energy is missing"},
             });
}

TEST(BadCase, NotApplicable) {
  expect_all(
      good_case,
      {
          {"= 0.5", "= 0.5\nwidth = 2", "c.toml:7:1",
           "applies only with shell.geometry = \"box\"; remove it"},
          {"= 0.5", "= 0.5\nsides = \"periodic\"", "c.toml:7:1",
           "applies only with shell.geometry = \"box\""},
          {"\"annulus\"", "\"box\"", "c.toml:6:1", "applies only in a curved shell"},
          {"\"annulus\"\nradius_ratio = 0.5", "\"box\"\nextent = \"sector\"", "c.toml:6:1",
           "not in the \"box\""},
          {"= 0.5", "= 0.5\nopening = 60", "c.toml:7:1",
           "applies only with shell.extent = \"sector\""},
          {"lateral = 32", "lateral = 32\nleft_refinement = 2", "c.toml:10:1",
           "in a box with shell.sides"},
          {"\"annulus\"\nradius_ratio = 0.5\n[grid]\n",
           "\"box\"\nsides = \"periodic\"\n[grid]\nright_refinement = 2\n", "c.toml:8:1",
           "\"reflecting\""},
          {"", "[initial]\ninterior = 0.5\n", "c.toml:17:1", "initial.base = \"boundary-layers\""},
          {"= 0.5", "= 0.5\nextent = \"pole-to-pole\"", "c.toml:7:1",
           "only an axisymmetric shell has poles"},
          {"\"annulus\"", "\"axisymmetric\"\nextent = \"full-circle\"", "c.toml:6:1",
           "ends at its axis"},
          {"\"annulus\"", "\"axisymmetric\"\nextent = \"sector\"\nfrom = 100\nopening = 90",
           "c.toml:8:1", "beyond the pole"},
          {"= 0.5", "= 0.5\nextent = \"sector\"\nopening = 400", "c.toml:8:1",
           "at most 360 degrees"},
      });
}

TEST(BadCase, Contradictions) {
  expect_all(
      good_case,
      {
          {"temperature = 1", "temperature = 1\nheat_flux = 2", "c.toml:12:1", "both given"},
          {"temperature = 1", "temperature = 1\ninsulating = true", "c.toml:12:1", "both given"},
          {"temperature = 1", "insulating = false", "c.toml:11:1", "says nothing about the wall"},
          {"temperature = 1\n[walls.outer]\ntemperature = 0",
           "heat_flux = 1\n[walls.outer]\nheat_flux = 1", "c.toml:12:8",
           "no wall holds a temperature"},
          {"[march]", "[body]\nradius = 3\n[march]", "c.toml:14:2", "both given"},
          {"", "[viscosity]\nlayers = [{ below = 0.5, factor = 2 }, { below = 0.1, factor = 1 }]\n",
           "c.toml:17:42", "sort the layers by depth"},
          {"", "[heat]\nlayers = [{ below = 0.5, source = 2 }, { below = 0.5, source = 1 }]\n",
           "c.toml:17:42", "sort the layers by depth"},
          {"", "[viscosity]\nlowest = 2\nhighest = 1\n", "c.toml:18:1",
           "upper cut-off must be the larger"},
          {"", "[transport]\nfirst_step = 1\n", "c.toml:17:1",
           "longer than transport.largest_step"},
          {"", "[[initial.modes]]\nlateral = 1.5\n", "c.toml:17:1", "whole number of waves"},
          {"",
           "[viscosity.arrhenius]\nactivation_energy = 10\nsurface_temperature = 0.1\nunity_at = "
           "-0.2\n",
           "c.toml:19:1", "above absolute zero"},
      });
}

TEST(BadCase, WithABody) {
  expect_all(
      good_body,
      {
          {"core_radius = 1000", "core_radius = 2000", "c.toml:3:1",
           "must be less than body.radius = 2000"},
          {"core_radius = 1000\n", "", "c.toml:1:2", "body.core_radius is missing"},
          {"radius = 2000", "radius = 1e300", "c.toml:1:2", "check their units"},
          {"gravity = 4", "gravity = -4", "c.toml:4:1", "greater than 0 m/s^2"},
          {"[grid]", "radius_ratio = 0.5\n[grid]", "c.toml:14:1", "follows from body.core_radius"},
          {"outer]\ntemperature = 200\n", "outer]\ntemperature = -3\n", "c.toml:20:1",
           "at least 0 K"},
          {"", "[viscosity]\nlayers = [{ below = 1200, factor = 2 }]\n", "c.toml:22:13",
           "less than 1000 km"},
          {"", "[viscosity.arrhenius]\nactivation_energy = 3e5\nsurface_temperature = 0.2\n",
           "c.toml:23:1", "follows from body.surface_temperature"},
          {"", "[numbers]\nrayleigh = 1e4\n", "c.toml:1:2", "both given"},
          {"", "[body_used]\nradius = 1\n", "c.toml:21:2", "belongs to a dimensionless case"},
      });
}

TEST(BadCase, KnownMeans) {
  expect_all(
      good_case,
      {
          {"", "[march.known]\nrelative_error = 0.1\n", "c.toml:17:1",
           "applies only with march.until = \"known\""},
          {"[march]", "[march]\nuntil = \"bored\"", "c.toml:15:1",
           "must be one of \"time\", \"known\""},
          {"[march]", "[march]\nuntil = \"known\"\nknown.relative_error = 1", "c.toml:16:7",
           "less than 1"},
          {"[march]", "[march]\nuntil = \"known\"\nknown.quantities = \"nusselt_ouer\"",
           "c.toml:16:7", "did you mean 'nusselt_outer'"},
          {"[march]", "[march]\nuntil = \"known\"\nknown.quantities = \"velocity_rms, wall_time\"",
           "c.toml:16:7", "'wall_time' is no column of history.csv with a mean"},
          {"[march]", "[march]\nuntil = \"known\"\nknown.quantities = \"\"", "c.toml:16:7",
           "'' is no column"},
      });
}

TEST(BadCase, Settings) {
  const auto expect_setting = [](const std::string& setting, const std::string& words) {
    expect_message(message_of(good_case, {"title=fine", setting}), "--set 2", words);
  };
  expect_setting("grid.radial=abc", "grid.radial = \"abc\": must be a whole number");
  expect_setting("grid.radial=3", "at least 4");
  expect_setting("grid.radail=64", "did you mean 'radial'");
  expect_setting("gird.radial=64", "did you mean 'grid'");
  expect_setting("grid.radial", "must be table.key=value");
  expect_setting("=3", "must be table.key=value");
  expect_setting("grid.radial=", "must be table.key=value");
  expect_setting("grid=3", "grid is a table");
  expect_setting("shell.geometry=ball", "must be one of \"box\"");
  expect_setting("grid.radial=8\n[flow]\nmemory=2", "must be a whole number");
  expect_setting("walls.inner.heat_flux=3", "both given");
  expect_setting("viscosity.layers=[{below=2,factor=1}]", "less than 1");
}

TEST(BadCase, Files) {
  const std::string folder = testing::TempDir() + "lidwright_bad_files";
  std::filesystem::create_directories(folder);
  const auto message = [](const std::string& path) -> std::string {
    try {
      read_case(path);
    } catch (const InputError& error) {
      return error.what();
    }
    return "accepted";
  };
  expect_message(message(folder + "/none.toml"), folder + "/none.toml", "No such file");
  expect_message(message(folder), folder, "is a folder");
  expect_message(message(""), "case file", "no path");
  expect_message(message("/dev/zero"), "/dev/zero", "longer than 1 MiB");
  std::ofstream(folder + "/empty.toml") << " \n";
  expect_message(message(folder + "/empty.toml"), folder + "/empty.toml", "is empty");
  std::ofstream(folder + "/locked.toml") << good_case;
  ::chmod((folder + "/locked.toml").c_str(), 0);
  if (::geteuid() != 0)  // root may read everything
    expect_message(message(folder + "/locked.toml"), folder + "/locked.toml", "Permission denied");
  std::filesystem::remove_all(folder);
}

}  // namespace
}  // namespace lidwright
