#include "io/picture.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <memory>
#include <numbers>

#include "io/colour_map.hpp"
#include "io/history.hpp"
#include "io/plot_axis.hpp"
#include "io/run_folder.hpp"
#include "io/shell_map.hpp"
#include "tests/io/png_image.hpp"
#include "tests/io/scratch.hpp"
#include "tests/support/shells.hpp"

namespace lidwright {
namespace {

using test::message_of;
using test::PngImage;
using test::white_margins;
using testing::ElementsAre;
using testing::HasSubstr;

std::vector<std::string> labels(const plot::Axis& axis) {
  std::vector<std::string> all;
  for (const plot::Tick& t : axis.ticks) all.push_back(t.label);
  return all;
}

TEST(PlotAxis, StepsAreRoundAndWithinTheRange) {
  EXPECT_THAT(labels(plot::linear_axis({0.03, 1.02}, 5)),
              ElementsAre("0.2", "0.4", "0.6", "0.8", "1.0"));
  EXPECT_THAT(labels(plot::linear_axis({-1.1, 1}, 4)), ElementsAre("\u22121", "0", "1"));
  EXPECT_EQ(plot::linear_axis({0.03, 1.02}, 5).power, "");
}

TEST(PlotAxis, SmallNumbersLeaveOutTheirPower) {
  const plot::Axis axis = plot::linear_axis({0, 2e-4}, 2);
  EXPECT_THAT(labels(axis), ElementsAre("0", "100", "200"));
  EXPECT_EQ(plot::written({"time", "s"}, axis), "time (10<sup>\u22126</sup> s)");
}

TEST(PlotAxis, DecadesThinOut) {
  EXPECT_THAT(labels(plot::logarithmic_axis({2, 3e6}, 4)),
              ElementsAre("1", "10<sup>2</sup>", "10<sup>4</sup>", "10<sup>6</sup>"));
}

class ShellOnAPage : public testing::TestWithParam<NamedShell> {};

TEST_P(ShellOnAPage, PlacesGoThereAndBack) {
  const Geometry g(GetParam().shell, GetParam().grid);
  const plot::ShellMap map(g, {20, 30, 500, 400});
  for (int j = 0; j < g.lateral_cells(); ++j) {
    const plot::Place p = map.on_page(g.cell_radius(2), g.cell_lateral(j));
    const plot::ShellPlace back = map.in_shell(p);
    EXPECT_NEAR(back.radius, g.cell_radius(2), 1e-9);
    EXPECT_NEAR(back.lateral, g.cell_lateral(j), 1e-9);
    EXPECT_TRUE(p.x > 20 && p.x < 520 && p.y > 30 && p.y < 430) << p.x << ' ' << p.y;
  }
}

INSTANTIATE_TEST_SUITE_P(AllShells, ShellOnAPage, testing::ValuesIn(all_shells(6, 9)), shell_name);

RadialProfiles profiles_of(const Geometry& g) {
  RadialProfiles p;
  for (int i = 0; i < g.radial_cells(); ++i) {
    p.radius.push_back(g.cell_radius(i));
    p.temperature.push_back(0.5);
    p.velocity_radial_rms.push_back(1);
    p.velocity_lateral_rms.push_back(i);
    p.viscosity.push_back(std::pow(10.0, i));
  }
  return p;
}

/// Hot (0.9) for the first half of the columns, cold (0.2) for the others, between walls of 1 and
/// 0.
PictureContents example(const Geometry& g) {
  PictureContents c{"A tiny run & more", 3, 0.2, g, {}, {}, profiles_of(g), {}, picture_units({})};
  for (int j = 0; j < g.lateral_cells(); ++j)
    for (int i = 0; i < g.radial_cells(); ++i)
      c.temperature.push_back(j < g.lateral_cells() / 2 ? 0.9 : 0.2);
  c.stream_function.assign(static_cast<std::size_t>((g.radial_cells() + 1) * g.corner_columns()),
                           0.0);
  c.history = {{0, 0.1, 0.2}, {1, 2, 3}, {1, 4, 2}, {1, 1, 1}, {0, 0, 0}};
  return c;
}

class PictureOf : public testing::TestWithParam<NamedShell> {};

TEST_P(PictureOf, HasTheStatedSizeAndTheColoursOfTheTemperatures) {
  const Geometry g(GetParam().shell, GetParam().grid);
  const PngImage image(picture(example(g)));
  ASSERT_TRUE(image.sound());
  EXPECT_EQ(image.width(), picture_width);
  EXPECT_EQ(image.height(), picture_height);
  EXPECT_GT(image.count(colour_at(0.9)), 10000);
  EXPECT_GT(image.count(colour_at(0.2)), 10000);
}

TEST_P(PictureOf, LeavesItsMarginsEmpty) {
  const Geometry g(GetParam().shell, GetParam().grid);
  EXPECT_TRUE(white_margins(PngImage(picture(example(g))), 6));
}

INSTANTIATE_TEST_SUITE_P(AllShells, PictureOf, testing::ValuesIn(all_shells(6, 10)), shell_name);

/// The left half of a box is hot: the pixel in its middle has the map's colour.
TEST(Picture, ThePixelInTheMiddleOfTheHotRegionHasItsColour) {
  const Geometry g({Shape::Box, 0, 0, 1, Sides::Reflecting}, {6, 10, {}, {}});
  EXPECT_EQ(PngImage(picture(example(g))).colour(40 + 180, 100 + 380),
            PngImage::packed(colour_at(0.9)));
}

TEST(Picture, AnUntitledStillRunOfOneTemperatureIsDrawnToo) {
  const Geometry g({Shape::Annulus, 1, 0, 1, Sides::Reflecting}, {4, 4, {}, {}});
  PictureContents c = example(g);
  c.title.clear();
  std::fill(c.temperature.begin(), c.temperature.end(), 0.0);
  std::fill(c.profiles.velocity_lateral_rms.begin(), c.profiles.velocity_lateral_rms.end(), 0.0);
  std::fill(c.profiles.velocity_radial_rms.begin(), c.profiles.velocity_radial_rms.end(), 0.0);
  c.history = {{0}, {0}, {0}, {0}, {0}};
  EXPECT_THAT(picture(c), testing::StartsWith("\x89PNG"));
}

TEST(Picture, ReadsTheHistoryUpToATornRow) {
  HistoryRow row;
  row.time = 0.25;
  row.nusselt_inner = 3;
  row.temperature_outer = -1;
  const std::string whole = history_row(row);
  const HeatFlowHistory h =
      heat_flow_history(history_head() + whole + whole.substr(0, whole.size() / 2), "h.csv");
  EXPECT_THAT(h.time, ElementsAre(0.25));
  EXPECT_THAT(h.nusselt_inner, ElementsAre(3));
  EXPECT_THAT(h.temperature_outer, ElementsAre(-1));
}

TEST(Picture, UnitsOfABodyAreThoseOfItsScales) {
  Body body{2450e3, 1225e3, 4.1, 3400, 3e-5, 3.5, 1200, 230, 1400, 1e20};
  const PictureUnits units = picture_units(body);
  EXPECT_DOUBLE_EQ(units.length(1), 1225);
  EXPECT_DOUBLE_EQ(units.temperature(1), 1630);
  EXPECT_EQ(units.time.unit, "Myr");
}

Snapshot snapshot_of(const std::shared_ptr<const Decomposition>& d) {
  Snapshot s;
  s.temperature = CellField(d, 0.5);
  s.stream_function = CornerField(d, 0);
  s.profiles = profiles_of(d->geometry());
  return s;
}

std::shared_ptr<const Decomposition> small_circle() {
  return decompose({Shape::Annulus, 1.2, 0, 2 * std::numbers::pi, Sides::Periodic}, {6, 24, {}, {}},
                   MPI_COMM_WORLD);
}

TEST(ParallelPicture, IsWrittenByTheFirstRank) {
  const test::Scratch scratch;
  const std::string history = scratch / "history.csv", path = scratch / "picture.png";
  if (scratch.first_rank()) test::write_text(history, history_head() + history_row({}));
  draw_run(path, snapshot_of(small_circle()), history, "title", picture_units({}));
  if (scratch.first_rank()) {
    EXPECT_THAT(read_whole_file(path), testing::StartsWith("\x89PNG"));
  }
}

TEST(ParallelPicture, AMissingFolderIsAnErrorOnAllRanks) {
  const test::Scratch scratch;
  const std::string history = scratch / "history.csv", path = scratch / "gone/picture.png";
  if (scratch.first_rank()) test::write_text(history, history_head() + history_row({}));
  EXPECT_THAT(message_of<OutputError>([&] {
                draw_run(path, snapshot_of(small_circle()), history, "", picture_units({}));
              }),
              HasSubstr("gone/picture.png"));
}

TEST(Picture, IsAmongTheFilesOfARun) {
  const test::Scratch scratch;
  std::filesystem::create_directories(scratch / "pictures");
  for (const std::string name :
       {"picture_0003.png", "picture_of_me.png", "picture_0003.png.partial"})
    test::write_text(scratch / ("pictures/" + name), "x");
  EXPECT_EQ(picture_name(3), "pictures/picture_0003.png");
  EXPECT_THAT(own_files({scratch.path()}),
              testing::UnorderedElementsAre("pictures/picture_0003.png",
                                            "pictures/picture_0003.png.partial"));
}

}  // namespace
}  // namespace lidwright
