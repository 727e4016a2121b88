#pragma once

#include <vector>

#include "solver/stability.hpp"

/// What growth rates say about a steady state.
namespace lidwright {

struct StabilityVerdict {
  std::vector<GrowthRate> rates;  ///< fastest growing first
  int turning = -1;  ///< which of them is that of turning a pattern round the circle, neutral; -1:
                     ///< none
  int leading = -1;  ///< the fastest growing one apart from it; -1: none was found

  const GrowthRate& leader() const { return rates[static_cast<std::size_t>(leading)]; }
  bool unstable() const { return leading >= 0 && leader().growth > 0; }
};

StabilityVerdict judge_stability(std::vector<GrowthRate>);

}  // namespace lidwright
