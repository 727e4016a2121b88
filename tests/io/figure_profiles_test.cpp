#include "io/figure_profiles.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <filesystem>

#include "io/csv.hpp"
#include "tests/io/figure_samples.hpp"
#include "tests/io/png_image.hpp"
#include "tests/io/scratch.hpp"

namespace lidwright {
namespace {

using namespace test;
using testing::HasSubstr;

/// Hotter and faster with the number of the snapshot; viscosity falls with depth where it varies.
std::string profiles(const Geometry& g, int n, bool viscosity_varies, double adiabatic_rise) {
  constexpr std::array<Column, 8> columns{{{"radius", "d", ""},
                                           {"temperature", "DeltaT", ""},
                                           {"temperature_adiabatic", "DeltaT", ""},
                                           {"velocity_radial_rms", "kappa/d", ""},
                                           {"velocity_lateral_rms", "kappa/d", ""},
                                           {"viscosity", "eta", ""},
                                           {"heat_conducted", "k DeltaT d^(n-2)", ""},
                                           {"heat_advected", "k DeltaT d^(n-2)", ""}}};
  std::string text = table_head("lidwright profiles", columns);
  for (int i = 0; i < g.radial_cells(); ++i) {
    const double depth = g.depth(i);
    text += table_row(std::array<double, 8>{
        g.cell_radius(i), 0.5 + 0.1 * n, 0.5 + adiabatic_rise * depth, 3.0 * n, 4.0 * n,
        viscosity_varies ? std::pow(10.0, 4 - 4 * depth) : 1, 2, -1});
  }
  return text;
}

class FigureProfiles : public testing::Test {
 protected:
  SavedRun run(int snapshots, bool viscosity_varies = true, double adiabatic_rise = 0) const {
    SavedRun r;
    r.paths.folder = scratch_.path();
    r.settings.model.shell = {Shape::Annulus, 1.2, 0, 2, Sides::Reflecting};
    r.settings.model.grid = {cells_, 8, {}, {}};
    r.settings.title = long_title;
    const Geometry g(r.settings.model.shell, r.settings.model.grid);
    std::filesystem::create_directories(r.paths.profiles());
    for (int n = 0; n < snapshots; ++n) {
      r.snapshots.push_back({0.1 * n, "fields"});
      write_text(scratch_ / profiles_name(static_cast<std::size_t>(n)),
                 profiles(g, n, viscosity_varies, adiabatic_rise));
    }
    r.history = NumberTable{
        {"time", "lid_thickness_velocity", "lid_thickness_conduction", "boundary_layer_inner"},
        {"d^2/kappa", "d", "d", "d"},
        {{0, 0.11, 1}, {0.1, 0.3, 0.9}, {0.2, 0.35, 0.9}, {0.2, 0.15, 0.9}}};
    return r;
  }
  Scratch scratch_;
  int cells_ = 8;
};

TEST_F(FigureProfiles, ShowWhatTheTableHas) {
  const auto charts = profile_panels(run(2), {1}, 4, 5);
  ASSERT_EQ(charts.size(), 4u) << "temperature, velocity, viscosity, heat";
  EXPECT_DOUBLE_EQ(charts[0].curves.back().x[3], 0.6);
  EXPECT_DOUBLE_EQ(charts[1].curves[0].x[3], 5);
  EXPECT_EQ(charts[2].x.spacing, plot::Spacing::Logarithmic);
  EXPECT_EQ(charts[3].curves[0].x[3], 2);
  EXPECT_EQ(charts[3].curves[1].x[3], -1);
  EXPECT_NE(charts[3].curves[0].pattern, charts[3].curves[1].pattern);
  EXPECT_NEAR(charts[0].curves[0].y.back(), 1.0 / 16, 1e-12) << "depth of the outermost cell";
}

TEST_F(FigureProfiles, AreOfThreeChartsWhereViscosityIsUniform) {
  EXPECT_EQ(profile_panels(run(1, false), {0}, 4, 5).size(), 3u);
}

TEST_F(FigureProfiles, MarkTheLayersAtTheTimeOfTheSnapshot) {
  for (const plot::Chart& chart : profile_panels(run(2), {1}, 4, 5)) {
    ASSERT_EQ(chart.y_levels.size(), 3u);
    EXPECT_DOUBLE_EQ(chart.y_levels[0].value, 0.3) << "base of the lid";
    EXPECT_DOUBLE_EQ(chart.y_levels[1].value, 0.35);
    EXPECT_DOUBLE_EQ(chart.y_levels[2].value, 0.85);
  }
}

/// From wall to wall without sources: logarithmic in the radius of an annulus.
TEST_F(FigureProfiles, CompareWithConductionAlone) {
  cells_ = 32;
  const plot::Curve c = profile_panels(run(1), {0}, 4, 5)[0].curves[0];
  const SavedRun r = run(1);
  const Geometry g(r.settings.model.shell, r.settings.model.grid);
  for (int i = 0; i < cells_; ++i)
    EXPECT_NEAR(c.x[static_cast<std::size_t>(i)],
                std::log(2.2 / g.cell_radius(i)) / std::log(2.2 / 1.2), 2e-4);
}

TEST_F(FigureProfiles, TheAdiabatIsDrawnWhereItRises) {
  EXPECT_EQ(profile_panels(run(1), {0}, 4, 5)[0].curves.size(), 2u);
  EXPECT_EQ(profile_panels(run(1, true, 0.3), {0}, 4, 5)[0].curves.size(), 3u);
}

TEST_F(FigureProfiles, SeveralTimesAreGraded) {
  const auto charts = profile_panels(run(3), {0, 1, 2}, 4, 5);
  ASSERT_EQ(charts[0].curves.size(), 3u);
  EXPECT_TRUE(charts[0].y_levels.empty());
  double lightness = 0;
  for (const plot::Curve& c : charts[0].curves) {
    EXPECT_GT(to_oklab(c.colour).lightness, lightness);
    lightness = to_oklab(c.colour).lightness;
  }
}

TEST_F(FigureProfiles, BadInputIsNamed) {
  SavedRun r = run(1);
  write_text(scratch_ / profiles_name(0), "# lidwright profiles\nradius\n1\n");
  EXPECT_THAT(message_of<InputError>([&] { profiles_figure(r, {0}, {}); }),
              HasSubstr("profiles_0000.csv: has no column 'temperature'"));
  EXPECT_THAT(message_of<InputError>([&] { profiles_figure(r, {}, {}); }),
              HasSubstr("no snapshot yet"));
  r.kind = RunKind::Onset;
  EXPECT_THAT(message_of<InputError>([&] { profiles_figure(r, {0}, {}); }),
              HasSubstr("is 0 at all depths"));
}

TEST_F(FigureProfiles, AreDrawnAtEverySizeAndNothingIsCut) {
  const SavedRun r = run(30, true, 0.3);
  std::vector<std::size_t> all;
  for (std::size_t k = 0; k < 30; ++k) all.push_back(k);
  for (const auto& snapshots : {std::vector<std::size_t>{0}, {5}, {0, 1}, all})
    for (const FigureStyle& style : all_sizes()) {
      const PngImage image(profiles_figure(r, snapshots, style));
      ASSERT_TRUE(image.sound());
      EXPECT_TRUE(white_margins(image, 3)) << snapshots.size() << ' ' << image.width();
    }
}

}  // namespace
}  // namespace lidwright
