#pragma once

#include <cstddef>
#include <vector>

#include "io/canvas.hpp"
#include "io/colour_map.hpp"
#include "io/shell_map.hpp"

/// Numbers in the cells of a shell as an image.
namespace lidwright::plot {

/// The number in the cell that holds a place; beyond the shell, in the nearest cell.
class CellReader {
 public:
  /// Numbers column by column, radial index fastest; both are kept by reference.
  CellReader(const Geometry&, const std::vector<double>& cells);
  double operator()(double radius, double lateral) const;

 private:
  const std::vector<double>& cells_;
  std::vector<double> radii_, laterals_;
};

/// The numbers as colours over `range`; a cell is drawn as the region between its faces.
void draw_cells(Canvas&, const ShellMap&, const std::vector<double>& cells, const Interval& range,
                ColourMap = ColourMap::Warm);

}  // namespace lidwright::plot
