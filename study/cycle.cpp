#include "study/cycle.hpp"

#include <algorithm>
#include <array>
#include <cstddef>

namespace lidwright {
namespace {

/// Newton's form about the middle point.
Turn turn_of_parabola(std::span<const double> t, std::span<const double> f) {
  const double first = (f[1] - f[0]) / (t[1] - t[0]), second = (f[2] - f[1]) / (t[2] - t[1]);
  const double curvature = (second - first) / (t[2] - t[0]);
  const double slope = first + curvature * (t[1] - t[0]);  // at the middle point
  const double shift = -slope / (2 * curvature);
  return {t[1] + shift, f[1] + slope * shift / 2, curvature < 0};
}

/// One maximum a beat: kinds that alternate, a maximum first.
bool alternate(const std::vector<Turn>& turns) {
  for (std::size_t k = 0; k < turns.size(); ++k)
    if (turns[k].maximum != (k % 2 == 0)) return false;
  return true;
}

double mean_of_every_fourth(const std::vector<Turn>& turns, std::size_t first) {
  double sum = 0;
  for (std::size_t k = first; k < turns.size(); k += 4) sum += turns[k].value;
  return sum / static_cast<double>(turns.size() / 4);
}

double range_of_every_fourth(const std::vector<Turn>& turns, std::size_t first) {
  double low = turns[first].value, high = low;
  for (std::size_t k = first; k < turns.size(); k += 4) {
    low = std::min(low, turns[k].value);
    high = std::max(high, turns[k].value);
  }
  return high - low;
}

/// The last whole cycles, each from its larger maximum to the minimum before the next.
std::vector<Turn> whole_cycles(std::vector<Turn> all, std::size_t cycles) {
  while (!all.empty() && all.back().maximum) all.pop_back();
  const std::size_t count = std::min(cycles + 1, all.size() / 4);
  if (count < 3) return {};
  std::vector<Turn> last(all.end() - static_cast<std::ptrdiff_t>(4 * count), all.end());
  const bool smaller_first = mean_of_every_fourth(last, 0) < mean_of_every_fourth(last, 2);
  return smaller_first ? std::vector<Turn>(last.begin() + 2, last.end() - 2)
                       : std::vector<Turn>(last.begin() + 4, last.end());
}

}  // namespace

std::vector<Turn> turns(std::span<const double> time, std::span<const double> value) {
  std::vector<Turn> found;
  for (std::size_t k = 1; k + 1 < value.size(); ++k)
    if ((value[k] - value[k - 1]) * (value[k + 1] - value[k]) < 0)
      found.push_back(turn_of_parabola(time.subspan(k - 1, 3), value.subspan(k - 1, 3)));
  return found;
}

Beats beats(std::span<const double> time, std::span<const double> value, int cycles) {
  const std::vector<Turn> points =
      whole_cycles(turns(time, value), static_cast<std::size_t>(cycles));
  Beats b;
  if (points.empty() || !alternate(points)) return b;
  b.cycles = static_cast<int>(points.size() / 4);
  b.maximum_1 = mean_of_every_fourth(points, 0);
  b.minimum_1 = mean_of_every_fourth(points, 1);
  b.maximum_2 = mean_of_every_fourth(points, 2);
  b.minimum_2 = mean_of_every_fourth(points, 3);
  b.period = (points[points.size() - 4].time - points.front().time) / (b.cycles - 1);
  for (std::size_t k = 0; k < 4; ++k)
    b.wander = std::max(b.wander, range_of_every_fourth(points, k));
  return b;
}

}  // namespace lidwright
