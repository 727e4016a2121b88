#include "io/figure_sheet.hpp"

#include <fmt/format.h>

#include <cmath>

#include "io/case_entries.hpp"
#include "io/case_file.hpp"

namespace lidwright {
namespace {

constexpr double points_per_mm = 72 / 25.4;
constexpr double print_points = 0.5, slide_points = 1.2;  ///< of one design unit
constexpr double print_resolution = 300;                  ///< pixels an inch
constexpr double slide_width = 800, slide_height = 450, slide_pixels = 2.4;

template <class Value>
struct Word {
  const char* word;
  Value value;
};
constexpr Word<FigureSize> sizes[] = {{"one-column", FigureSize::OneColumn},
                                      {"two-column", FigureSize::TwoColumn},
                                      {"slide", FigureSize::Slide}};
constexpr Word<plot::Format> formats[] = {
    {"png", plot::Format::Png}, {"svg", plot::Format::Svg}, {"pdf", plot::Format::Pdf}};

template <class Table>
std::vector<std::string> words_of(const Table& table) {
  std::vector<std::string> words;
  for (const auto& entry : table) words.emplace_back(entry.word);
  return words;
}

template <class Table>
auto value_of(const Table& table, const std::string& option, const std::string& word) {
  for (const auto& entry : table)
    if (word == entry.word) return entry.value;
  refuse_word(option, word, words_of(table));
}

}  // namespace

void refuse_word(const std::string& option, const std::string& word,
                 const std::vector<std::string>& allowed) {
  throw InputError(fmt::format("{} '{}': must be one of {}{}", option, word,
                               fmt::join(allowed, ", "), case_text::nearest(word, allowed)));
}

std::vector<std::string> size_words() { return words_of(sizes); }

std::vector<std::string> format_words() { return words_of(formats); }

FigureSize figure_size(const std::string& word) { return value_of(sizes, "--size", word); }

plot::Format figure_format(const std::string& word) { return value_of(formats, "--format", word); }

std::string format_word(plot::Format format) {
  for (const auto& entry : formats)
    if (entry.value == format) return entry.word;
  return {};
}

double sheet_width(FigureSize size) {
  if (size == FigureSize::Slide) return slide_width;
  return (size == FigureSize::OneColumn ? 85 : 180) * points_per_mm / print_points;
}

double sheet_height(FigureSize size, double wish) {
  return size == FigureSize::Slide ? slide_height : std::ceil(wish);
}

plot::Sheet figure_sheet(const FigureStyle& style, double height_wish, const std::string& title) {
  const bool slide = style.size == FigureSize::Slide;
  return {sheet_width(style.size),
          sheet_height(style.size, height_wish),
          style.format,
          slide ? slide_pixels : print_resolution / 72 * print_points,
          slide ? slide_points : print_points,
          plot::Ground::White,
          title};
}

}  // namespace lidwright
