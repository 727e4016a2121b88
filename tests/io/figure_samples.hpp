#pragma once

#include <string>
#include <vector>

#include "io/figure_sheet.hpp"

/// What the tests of figures share.
namespace lidwright::test {

inline std::vector<FigureStyle> all_sizes() {
  return {{FigureSize::OneColumn, plot::Format::Png},
          {FigureSize::TwoColumn, plot::Format::Png},
          {FigureSize::Slide, plot::Format::Png}};
}

inline const std::string long_title(200, 'W');

}  // namespace lidwright::test
