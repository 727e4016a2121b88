#pragma once

#include <string>
#include <vector>

#include "study/derived.hpp"
#include "study/heat_balance.hpp"
#include "study/regime.hpp"

/// What published laws (physics/laws.hpp) say of a case: which regime, which Nusselt number, how
/// thick the boundary layers. Pure. docs/check.md.
namespace lidwright {

/// One law applied to the case.
struct LawResult {
  std::string name, range;   ///< with its source; what it was made for
  double low = 0, high = 0;  ///< Nusselt number of the outer wall, by what the law leaves open
  std::string outside;       ///< why the case is not what this law was made for; may be empty
};

struct Prediction {
  Regime regime = Regime::Undecided;
  std::string why;     ///< how the regime is told, with the source
  std::string unlike;  ///< what none of the laws was made for; may be empty
  std::vector<LawResult> laws;
  double low = 1,
         high = 1;      ///< Nusselt number of the outer wall: from the least to the largest law
  HeatBalance balance;  ///< of the law nearest to the middle of the spread; under a lid, of drips
  std::vector<std::string> doubts;  ///< why the run's number may lie outside the spread
  bool foretold() const { return !laws.empty(); }
};

/// `times_critical`: the case's Rayleigh number over the critical one; nan when not known.
Prediction predict(const Model&, const Geometry&, const AtRest&, const DerivedNumbers&,
                   double times_critical);

}  // namespace lidwright
