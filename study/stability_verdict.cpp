#include "study/stability_verdict.hpp"

namespace lidwright {

StabilityVerdict judge_stability(std::vector<GrowthRate> rates) {
  StabilityVerdict verdict{std::move(rates), -1, -1};
  for (int k = static_cast<int>(verdict.rates.size()) - 1; k >= 0; --k)
    (verdict.rates[static_cast<std::size_t>(k)].turning ? verdict.turning : verdict.leading) = k;
  return verdict;
}

}  // namespace lidwright
