#pragma once

#include <cstddef>
#include <span>
#include <vector>

/// Fewer points of a long record that draw the same curve. Pure.
namespace lidwright {

/// Rows to draw, rising: the first, the last, and the least and the largest value of each of equal
/// stretches of rows, so that no extreme is lost; all rows when there are `most` of them or fewer.
/// A stretch that holds a value that is not finite keeps the first such row, where the curve
/// breaks. `most` >= 8 bounds the rows but for those breaks.
std::vector<std::size_t> rows_to_draw(std::span<const double> values, std::size_t most);

/// `most` of 0 ... count - 1 or all of them, evenly spaced, with the first and the last.
std::vector<std::size_t> evenly_chosen(std::size_t count, std::size_t most);

}  // namespace lidwright
