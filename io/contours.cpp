#include "io/contours.hpp"

#include <algorithm>

namespace lidwright::plot {
namespace {

struct Node {
  int i, j;
};

/// Where the level crosses the four sides of a square, in order around it.
struct Crossings {
  std::array<std::array<double, 2>, 4> points;
  int count = 0;
};

Crossings crossings(const Lattice& lattice, double level, const std::array<Node, 4>& square) {
  Crossings found;
  for (std::size_t k = 0; k < 4; ++k) {
    const Node p = square[k], q = square[(k + 1) % 4];
    const double below = lattice(p.i, p.j) - level, above = lattice(q.i, q.j) - level;
    if ((below < 0) == (above < 0)) continue;
    const double share = below / (below - above);
    found.points[static_cast<std::size_t>(found.count++)] = {p.i + share * (q.i - p.i),
                                                             p.j + share * (q.j - p.j)};
  }
  return found;
}

}  // namespace

std::vector<Segment> contour(const Lattice& lattice, double level, int stride) {
  std::vector<Segment> segments;
  for (int j = 0; j + 1 < lattice.columns; j += stride)
    for (int i = 0; i + 1 < lattice.rows; i += stride) {
      const int i_next = std::min(i + stride, lattice.rows - 1);
      const int j_next = std::min(j + stride, lattice.columns - 1);
      const Crossings c = crossings(
          lattice, level, {Node{i, j}, Node{i_next, j}, Node{i_next, j_next}, Node{i, j_next}});
      if (c.count >= 2) segments.push_back({c.points[0], c.points[1]});
      if (c.count == 4) segments.push_back({c.points[2], c.points[3]});
    }
  return segments;
}

}  // namespace lidwright::plot
