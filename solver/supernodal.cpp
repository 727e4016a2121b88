#include "solver/supernodal.hpp"

#include <cstdint>

namespace lidwright {
namespace {

constexpr long panel = 4;  ///< columns taken together

/// One supernode's block: `columns` columns of `rows` numbers, the first `columns` rows its
/// diagonal part.
struct Block {
  const double* value;
  long columns, rows;
  const double* column(long j) const { return value + j * rows; }
  long below() const { return rows - columns; }
};

/// Asks for a panel's numbers to be brought near. It may lie in the next block, or outside the
/// factor, where asking does no harm; hence addresses and not pointers.
void foresee(const Block& b, long first_column) {
  const auto begin = reinterpret_cast<std::uintptr_t>(b.value);
  const auto column = sizeof(double) * static_cast<std::uintptr_t>(b.rows);
  const std::uintptr_t from = begin + static_cast<std::uintptr_t>(first_column) * column;
  constexpr std::uintptr_t cache_line = 64;
  for (std::uintptr_t a = from; a < from + panel * column; a += cache_line)
    __builtin_prefetch(reinterpret_cast<const void*>(a));
}
constexpr long ahead = 2 * panel;  ///< how many columns ahead: measured

/// Solves for x[j], ..., x[j + width - 1] and takes their part from the rest of the block's x and
/// from the rows below.
template <long width>
void eliminate(const Block& b, long j, double* __restrict x, double* __restrict below) {
  double p[width];
  for (long c = 0; c < width; ++c) {
    p[c] = x[j + c];
    for (long d = 0; d < c; ++d) p[c] -= b.column(j + d)[j + c] * p[d];
    p[c] /= b.column(j + c)[j + c];
    x[j + c] = p[c];
  }
  const double* __restrict a = b.column(j);
  const auto times_p = [&](long i) {
    double sum = 0;
    for (long c = 0; c < width; ++c) sum += a[c * b.rows + i] * p[c];
    return sum;
  };
  for (long i = j + width; i < b.columns; ++i) x[i] -= times_p(i);
  for (long i = 0; i < b.below(); ++i) below[i] += times_p(b.columns + i);
}

/// The transpose: x[j], ..., x[j + width - 1] from all that lies below them.
template <long width>
void substitute(const Block& b, long j, double* __restrict x, const double* __restrict below) {
  double sum[width] = {};
  const double* __restrict a = b.column(j);
  for (long i = j + width; i < b.columns; ++i)
    for (long c = 0; c < width; ++c) sum[c] += a[c * b.rows + i] * x[i];
  for (long i = 0; i < b.below(); ++i)
    for (long c = 0; c < width; ++c) sum[c] += a[c * b.rows + b.columns + i] * below[i];
  for (long c = width; c-- > 0;) {
    double rest = x[j + c] - sum[c];
    for (long d = c + 1; d < width; ++d) rest -= a[c * b.rows + j + d] * x[j + d];
    x[j + c] = rest / a[c * b.rows + j + c];
  }
}

Block block(const Supernodes& l, std::size_t k) {
  return {l.value + l.value_start[k], l.first_column[k + 1] - l.first_column[k],
          l.row_start[k + 1] - l.row_start[k]};
}

}  // namespace

void Substitution::down(std::size_t k, double* x) {
  const Block b = block(l_, k);
  double* own = x + l_.first_column[k];
  const long* rows_below = l_.row + l_.row_start[k] + b.columns;
  below_.assign(static_cast<std::size_t>(b.below()), 0.0);
  long j = 0;
  for (; j + panel <= b.columns; j += panel) {
    foresee(b, j + ahead);
    eliminate<panel>(b, j, own, below_.data());
  }
  for (; j < b.columns; ++j) eliminate<1>(b, j, own, below_.data());
  for (long i = 0; i < b.below(); ++i) x[rows_below[i]] -= below_[static_cast<std::size_t>(i)];
}

void Substitution::up(std::size_t k, double* x) {
  const Block b = block(l_, k);
  double* own = x + l_.first_column[k];
  const long* rows_below = l_.row + l_.row_start[k] + b.columns;
  below_.resize(static_cast<std::size_t>(b.below()));
  for (long i = 0; i < b.below(); ++i) below_[static_cast<std::size_t>(i)] = x[rows_below[i]];
  long j = b.columns;
  while (j % panel != 0) substitute<1>(b, --j, own, below_.data());
  while (j > 0) {
    j -= panel;
    foresee(b, j - ahead);
    substitute<panel>(b, j, own, below_.data());
  }
}

void Substitution::solve(double* x) {
  for (std::size_t k = 0; k < l_.count; ++k) down(k, x);
  for (std::size_t k = l_.count; k-- > 0;) up(k, x);
}

}  // namespace lidwright
