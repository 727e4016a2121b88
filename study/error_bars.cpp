#include "study/error_bars.hpp"

#include <algorithm>
#include <cassert>
#include <cmath>

namespace lidwright {
namespace {

constexpr double sound_factor = 1.25, doubtful_factor = 3;
constexpr double least_sound_order = 1.5, most_sound_order = 2.5;
constexpr double noise_in_floors = 10;

Convergence classify(double e1, double e2, double floor) {
  if (std::max(std::abs(e1), std::abs(e2)) <= noise_in_floors * floor) return Convergence::Flat;
  if (e1 * e2 < 0) return Convergence::Oscillating;
  if (std::abs(e2) >= std::abs(e1)) return Convergence::Diverging;
  if (e2 == 0) return Convergence::Steep;
  const double p = std::log2(e1 / e2);
  if (p < least_sound_order) return Convergence::Slow;
  return p > most_sound_order ? Convergence::Steep : Convergence::Sound;
}

/// `last`: step by which the value is extrapolated; `size`: step by which the bar is measured.
ErrorBar extrapolate(double finest, double last, double size, double order, double factor) {
  const double share = 1 / (std::exp2(order) - 1);
  ErrorBar bar;
  bar.value = finest + last * share;
  bar.half_width = factor * std::abs(size) * share;
  return bar;
}

ErrorBar not_extrapolated(double finest, double size) {
  ErrorBar bar;
  bar.value = finest;
  bar.half_width = doubtful_factor * std::abs(size);
  return bar;
}

double larger(double a, double b) { return std::max(std::abs(a), std::abs(b)); }

ErrorBar bar_of(Convergence seen, double finest, double e1, double e2) {
  switch (seen) {
    case Convergence::Sound:
      return extrapolate(finest, e2, e2, std::log2(e1 / e2), sound_factor);
    case Convergence::Steep:
      return extrapolate(finest, e2, larger(e2, e1 / 4), 2, doubtful_factor);
    case Convergence::Slow:
      return extrapolate(finest, e2, e2, 1, doubtful_factor);
    case Convergence::TwoGrids:
      return extrapolate(finest, e2, e2, 2, doubtful_factor);
    case Convergence::Oscillating:
    case Convergence::Diverging:
    case Convergence::Flat:
      break;
  }
  return not_extrapolated(finest, larger(e2, e1));
}

}  // namespace

ErrorBar error_bar(std::span<const double> values, double floor) {
  assert(values.size() >= 2 && floor >= 0);
  const std::size_t n = values.size();
  const double finest = values[n - 1], e2 = finest - values[n - 2];
  const double e1 = n > 2 ? values[n - 2] - values[n - 3] : 0;
  const Convergence seen = n > 2 ? classify(e1, e2, floor) : Convergence::TwoGrids;
  ErrorBar bar = bar_of(seen, finest, e1, e2);
  bar.convergence = seen;
  if (seen != Convergence::Flat && e1 * e2 > 0) bar.order = std::log2(e1 / e2);
  bar.half_width = std::max(bar.half_width, floor);
  return bar;
}

const char* word(Convergence seen) {
  switch (seen) {
    case Convergence::Sound:
      return "sound";
    case Convergence::Steep:
      return "steep";
    case Convergence::Slow:
      return "slow";
    case Convergence::Oscillating:
      return "oscillating";
    case Convergence::Diverging:
      return "diverging";
    case Convergence::Flat:
      return "flat";
    case Convergence::TwoGrids:
      break;
  }
  return "two grids";
}

}  // namespace lidwright
