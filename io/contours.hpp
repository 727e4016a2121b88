#pragma once

#include <array>
#include <vector>

/// Lines of equal value of numbers on a logically rectangular lattice.
namespace lidwright::plot {

/// Numbers with the first index fastest: value(i, j) = values[j * rows + i].
struct Lattice {
  int rows, columns;
  const std::vector<double>& values;
  double operator()(int i, int j) const {
    return values[static_cast<std::size_t>(j) * static_cast<std::size_t>(rows) +
                  static_cast<std::size_t>(i)];
  }
};

/// Both ends in lattice coordinates (i, j), between which a line runs straight.
using Segment = std::array<std::array<double, 2>, 2>;

/// The line value = level, as pieces: one through each lattice square that it crosses, two through
/// a saddle. `stride`: only every so many rows and columns are looked at (the last ones always).
std::vector<Segment> contour(const Lattice&, double level, int stride = 1);

/// The pieces joined end to end, longest possible. `period`: columns after which the lattice comes
/// back to where it began (a full circle), so that lines go on over the seam; 0: it does not.
using Polyline = std::vector<std::array<double, 2>>;
std::vector<Polyline> joined(const std::vector<Segment>&, int period = 0);

}  // namespace lidwright::plot
