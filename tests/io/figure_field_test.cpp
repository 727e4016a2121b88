#include "io/figure_field.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "io/colour_bar.hpp"
#include "io/field_layout.hpp"
#include "io/flow_lines.hpp"
#include "tests/io/png_image.hpp"
#include "tests/io/scratch.hpp"
#include "tests/support/shells.hpp"

namespace lidwright {
namespace {

using plot::Spacing;
using std::numbers::pi;
using test::message_of;
using test::PngImage;
using testing::AllOf;
using testing::Each;
using testing::HasSubstr;
using testing::StartsWith;

/// Hot (0.9) in the first half of the columns, cold (0.2) in the others; viscosity falls by 1e6
/// with depth; the flow follows psi = product of sines.
SavedFields fields_on(const Geometry& g) {
  SavedFields f;
  f.grid = g.grid();
  for (int j = 0; j < g.lateral_cells(); ++j)
    for (int i = 0; i < g.radial_cells(); ++i) {
      f.temperature.push_back(j < g.lateral_cells() / 2 ? 0.9 : 0.2);
      f.viscosity.push_back(std::pow(10.0, -6 * g.depth(i)));
      f.strain_rate.push_back(3);
      f.velocity_radial.push_back(3);
      f.velocity_lateral.push_back(-4);
    }
  for (int j = 0; j < g.corner_columns(); ++j)
    for (int i = 0; i <= g.radial_cells(); ++i)
      f.stream_function.push_back(std::sin(pi * i / g.radial_cells()) *
                                  std::sin(4 * pi * j / g.lateral_cells()));
  return f;
}

SavedRun run_on(const Geometry& g) {
  SavedRun run;
  run.settings.model.shell = g.shell();
  run.settings.model.grid = g.grid();
  return run;
}

/// One figure and what it needs.
struct Drawing {
  explicit Drawing(const NamedShell& s, FieldKind kind = FieldKind::Temperature)
      : geometry(s.shell, s.grid),
        fields(fields_on(geometry)),
        view(field_view(kind, fields, run_on(geometry))),
        colours(colour_range(kind, view.span)) {}
  OverlayData overlays(const Overlays& drawn) const {
    OverlayData data{drawn, geometry, fields, picture_units({})};
    data.lid_temperature = 0.5;
    return data;
  }
  FieldFigure figure(const Overlays& drawn = {}) const {
    return {"A run & more", "time 0.25", view, colours, overlays(drawn)};
  }

