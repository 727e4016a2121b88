#include "io/picture.hpp"

#include <cairo.h>
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <memory>
#include <numbers>

#include "io/colour_map.hpp"
#include "io/contours.hpp"
#include "io/history.hpp"
#include "io/plot_axis.hpp"
#include "io/run_folder.hpp"
#include "io/shell_map.hpp"
#include "tests/io/scratch.hpp"
#include "tests/support/shells.hpp"

namespace lidwright {
namespace {

using test::message_of;
using testing::ElementsAre;
using testing::HasSubstr;

TEST(ColourMap, IsTheInverseOfItself) {
  const Colour c{0.8, 0.3, 0.1}, back = to_srgb(to_oklab(c));
  EXPECT_NEAR(back.red, c.red, 1e-6);
  EXPECT_NEAR(back.green, c.green, 1e-6);
  EXPECT_NEAR(back.blue, c.blue, 1e-6);
}

/// Ottosson's definition makes white exactly (1, 0, 0), to the digits of its matrices.
TEST(ColourMap, WhiteIsFullLightness) {
  const OkLab white = to_oklab({1, 1, 1});
  EXPECT_NEAR(white.lightness, 1, 1e-6);
  EXPECT_NEAR(std::hypot(white.a, white.b), 0, 1e-6);
}

TEST(ColourMap, LightnessRisesAndStepsAreEven) {
  constexpr int steps = 64;
  double least = 1, largest = 0;
  for (int k = 0; k < steps; ++k) {
    const OkLab p = to_oklab(colour_at(k / 64.0)), q = to_oklab(colour_at((k + 1) / 64.0));
    EXPECT_GT(q.lightness, p.lightness) << k;
    least = std::min(least, distance(p, q));
    largest = std::max(largest, distance(p, q));
  }
  EXPECT_LT(largest, 1.03 * least);
  EXPECT_GT(least * steps, 0.65) << "the map is long enough to tell values apart";
}

TEST(ColourMap, EveryColourCanBeShown) {
  for (int k = -10; k <= 110; ++k) {
    const Colour c = colour_at(k / 100.0);
    for (const double x : {c.red, c.green, c.blue}) {
      EXPECT_GE(x, 0) << k;
      EXPECT_LE(x, 1) << k;
    }
  }
}

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

TEST(Contours, ALineRunsWhereTheLevelLies) {
  const std::vector<double> rising{0, 1, 2, 0, 1, 2};  // value = i on 3 x 2 places
  const auto line = plot::contour({3, 2, rising}, 1.25);
  ASSERT_EQ(line.size(), 1u);
  EXPECT_DOUBLE_EQ(line[0][0][0], 1.25);
  EXPECT_DOUBLE_EQ(line[0][1][0], 1.25);
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

using Surface = std::unique_ptr<cairo_surface_t, void (*)(cairo_surface_t*)>;

Surface read_png(const std::string& bytes) {
  std::string_view rest = bytes;
  const auto take = [](void* from, unsigned char* to, unsigned int n) {
    auto& source = *static_cast<std::string_view*>(from);
    if (source.size() < n) return CAIRO_STATUS_READ_ERROR;
    std::copy_n(source.begin(), n, to);
    source.remove_prefix(n);
    return CAIRO_STATUS_SUCCESS;
  };
  return {cairo_image_surface_create_from_png_stream(take, &rest), cairo_surface_destroy};
}

/// How many pixels have exactly this colour.
long pixels_of(const Surface& s, const Colour& c) {
  const auto byte = [](double x) { return static_cast<unsigned>(std::lround(255 * x)); };
  const unsigned wanted = byte(c.red) << 16 | byte(c.green) << 8 | byte(c.blue);
  const auto* pixels = reinterpret_cast<const unsigned*>(cairo_image_surface_get_data(s.get()));
  return std::count_if(pixels, pixels + picture_width * picture_height,
                       [&](unsigned p) { return (p & 0xffffff) == wanted; });
}

unsigned pixel(const Surface& s, int x, int y) {
  const auto* pixels = reinterpret_cast<const unsigned*>(cairo_image_surface_get_data(s.get()));
  return pixels[y * picture_width + x] & 0xffffff;
}

class PictureOf : public testing::TestWithParam<NamedShell> {};

TEST_P(PictureOf, HasTheStatedSizeAndTheColoursOfTheTemperatures) {
  const Geometry g(GetParam().shell, GetParam().grid);
  const Surface s = read_png(picture(example(g)));
  ASSERT_EQ(cairo_surface_status(s.get()), CAIRO_STATUS_SUCCESS);
  EXPECT_EQ(cairo_image_surface_get_width(s.get()), picture_width);
  EXPECT_EQ(cairo_image_surface_get_height(s.get()), picture_height);
  EXPECT_GT(pixels_of(s, colour_at(0.9)), 10000);
  EXPECT_GT(pixels_of(s, colour_at(0.2)), 10000);
}

TEST_P(PictureOf, LeavesItsMarginsEmpty) {
  const Geometry g(GetParam().shell, GetParam().grid);
  const Surface s = read_png(picture(example(g)));
  for (int x = 0; x < picture_width; ++x)
    for (const int y : {0, 5, picture_height - 6, picture_height - 1})
      ASSERT_EQ(pixel(s, x, y), 0xffffffu) << x << ' ' << y;
  for (int y = 0; y < picture_height; ++y)
    for (const int x : {0, 10, picture_width - 11, picture_width - 1})
      ASSERT_EQ(pixel(s, x, y), 0xffffffu) << x << ' ' << y;
}

INSTANTIATE_TEST_SUITE_P(AllShells, PictureOf, testing::ValuesIn(all_shells(6, 10)), shell_name);

/// The left half of a box is hot: the pixel in its middle has the map's colour.
TEST(Picture, ThePixelInTheMiddleOfTheHotRegionHasItsColour) {
  const Geometry g({Shape::Box, 0, 0, 1, Sides::Reflecting}, {6, 10, {}, {}});
  const Surface s = read_png(picture(example(g)));
  const Colour hot = colour_at(0.9);
  const auto byte = [](double x) { return static_cast<unsigned>(std::lround(255 * x)); };
  EXPECT_EQ(pixel(s, 40 + 180, 100 + 380),
            byte(hot.red) << 16 | byte(hot.green) << 8 | byte(hot.blue));
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
