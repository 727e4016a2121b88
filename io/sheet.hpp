#pragma once

#include <string>

/// What a page becomes: its size, and the file.
namespace lidwright::plot {

enum class Format { Png, Svg, Pdf };
enum class Ground { White, Clear };

struct Sheet {
  double width, height;  ///< design units
  Format format = Format::Png;
  double pixels_per_unit = 1;  ///< of a PNG, and of the images within the others
  double points_per_unit = 0;  ///< of print, 1/72 inch; 0: a PNG that says no size
  Ground ground = Ground::White;
  std::string title = {};  ///< plain text, in a PDF's properties
};

}  // namespace lidwright::plot
