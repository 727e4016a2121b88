#include "solver/stencil_matrix.hpp"

#include <algorithm>

namespace lidwright {
namespace {

/// Coefficients on psi of a linear function of psi at a few corners, read off by unit vectors, so
/// that the matrix and the factored form share one source.
class UnitPsi {
 public:
  explicit UnitPsi(Corner on) : on_(on) {}
  double operator[](Corner k) const { return k.i == on_.i && k.j == on_.j ? 1 : 0; }

 private:
  Corner on_;
};

std::array<Corner, 4> corners_of(Cell c) {
  return {{{c.i, c.j}, {c.i + 1, c.j}, {c.i, c.j + 1}, {c.i + 1, c.j + 1}}};
}

/// Corners on which the shear of a corner depends: its star, or at a wall itself and the one next
/// to it.
std::array<Corner, 5> star_of(Corner k, int last_row) {
  if (k.i == 0) return {{{0, k.j}, {1, k.j}, {0, k.j}, {0, k.j}, {0, k.j}}};
  if (k.i == last_row) return {{{k.i, k.j}, {k.i - 1, k.j}, {k.i, k.j}, {k.i, k.j}, {k.i, k.j}}};
  return {{{k.i, k.j}, {k.i - 1, k.j}, {k.i + 1, k.j}, {k.i, k.j - 1}, {k.i, k.j + 1}}};
}

}  // namespace

StencilMatrix::StencilMatrix(const Power& serial)
    : rows_(serial.geometry().radial_cells() + 1),
      columns_(serial.geometry().corner_columns()),
      periodic_(serial.geometry().periodic()),
      common_row_(serial.through_flow() ? serial.geometry().radial_cells() : -1) {
  build_pattern(serial);
}

long StencilMatrix::unknown(Corner k) const {
  int j = k.j;
  if (periodic_) j = (j % columns_ + columns_) % columns_;
  if (k.i < 0 || k.i >= rows_ || j < 0 || j >= columns_) return -1;
  if (k.i == common_row_) return matrix_.size - 1;
  return unknown_[static_cast<std::size_t>(j) * rows_ + k.i];
}

void StencilMatrix::build_pattern(const Power& serial) {
  long count = 0;
  unknown_.assign(static_cast<std::size_t>(rows_) * columns_, -1);
  for (int j = 0; j < columns_; ++j)
    for (int i = 0; i < rows_; ++i)
      if (!serial.fixed({i, j}) && !serial.common({i, j}))
        unknown_[static_cast<std::size_t>(j) * rows_ + i] = count++;
  const long free_corners = count;
  if (common_row_ >= 0) unknown_[common_row_] = count++;
  matrix_.size = count;

  // Entries (column = smaller unknown, row = larger), with where they come from.
  struct Where {
    long column, row;
    long* slot;
  };
  std::vector<Where> wanted;
  stencil_slot_.assign(static_cast<std::size_t>(count), {});
  common_slot_.assign(static_cast<std::size_t>(count), -1);
  for (int j = 0; j < columns_; ++j)
    for (int i = 0; i < rows_; ++i) {
      const long a = unknown({i, j});
      if (a < 0 || a >= free_corners) continue;
      for (std::size_t n = 0; n < half_.size(); ++n) {
        const long b = unknown({i + half_[n].di, j + half_[n].dj});
        long& slot = stencil_slot_[static_cast<std::size_t>(a)][n];
        slot = -1;
        if (b >= 0 && b < free_corners) wanted.push_back({std::min(a, b), std::max(a, b), &slot});
      }
      if (common_row_ >= 0 && i >= common_row_ - 2)
        wanted.push_back({a, count - 1, &common_slot_[static_cast<std::size_t>(a)]});
    }
  if (common_row_ >= 0)
    wanted.push_back({count - 1, count - 1, &common_slot_[static_cast<std::size_t>(count - 1)]});
  std::sort(wanted.begin(), wanted.end(), [](const Where& x, const Where& y) {
    return x.column != y.column ? x.column < y.column : x.row < y.row;
  });
  matrix_.column_start.assign(static_cast<std::size_t>(count) + 1, 0);
  for (const Where& w : wanted) {
    const bool same = !matrix_.row.empty() && matrix_.row.back() == w.row &&
                      matrix_.column_start[static_cast<std::size_t>(w.column) + 1] > 0;
    if (!same) {
      matrix_.row.push_back(w.row);
      ++matrix_.column_start[static_cast<std::size_t>(w.column) + 1];
    }
    *w.slot = static_cast<long>(matrix_.row.size()) - 1;
  }
  for (std::size_t c = 0; c < static_cast<std::size_t>(count); ++c)
    matrix_.column_start[c + 1] += matrix_.column_start[c];
  matrix_.value.assign(matrix_.row.size(), 0.0);
}

void StencilMatrix::add_pair(const Entry& a, const Entry& b, double weight) {
  const long ua = unknown(a.corner), ub = unknown(b.corner);
  if (ua < 0 || ub < 0) return;
  const double x = weight * a.weight * b.weight;
  const bool a_common = a.corner.i == common_row_, b_common = b.corner.i == common_row_;
  if (a_common || b_common) {
    matrix_.value[static_cast<std::size_t>(
        common_slot_[static_cast<std::size_t>(a_common ? ub : ua)])] += x;
    return;
  }
  const int di = b.corner.i - a.corner.i, dj = b.corner.j - a.corner.j;
  for (std::size_t n = 0; n < half_.size(); ++n)
    if (half_[n].di == di && half_[n].dj == dj) {
      matrix_.value[static_cast<std::size_t>(stencil_slot_[static_cast<std::size_t>(ua)][n])] += x;
      return;
    }
}

void StencilMatrix::add_row(const Entry* entries, int count, double weight) {
  // Every ordered pair: add_pair keeps those of the half stencil, so each couple of corners counts
  // once, and a couple with the common value on one side counts in the order (free, common) only.
  for (int a = 0; a < count; ++a)
    for (int b = 0; b < count; ++b) {
      const bool common_first =
          entries[a].corner.i == common_row_ && entries[b].corner.i != common_row_;
      if (!common_first) add_pair(entries[a], entries[b], weight);
    }
}

void StencilMatrix::assemble(const Power& serial) {
  const Geometry& g = serial.geometry();
  std::fill(matrix_.value.begin(), matrix_.value.end(), 0.0);
  for (int j = 0; j < g.lateral_cells(); ++j)
    for (int i = 0; i < g.radial_cells(); ++i) {
      const Cell c{i, j};
      const std::array<Corner, 4> corners = corners_of(c);
      std::array<Entry, 4> rr, tt, pp;
      for (std::size_t n = 0; n < 4; ++n) {
        const Normal e = deviatoric_strain(g, face_velocities(g, UnitPsi(corners[n]), c), c);
        rr[n] = {corners[n], e.rr};
        tt[n] = {corners[n], e.tt};
        pp[n] = {corners[n], e.pp};
      }
      for (const auto* row : {&rr, &tt, &pp}) add_row(row->data(), 4, serial.cell_weight(c));
    }
  for (int j = 0; j < columns_; ++j)
    for (int i = 0; i < rows_; ++i) {
      const Corner k{i, j};
      if (!serial.has_shear(k)) continue;
      const ShearRow row = serial.shear_row(k);
      const std::array<Corner, 5> corners = star_of(k, rows_ - 1);
      const int count = g.on_wall(i) ? 2 : 5;
      std::array<Entry, 5> entries;
      for (int n = 0; n < count; ++n)
        entries[static_cast<std::size_t>(n)] = {
            corners[static_cast<std::size_t>(n)],
            shear(g, UnitPsi(corners[static_cast<std::size_t>(n)]), row)};
      add_row(entries.data(), count, serial.corner_weight(k));
    }
}

}  // namespace lidwright
