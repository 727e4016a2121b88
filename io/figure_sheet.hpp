#pragma once

#include <string>
#include <vector>

#include "io/canvas.hpp"

/// The pages that figures are drawn on: for a column or the width of a paper, or a slide.
namespace lidwright {

/// 85 mm, 180 mm, and 1920 x 1080 pixels with larger text.
enum class FigureSize { OneColumn, TwoColumn, Slide };

/// Of a figure, but for its height.
struct FigureStyle {
  FigureSize size = FigureSize::OneColumn;
  plot::Format format = plot::Format::Png;
};

/// The words of the command line.
std::vector<std::string> size_words();
std::vector<std::string> format_words();
/// Throw InputError with what is allowed.
FigureSize figure_size(const std::string& word);
plot::Format figure_format(const std::string& word);
/// "png", "svg", "pdf": the end of a file's name too.
std::string format_word(plot::Format);

/// Throws InputError: "OPTION 'WORD': must be one of A, B, C (did you mean 'B'?)".
[[noreturn]] void refuse_word(const std::string& option, const std::string& word,
                              const std::vector<std::string>& allowed);

/// Width in design units, of which text of usual size is 14 or 15 high (7 pt in print, 17 pt on a
/// slide that is 7.5 inches high).
double sheet_width(FigureSize);
/// A slide's is its own, whatever is asked for.
double sheet_height(FigureSize, double wish);
plot::Sheet figure_sheet(const FigureStyle&, double height_wish, const std::string& title);

}  // namespace lidwright
