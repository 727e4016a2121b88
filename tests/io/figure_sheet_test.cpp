#include "io/figure_sheet.hpp"

#include <cairo.h>
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "io/case_file.hpp"
#include "io/seal.hpp"
#include "tests/io/scratch.hpp"

namespace lidwright {
namespace {

using test::message_of;
using testing::AllOf;
using testing::HasSubstr;
using testing::Not;
using testing::StartsWith;

/// A line and a word.
std::string drawn_on(const plot::Sheet& sheet) {
  plot::Canvas canvas(sheet);
  canvas.line({{10, 10}, {100, 50}}, {{0.2, 0.2, 0.2}, 2});
  canvas.text("depth 10<sup>3</sup>", {20, 60}, {0, 0}, {15});
  return canvas.bytes();
}

std::uint32_t number_at(const std::string& bytes, std::size_t at) {
  std::uint32_t n = 0;
  for (std::size_t k = at; k < at + 4; ++k) n = n << 8 | static_cast<unsigned char>(bytes.at(k));
  return n;
}

/// PNG 1.2: width and height are the first numbers of the first chunk.
struct PngSize {
  std::uint32_t width, height;
};
PngSize size_of(const std::string& png) { return {number_at(png, 16), number_at(png, 20)}; }

TEST(FigureSheet, PrintIsAsWideAsAColumnAtThreeHundredDotsAnInch) {
  const std::string one = drawn_on(figure_sheet({}, 240, ""));
  EXPECT_EQ(size_of(one).width, 1004u) << "85 mm";
  EXPECT_EQ(size_of(one).height, 500u) << "240 units of half a point";
  const std::string two = drawn_on(figure_sheet({FigureSize::TwoColumn}, 240, ""));
  EXPECT_EQ(size_of(two).width, 2126u) << "180 mm";
}

TEST(FigureSheet, ASlideHasItsOwnHeight) {
  const PngSize size = size_of(drawn_on(figure_sheet({FigureSize::Slide}, 7, "")));
  EXPECT_EQ(size.width, 1920u);
  EXPECT_EQ(size.height, 1080u);
}

/// 300 dots an inch are 11811 a metre; every chunk ends with the checksum of its name and body.
TEST(FigureSheet, APngSaysHowLargeItIsInPrint) {
  const std::string png = drawn_on(figure_sheet({}, 240, ""));
  const std::size_t at = png.find("pHYs");
  ASSERT_EQ(at, 37u) << "right after the first chunk";
  EXPECT_EQ(number_at(png, at - 4), 9u);
  EXPECT_EQ(number_at(png, at + 4), 11811u);
  EXPECT_EQ(number_at(png, at + 8), 11811u);
  EXPECT_EQ(png[at + 12], 1);
  EXPECT_EQ(number_at(png, at + 13), crc32(png.substr(at, 13)));
}

TEST(FigureSheet, APdfEmbedsItsFontsAndSaysNoDate) {
  const std::string pdf =
      drawn_on(figure_sheet({FigureSize::OneColumn, plot::Format::Pdf}, 240, "A run"));
  EXPECT_THAT(pdf, AllOf(StartsWith("%PDF-"), HasSubstr("/FontFile"), HasSubstr("A run"),
                         Not(HasSubstr("CreationDate"))));
  EXPECT_THAT(pdf, testing::ContainsRegex("/MediaBox \\[ 0 0 240\\.9[0-9]+ 120 \\]")) << "points";
}

TEST(FigureSheet, AnSvgNeedsNoFonts) {
  const std::string svg =
      drawn_on(figure_sheet({FigureSize::OneColumn, plot::Format::Svg}, 240, ""));
  EXPECT_THAT(svg,
              AllOf(HasSubstr("<svg"), HasSubstr("width=\"240.9"), HasSubstr("height=\"120pt\""),
                    HasSubstr("glyph"), Not(HasSubstr("font-family"))));
}

TEST(FigureSheet, TheSameDrawingIsTheSameBytes) {
  for (const auto format : {plot::Format::Png, plot::Format::Svg, plot::Format::Pdf}) {
    const plot::Sheet sheet = figure_sheet({FigureSize::OneColumn, format}, 240, "");
    EXPECT_EQ(drawn_on(sheet), drawn_on(sheet)) << format_word(format);
  }
}

TEST(FigureSheet, WordsOfTheCommandLine) {
  EXPECT_EQ(figure_size("slide"), FigureSize::Slide);
  EXPECT_EQ(format_word(figure_format("pdf")), "pdf");
  EXPECT_EQ(message_of<InputError>([] { figure_format("pgn"); }),
            "--format 'pgn': must be one of png, svg, pdf (did you mean 'png'?)");
  EXPECT_THAT(message_of<InputError>([] { figure_size("colum"); }),
              HasSubstr("one-column, two-column, slide"));
}

}  // namespace
}  // namespace lidwright
