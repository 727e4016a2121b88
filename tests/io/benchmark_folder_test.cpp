#include "io/benchmark_folder.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <filesystem>

#include "io/case_file.hpp"
#include "tests/io/scratch.hpp"

namespace lidwright {
namespace {

using test::message_of;
using test::Scratch;
using test::write_text;
using testing::HasSubstr;

constexpr const char* head =
    "title = \"A flow\"\nreference = \"Nobody (2000)\"\nhow = \"flow\"\ngrids = 2\nquick = true\n"
    "[forcing]\nvertical = 2\n";
constexpr const char* box =
    "[numbers]\nrayleigh = 1\n[shell]\ngeometry = \"box\"\n[grid]\nradial = 16\nlateral = 32\n"
    "[walls.inner]\ntemperature = 1\n[walls.outer]\ntemperature = 0\n";
constexpr const char* table =
    "# remarks\nquantity,variant,settings,value,spread,mark,run,source,definition\n"
    "velocity_rms,,,1.50,,analytic,,own,\n"
    "stress_top_left,wide,shell.width=2; forcing.horizontal=3,2e-3,1e-5,remembered,all,"
    "\"Nobody, table 1\",\"a \"\"stress\"\"\"\n"
    "velocity_rms,wide,shell.width=2; forcing.horizontal=3,7,,doubtful,quick,own,\n";

/// A folder that holds the benchmark `one`.
class BenchmarkFolder : public testing::Test {
 protected:
  BenchmarkFolder() {
    std::filesystem::create_directories(folder / "one");
    put("benchmark.toml", head);
    put("case.toml", box);
    put("expected.csv", table);
  }
  void put(const std::string& file, const std::string& text) {
    write_text(folder / ("one/" + file), text);
  }
  Benchmark read(Rows rows = Rows::All) const { return read_benchmark(folder.path(), "one", rows); }
  std::string refusal() const {
    return message_of<InputError>([&] { read(); });
  }
  void expect_refused(const std::string& rows, const std::string& message) {
    put("expected.csv", "quantity,settings,value,spread,mark,run,source\n" + rows);
    EXPECT_THAT(refusal(), HasSubstr(message));
  }
  Scratch folder;
};

TEST_F(BenchmarkFolder, IsReadWhole) {
  const Benchmark b = read();
  EXPECT_EQ(b.name, "one");
  EXPECT_EQ(b.title, "A flow");
  EXPECT_EQ(b.how, How::Flow);
  EXPECT_EQ(b.grids, 2);
  ASSERT_EQ(b.variants.size(), 2u);
  EXPECT_EQ(b.variants[0].problem.forcing.vertical, 2);
  EXPECT_EQ(b.variants[0].problem.model.shell.lateral_end, 1);
  EXPECT_EQ(b.variants[1].name, "wide");
  EXPECT_EQ(b.variants[1].problem.forcing.horizontal, 3);
  EXPECT_EQ(b.variants[1].problem.model.shell.lateral_end, 2);
}

TEST_F(BenchmarkFolder, GivesValuesTheirSpreadOrTheirRounding) {
  const Benchmark b = read();
  const Expectation& rounded = b.variants[0].expected[0];
  EXPECT_EQ(rounded.value, 1.5);
  EXPECT_FALSE(rounded.spread_stated);
  EXPECT_DOUBLE_EQ(rounded.spread, 0.005);
  const Expectation& stated = b.variants[1].expected[0];
  EXPECT_EQ(stated.spread, 1e-5);
  EXPECT_EQ(stated.mark, Mark::Remembered);
  EXPECT_EQ(stated.source, "Nobody, table 1");
  EXPECT_EQ(stated.definition, "a \"stress\"");
}

TEST_F(BenchmarkFolder, LeavesSlowRowsOut) {
  const Benchmark b = read(Rows::Quick);
  ASSERT_EQ(b.variants.size(), 2u);
  EXPECT_EQ(b.variants[1].expected.size(), 1u);
  const BenchmarkHead h = read_benchmark_head(folder.path(), "one");
  EXPECT_EQ(h.values, 3);
  EXPECT_EQ(h.quick_values, 2);
}

TEST_F(BenchmarkFolder, IsFoundByItsFile) {
  std::filesystem::create_directories(folder / "none");
  EXPECT_EQ(benchmark_names(folder.path()), std::vector<std::string>{"one"});
  EXPECT_THAT(message_of<InputError>([&] { benchmark_names(folder / "none"); }),
              HasSubstr("holds no benchmarks"));
}

TEST_F(BenchmarkFolder, StartsAVariantFromOneAboveIt) {
  const std::string names = "quantity,variant,settings,start,value,mark,source\n";
  const std::string first = "velocity_rms,first,,,1,analytic,own\n";
  const std::string second = "velocity_rms,second,shell.width=2,first,1,analytic,own\n";
  put("expected.csv", names + first + second);
  EXPECT_EQ(read().variants[1].start, "first");
  put("expected.csv", names + second + first);
  EXPECT_THAT(refusal(), HasSubstr("expected.csv:2: start = 'first': must be the name"));
}

TEST_F(BenchmarkFolder, TakesAnotherCaseBesideTheFirst) {
  put("wide.toml",
      std::string(box).replace(std::string(box).find("\"box\""), 5, "\"box\"\nwidth = 3"));
  put("expected.csv",
      "quantity,case,value,mark,source\nvelocity_rms,,1,analytic,own\n"
      "velocity_rms,wide.toml,1,analytic,own\n");
  EXPECT_EQ(read().variants[1].problem.model.shell.lateral_end, 3);
}

TEST_F(BenchmarkFolder, RefusesRowsThatCannotBeMeant) {
  expect_refused("velocity_rns,,1,,analytic,,own\n",
                 "expected.csv:2: unknown quantity 'velocity_rns' (did you mean 'velocity_rms'?)");
  expect_refused("velocity_rms,,one,,analytic,,own\n", "expected.csv:2: value = 'one'");
  expect_refused("velocity_rms,,1,-1,analytic,,own\n", "spread = '-1': must not be negative");
  expect_refused("velocity_rms,,1,,sure,,own\n", "mark = 'sure': must be one of analytic");
  expect_refused("velocity_rms,,1,,analytic,never,own\n", "run = 'never'");
  expect_refused("velocity_rms,,1,,analytic,own\n", "has 6 fields where the head has 7");
  expect_refused("\"velocity_rms,,1,,analytic,,own\n", "a quote is opened");
  expect_refused("velocity_rms,shell.widht=2,1,,analytic,,own\n",
                 "expected.csv:2: settings: --set 1: unknown key shell.widht");
  expect_refused("velocity_rms,forcing.verticl=2,1,,analytic,,own\n",
                 "unknown key verticl (did you mean 'vertical'?)");
  expect_refused("velocity_rms,forcing.vertical=up,1,,analytic,,own\n", "must be a number");
  expect_refused("velocity_rms,grid.radial=17,1,,analytic,,own\n", "must be divisible by 2");
  expect_refused("velocity_rms,grid.radial=8,1,,analytic,,own\n", "at least 8 cells");
  expect_refused("", "holds no values");
}

TEST_F(BenchmarkFolder, RefusesToLineariseWhatYields) {
  const auto expect = [this](const std::string& how, const std::string& quantity,
                             const std::string& message) {
    put("benchmark.toml",
        "title = \"x\"\nreference = \"y\"\nhow = \"" + how + "\"\ngrids = 2\nquick = true\n");
    expect_refused(
        quantity + ",viscosity.yielding.cohesion=3;viscosity.yielding.floor=1,1,,published,,own\n",
        "expected.csv:2: [viscosity.yielding]: " + message);
  };
  expect("settle", "nusselt_outer", "the viscosity depends on the rate of strain");
  expect("onset", "rayleigh_critical", "at rest nothing yields");
}

TEST_F(BenchmarkFolder, MarchesWhatYieldsUntilItIsSteady) {
  put("benchmark.toml",
      "title = \"x\"\nreference = \"y\"\nhow = \"relax\"\ngrids = 2\nquick = true\n");
  expect_refused(
      "nusselt_outer,viscosity.yielding.cohesion=3;viscosity.yielding.floor=1,1,,published,,own\n",
      "march.steady must be greater than 0");
  put("expected.csv",
      "quantity,settings,value,mark,source\n"
      "nusselt_outer,viscosity.yielding.cohesion=3;viscosity.yielding.floor=1; "
      "march.steady=1e-3,1,published,own\n");
  EXPECT_EQ(read().how, How::Relax);
}

TEST_F(BenchmarkFolder, RefusesATableWithOtherColumns) {
  put("expected.csv", "quantity,value,mark\nvelocity_rms,1,analytic\n");
  EXPECT_THAT(refusal(), HasSubstr("the column 'source' is missing"));
  put("expected.csv", "quantity,value,mark,source,tolerance\nvelocity_rms,1,analytic,own,1\n");
  EXPECT_THAT(refusal(), HasSubstr("unknown column 'tolerance'"));
}

TEST_F(BenchmarkFolder, RefusesAHeadThatCannotBeMeant) {
  put("benchmark.toml", "title = \"x\"\nreference = \"y\"\nhow = \"guess\"\nquick = true\n");
  EXPECT_THAT(refusal(), HasSubstr("benchmark.toml:3:1: how = \"guess\": must be \"settle\""));
  put("benchmark.toml", "title = \"x\"\nreference = \"y\"\nhow = \"flow\"\n");
  EXPECT_THAT(refusal(), HasSubstr("the key quick is missing"));
  put("benchmark.toml", std::string("grid = 3\n") + head);
  EXPECT_THAT(refusal(), HasSubstr("unknown key grid (did you mean 'grids'?)"));
  put("benchmark.toml", "title = x\n");
  EXPECT_THAT(refusal(), HasSubstr("not valid TOML"));
  std::filesystem::remove(folder / "one/benchmark.toml");
  EXPECT_THAT(refusal(), HasSubstr("benchmark.toml"));
}

}  // namespace
}  // namespace lidwright
