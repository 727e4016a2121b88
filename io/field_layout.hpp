#pragma once

#include "io/canvas.hpp"
#include "io/figure_sheet.hpp"
#include "io/shell_map.hpp"

/// Where the parts of a field's figure stand on the page. Pure.
namespace lidwright {

/// What must find room.
struct FieldParts {
  plot::Extent shell;
  double bar_room = 0;       ///< right of an upright colour bar, for its numbers
  double legend_height = 0;  ///< 0: none
};

struct FieldLayout {
  double height = 0;  ///< of the page
  plot::Frame heading, shell, bar, legend;
  bool bar_below = false;
};

/// The colour bar stands beside the shell, or below it where that leaves more room for the shell.
FieldLayout field_layout(FigureSize, const FieldParts&);

/// Free on all four sides of the page.
double page_margin(FigureSize);

}  // namespace lidwright