  Geometry geometry;
  SavedFields fields;
  FieldView view;
  ColourRange colours;
};

constexpr Overlays everything{true, true, true, true};
const NamedShell unit_box{"Box", {Shape::Box, 0, 0, 1, Sides::Reflecting}, {8, 8, {}, {}}};

TEST(FieldView, QuantitiesByHand) {
  const Drawing d(unit_box);
  const SavedRun run = run_on(d.geometry);
  EXPECT_THAT(field_view(FieldKind::Speed, d.fields, run).cells, Each(5.0));
  const FieldView stress = field_view(FieldKind::Stress, d.fields, run);
  EXPECT_DOUBLE_EQ(stress.cells[3], 6 * d.fields.viscosity[3]);
  EXPECT_THAT(stress.label.unit, HasSubstr("ref"));
}

const Body a_body{2450e3, 1225e3, 4.1, 3400, 3e-5, 3.5, 1200, 230, 1400, 1e20};

TEST(FieldView, UnitsOfABody) {
  Drawing d(unit_box);
  const SavedRun run = run_on(d.geometry);
  d.fields.settings.body = a_body;
  const Scales s = scales_of(a_body);
  const FieldView rate = field_view(FieldKind::StrainRate, d.fields, run);
  EXPECT_DOUBLE_EQ(rate.cells[0], 3 / s.time);
  EXPECT_EQ(rate.label.unit, "1/s");
  const FieldView stress = field_view(FieldKind::Stress, d.fields, run);
  EXPECT_DOUBLE_EQ(stress.cells[0], 6 * d.fields.viscosity[0] * s.stress / 1e6);
  EXPECT_EQ(stress.label.unit, "MPa");
  EXPECT_DOUBLE_EQ(field_view(FieldKind::Temperature, d.fields, run).cells[0], 230 + 0.9 * 1400);
}

/// No kelvin, no mm/yr, no wall: but the viscosity is that of the state at rest.
TEST(FieldView, ADisturbanceHasNoScale) {
  Drawing d(unit_box);
  SavedRun run = run_on(d.geometry);
  run.kind = RunKind::Onset;
  d.fields.settings.body = a_body;
  for (const FieldKind kind :
       {FieldKind::Temperature, FieldKind::Speed, FieldKind::StrainRate, FieldKind::Stress})
    EXPECT_EQ(field_view(kind, d.fields, run).label.unit, "to no scale");
  const FieldView temperature = field_view(FieldKind::Temperature, d.fields, run);
  EXPECT_EQ(temperature.cells, d.fields.temperature);
  EXPECT_EQ(temperature.span.high, 0.9);
  EXPECT_EQ(field_view(FieldKind::Viscosity, d.fields, run).label.unit, "Pa s");
  const PictureUnits over = field_units(d.fields, run.kind);
  EXPECT_EQ(over.temperature(0.5), 0.5) << "isotherms";
  EXPECT_EQ(over.velocity(5), 5) << "arrows";
}

TEST(FieldView, TemperaturesSpanTheWallsToo) {
  const Drawing d(unit_box);
  EXPECT_EQ(d.view.span.low, 0);
  EXPECT_EQ(d.view.span.high, 1);
  SavedRun disturbance = run_on(d.geometry);
  disturbance.kind = RunKind::Onset;
  EXPECT_EQ(field_view(FieldKind::Temperature, d.fields, disturbance).span.high, 0.9);
}

TEST(ColourRange, CountsPowersWhereTheyAreMany) {
  EXPECT_EQ(colour_range(FieldKind::Viscosity, {1, 1e6, 1}).spacing, Spacing::Logarithmic);
  EXPECT_EQ(colour_range(FieldKind::Viscosity, {1, 9, 1}).spacing, Spacing::Linear);
  EXPECT_EQ(colour_range(FieldKind::Temperature, {0.01, 1, 0.01}).spacing, Spacing::Linear);
}

TEST(ColourRange, AStillPointDoesNotTakeTheScale) {
  const ColourRange c = colour_range(FieldKind::StrainRate, {0, 1e3, 2});
  EXPECT_EQ(c.spacing, Spacing::Logarithmic);
  EXPECT_EQ(c.range.low, 2);
}

TEST(ColourRange, IsNeverEmpty) {
  for (const auto kind : {FieldKind::Temperature, FieldKind::Viscosity, FieldKind::Speed})
    for (const double value : {0.0, 1.0, -3.0, 1e20})
      EXPECT_FALSE(colour_range(kind, {value, value, value}).range.empty()) << value;
}

TEST(ColourRange, OfAFilmHoldsAllItsSpans) {
  const FieldSpan both = joined({1, 5, 2}, {0.5, 4, 3});
  EXPECT_EQ(both.low, 0.5);
  EXPECT_EQ(both.high, 5);
  EXPECT_EQ(both.usual, 2);
}

TEST(ColourRange, AskedFor) {
  const ColourRange own{{1, 100}, Spacing::Logarithmic};
  const ColourRange c = colour_range_asked("1e-2:3", own);
  EXPECT_EQ(c.range.low, 0.01);
  EXPECT_EQ(c.range.high, 3);
  EXPECT_EQ(c.spacing, Spacing::Logarithmic);
  for (const char* wrong : {"", "3", "3:", ":3", "3:2", "2:2", "1:2:3", "a:b", "nan:1", "0:inf"})
    EXPECT_THAT(message_of<InputError>([&] { colour_range_asked(wrong, own); }),
                HasSubstr("LOW:HIGH"))
        << wrong;
  EXPECT_THAT(message_of<InputError>([&] { colour_range_asked("0:3", own); }),
              HasSubstr("above 0"));
}

TEST(FieldView, SharesRunFromLowToHigh) {
  FieldView view{FieldKind::Viscosity, {}, ColourMap::Cool, {1, 10, 100, 0.1, 0}, {}};
  const auto s = shares(view, {{1, 100}, Spacing::Logarithmic});
  EXPECT_NEAR(s[0], 0, 1e-12);
  EXPECT_NEAR(s[1], 0.5, 1e-12);
  EXPECT_NEAR(s[2], 1, 1e-12);
  EXPECT_LT(s[3], 0) << "below the range";
  EXPECT_LE(s[4], 0) << "0 has no logarithm";
}

bool overlap(const plot::Frame& p, const plot::Frame& q) {
  return p.left < q.right() && q.left < p.right() && p.top < q.bottom() && q.top < p.bottom();
}
bool holds(const plot::Frame& page, const plot::Frame& f) {
  return f.left >= page.left && f.top >= page.top && f.right() <= page.right() + 1e-9 &&
         f.bottom() <= page.bottom() + 1e-9;
}

struct NamedSize {
  const char* name;
  FigureSize size;
};
const NamedSize sizes[] = {{"one column", FigureSize::OneColumn},
                           {"two columns", FigureSize::TwoColumn},
                           {"slide", FigureSize::Slide}};

/// From a box twenty times as wide as high to one a fifth as wide.
TEST(FieldLayout, PartsHaveRoomForThemselvesAndTheirLabels) {
  for (const auto& [name, size] : sizes)
    for (const double width : {0.2, 0.5, 0.8, 1.0, 1.3, 2.0, 4.0, 20.0})
      for (const double legend : {0.0, 42.0}) {
        SCOPED_TRACE(testing::Message() << name << " width " << width << " legend " << legend);
        const double bar_room = 70;
        const FieldLayout l = field_layout(size, {{{0, width}, {0, 1}}, bar_room, legend});
        const plot::Frame page{0, 0, sheet_width(size), sheet_height(size, l.height)};
        plot::Frame bar = l.bar;
        if (l.bar_below) {
          bar.height += plot::level_bar_room;
        } else {
          bar.left -= plot::bar_title_room;
          bar.width += plot::bar_title_room + bar_room;
        }
        for (const plot::Frame& f : {l.heading, l.shell, bar, l.legend})
          EXPECT_TRUE(holds(page, f))
              << f.left << ' ' << f.top << ' ' << f.width << ' ' << f.height;
        EXPECT_FALSE(overlap(l.shell, bar));
        EXPECT_FALSE(overlap(l.shell, l.heading));
        EXPECT_FALSE(overlap(bar, l.heading));
        EXPECT_FALSE(legend > 0 && (overlap(l.shell, l.legend) || overlap(bar, l.legend)));
        EXPECT_NEAR(l.shell.width, width * l.shell.height, 1e-9) << "true proportions";
      }
}

class FieldFigureOf : public testing::TestWithParam<NamedShell> {};

TEST_P(FieldFigureOf, HasItsSizeItsColoursAndWhiteMargins) {
  const Drawing d(GetParam());
  const PngImage image(draw_field(d.figure(), {}));
  ASSERT_TRUE(image.sound());
  EXPECT_EQ(image.width(), 1004);
  EXPECT_GT(image.count(colour_at(0.9)), 8000);
  EXPECT_GT(image.count(colour_at(0.2)), 8000);
  EXPECT_TRUE(white_margins(image, 8));
}

TEST_P(FieldFigureOf, IsDrawnWithEverythingInEveryFormat) {
  const Drawing d(GetParam(), FieldKind::Viscosity);
  const FieldFigure figure = d.figure(everything);
  const std::string png = draw_field(figure, {FigureSize::OneColumn, plot::Format::Png});
  EXPECT_TRUE(white_margins(PngImage(png), 8));
  EXPECT_THAT(draw_field(figure, {FigureSize::OneColumn, plot::Format::Pdf}),
              AllOf(StartsWith("%PDF-"), HasSubstr("/FontFile"), HasSubstr("/Subtype /Image")));
  EXPECT_THAT(draw_field(figure, {FigureSize::OneColumn, plot::Format::Svg}),
              AllOf(HasSubstr("<svg"), HasSubstr("data:image/png"), HasSubstr("</svg>")));
}

INSTANTIATE_TEST_SUITE_P(AllShells, FieldFigureOf, testing::ValuesIn(all_shells(6, 10)),
                         shell_name);

/// The left half is hot; the place is found through the layout.
TEST(FieldFigure, APixelHasTheColourOfItsCell) {
  const Drawing d(unit_box);
  const FieldLayout l = field_layout(FigureSize::OneColumn, {{{0, 1}, {0, 1}}, 30, 0});
  ASSERT_TRUE(l.bar_below) << "so that the shell stands where it does in the figure";
  const PngImage image(draw_field(d.figure(), {}));
  const auto pixel = [&](double x, double y) {
    const double scale = 300 / 72.0 / 2;
    return image.colour(static_cast<int>(scale * (l.shell.left + x * l.shell.width)),
                        static_cast<int>(scale * (l.shell.top + y * l.shell.height)));
  };
  for (const double y : {0.02, 0.5, 0.98}) {
    EXPECT_EQ(pixel(0.02, y), PngImage::packed(colour_at(0.9)));
    EXPECT_EQ(pixel(0.49, y), PngImage::packed(colour_at(0.9)));
    EXPECT_EQ(pixel(0.51, y), PngImage::packed(colour_at(0.2)));
  }
}

TEST(FieldFigure, TheSameRunIsTheSameBytes) {
  const Drawing d(unit_box);
  for (const auto format : {plot::Format::Png, plot::Format::Svg, plot::Format::Pdf})
    EXPECT_EQ(draw_field(d.figure(everything), {FigureSize::OneColumn, format}),
              draw_field(d.figure(everything), {FigureSize::OneColumn, format}))
        << format_word(format);
}

TEST(FieldFigure, ARunAtRestIsDrawnToo) {
  Drawing d(unit_box, FieldKind::StrainRate);
  for (auto* all : {&d.fields.strain_rate, &d.fields.velocity_radial, &d.fields.velocity_lateral,
                    &d.fields.stream_function, &d.fields.temperature})
    std::fill(all->begin(), all->end(), 0.0);
  d.view = field_view(FieldKind::StrainRate, d.fields, run_on(d.geometry));
  d.colours = colour_range(FieldKind::StrainRate, d.view.span);
  FieldFigure figure = d.figure(everything);
  figure.overlays.lid_temperature = std::nan("");
  EXPECT_TRUE(PngImage(draw_field(figure, {})).sound());
}

TEST(FieldOverlays, WordsOfTheCommandLine) {
  EXPECT_TRUE(overlays_of({"lid", "arrows"}).lid);
  EXPECT_FALSE(overlays_of({"lid"}).isotherms);
  EXPECT_EQ(message_of<InputError>([] { overlays_of({"arows"}); }),
            "--with 'arows': must be one of flow-lines, arrows, lid, isotherms (did you mean "
            "'arrows'?)");
}

/// Only a row with an internal temperature and without a rheological one says so.
TEST(FieldOverlays, TheLawLeavesNoLidWhereTheRowSaysSo) {
  const double none = std::nan("");
  const HistoryTable h{{"time", "temperature_internal", "rheological_temperature"},
                       {"1", "1", "1"},
                       {{0, 1}, {0.8, none}, {none, none}}};
  EXPECT_TRUE(lid_undefined_by_law(h, 0, "h"));
  EXPECT_FALSE(lid_undefined_by_law(h, 1, "h"));
  HistoryTable empty = h;
  for (auto& column : empty.columns) column.clear();
  EXPECT_FALSE(lid_undefined_by_law(empty, 0, "h"));
}

/// T_i - 2.2 DT_rh of the nearer row.
TEST(FieldOverlays, TheLidsBaseIsFromTheNearestRow) {
  const HistoryTable h{{"time", "temperature_internal", "rheological_temperature"},
                       {"1", "1", "1"},
                       {{0, 1}, {0.8, 0.9}, {0.1, 0.05}}};
  EXPECT_DOUBLE_EQ(lid_base_temperature(h, 0.4, "h"), 0.8 - 0.22);
  EXPECT_DOUBLE_EQ(lid_base_temperature(h, 0.6, "h"), 0.9 - 0.11);
  EXPECT_FALSE(lid_undefined_by_law(h, 0.4, "h"));
  EXPECT_THAT(message_of<InputError>([] {
                lid_base_temperature({{"time"}, {"1"}, {{0}}}, 0, "h");
              }),
              HasSubstr("temperature_internal"));
}

/// All cells move alike: an arrow is as long as all usual ones.
TEST(Arrows, TheFastestOfAHundredSetTheLength) {
  std::vector<double> radial(1000, 3.0), lateral(1000, -4.0);
  radial[7] = 1e6;
  EXPECT_DOUBLE_EQ(plot::arrow_scale({radial, lateral}), plot::usual_arrow / 5);
  const std::vector<double> still(10, 0.0);
  EXPECT_EQ(plot::arrow_scale({still, still}), 0);
}

}  // namespace
}  // namespace lidwright
