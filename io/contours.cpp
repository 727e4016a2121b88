#include "io/contours.hpp"

#include <algorithm>
#include <cstddef>
#include <map>
#include <utility>

namespace lidwright::plot {
namespace {

struct Node {
  int i, j;
};

/// Where the level crosses the side between two places: the same to the last bit from both squares
/// that share the side.
std::array<double, 2> crossing(const Lattice& lattice, double level, Node p, Node q) {
  if (p.j > q.j || (p.j == q.j && p.i > q.i)) std::swap(p, q);
  const double below = lattice(p.i, p.j) - level, above = lattice(q.i, q.j) - level;
  const double share = below / (below - above);
  return {p.i + share * (q.i - p.i), p.j + share * (q.j - p.j)};
}

/// Where the level crosses the four sides of a square, in order around it.
struct Crossings {
  std::array<std::array<double, 2>, 4> points;
  int count = 0;
};

Crossings crossings(const Lattice& lattice, double level, const std::array<Node, 4>& square) {
  Crossings found;
  for (std::size_t k = 0; k < 4; ++k) {
    const Node p = square[k], q = square[(k + 1) % 4];
    if ((lattice(p.i, p.j) < level) == (lattice(q.i, q.j) < level)) continue;
    found.points[static_cast<std::size_t>(found.count++)] = crossing(lattice, level, p, q);
  }
  return found;
}

/// Pieces by the places of their ends.
class Joiner {
 public:
  Joiner(const std::vector<Segment>& pieces, int period)
      : pieces_(pieces), period_(period), used_(pieces.size(), false) {
    for (std::size_t k = 0; k < pieces.size(); ++k)
      for (const auto& end : pieces[k]) at_[key(end)].push_back(k);
  }

  Polyline line_from(std::size_t k) {
    used_[k] = true;
    Polyline back{pieces_[k][1], pieces_[k][0]};
    extend(back);
    std::reverse(back.begin(), back.end());
    extend(back);
    return back;
  }
  bool used(std::size_t k) const { return used_[k]; }

 private:
  using Key = std::array<double, 2>;
  Key key(const Key& place) const {
    return period_ > 0 && place[1] == period_ ? Key{place[0], 0.0} : place;
  }
  /// The unused piece that goes on from a place; none: the number of pieces.
  std::size_t next(const Key& place) const {
    for (const std::size_t k : at_.at(key(place)))
      if (!used_[k]) return k;
    return pieces_.size();
  }
  void extend(Polyline& line) {
    for (std::size_t k = next(line.back()); k < pieces_.size(); k = next(line.back())) {
      used_[k] = true;
      const bool forward = key(pieces_[k][0]) == key(line.back());
      line.push_back(pieces_[k][forward ? 1 : 0]);
    }
  }

  const std::vector<Segment>& pieces_;
  int period_;
  std::vector<bool> used_;
  std::map<Key, std::vector<std::size_t>> at_;
};

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

std::vector<Polyline> joined(const std::vector<Segment>& pieces, int period) {
  Joiner joiner(pieces, period);
  std::vector<Polyline> lines;
  for (std::size_t k = 0; k < pieces.size(); ++k)
    if (!joiner.used(k)) lines.push_back(joiner.line_from(k));
  return lines;
}

}  // namespace lidwright::plot
