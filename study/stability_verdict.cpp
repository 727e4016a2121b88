#include "study/stability_verdict.hpp"

#include <cmath>

namespace lidwright {
namespace {

/// Largest size of a rate that may be the neutral one, in kappa/d^2: the mesh holds a pattern a
/// little.
constexpr double neutral = 0.01;

double size_of(const GrowthRate& r) { return std::hypot(r.growth, r.frequency); }

}  // namespace

StabilityVerdict judge_stability(std::vector<GrowthRate> rates, Sides sides, bool patterned) {
  StabilityVerdict verdict{std::move(rates), -1, -1};
  const auto count = static_cast<int>(verdict.rates.size());
  const auto size = [&](int k) { return size_of(verdict.rates[static_cast<std::size_t>(k)]); };
  for (int k = 0; patterned && sides == Sides::Periodic && k < count; ++k)
    if (size(k) < (verdict.turning < 0 ? neutral : size(verdict.turning))) verdict.turning = k;
  for (int k = 0; k < count && verdict.leading < 0; ++k)
    if (k != verdict.turning) verdict.leading = k;
  return verdict;
}

}  // namespace lidwright
