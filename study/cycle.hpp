#pragma once

#include <span>
#include <vector>

/// The extrema of a periodic history of two beats a cycle, and its period.
namespace lidwright {

/// A turning point of a history: of the parabola through three steps.
struct Turn {
  double time = 0, value = 0;
  bool maximum = false;
};
std::vector<Turn> turns(std::span<const double> time, std::span<const double> value);

/// Means over the last cycles. A cycle: the larger maximum, the minimum after it, the smaller
/// maximum, its minimum.
struct Beats {
  int cycles = 0;  ///< found; 0: the history is no cycle of two beats
  double maximum_1 = 0, minimum_1 = 0, maximum_2 = 0, minimum_2 = 0;
  double period = 0;  ///< of the whole cycle
  double wander = 0;  ///< largest range of one of the extrema over the cycles: 0 when they repeat
};

/// Of the last `cycles` cycles, >= 2, or of as many as there are.
Beats beats(std::span<const double> time, std::span<const double> value, int cycles);

}  // namespace lidwright
