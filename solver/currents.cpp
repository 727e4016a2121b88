#include "solver/currents.hpp"

#include <algorithm>
#include <limits>
#include <vector>

#include "mesh/operators.hpp"

namespace lidwright {
namespace {

struct RowRange {
  double mean, least, most;
};

RowRange range_of_row(const CellField& t, int row) {
  const Decomposition& d = t.decomposition();
  std::vector<double> sums(2, 0.0);
  double least = std::numeric_limits<double>::infinity(), most = -least;
  for (int j = t.owned().begin; j < t.owned().end; ++j) {
    const double here = t[{row, j}], share = d.geometry().lateral_measure(j);
    sums[0] += share * here;
    sums[1] += share;
    least = std::min(least, here);
    most = std::max(most, here);
  }
  d.sum_in_place(sums);
  return {sums[0] / sums[1], d.min(least), d.max(most)};
}

/// Columns that belong while the one before them does not.
template <class Belongs>
double beginnings(const CellField& t, Belongs&& belongs) {
  const bool first_column_begins = !t.decomposition().geometry().periodic();
  double count = 0;
  for (int j = t.owned().begin; j < t.owned().end; ++j) {
    const bool alone = j == 0 && first_column_begins;
    if (belongs(j) && (alone || !belongs(j - 1))) ++count;
  }
  return count;
}

}  // namespace

Currents count_currents(const CellField& t, const CornerField& psi, int row) {
  const RowRange r = range_of_row(t, row);
  const double hot = r.mean + current_threshold * (r.most - r.mean);
  const double cold = r.mean - current_threshold * (r.mean - r.least);
  // Twice what passes the row's middle, > 0 outwards.
  const auto flow = [&](int j) {
    return flow_through(psi, RadialFace{row, j}) + flow_through(psi, RadialFace{row + 1, j});
  };
  std::vector<double> counts{beginnings(t,
                                        [&](int j) {
                                          return t[{row, j}] > hot && flow(j) > 0;
                                        }),
                             beginnings(t, [&](int j) {
                               return t[{row, j}] < cold && flow(j) < 0;
                             })};
  t.decomposition().sum_in_place(counts);
  return {static_cast<long>(counts[0]), static_cast<long>(counts[1])};
}

}  // namespace lidwright
