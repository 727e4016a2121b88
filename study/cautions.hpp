#pragma once

#include <string>
#include <vector>

#include "study/derived.hpp"
#include "study/forecast.hpp"
#include "study/prediction.hpp"
#include "study/resolution.hpp"

/// Where a case leaves the range of its approximation, of its grid or of the laws. Pure.
namespace lidwright {

struct CautionInputs {
  const Model& model;
  const MarchInputs& march;
  const DerivedNumbers& numbers;
  const Prediction& prediction;
  const std::vector<LayerOnGrid>& layers;
  double velocity;        ///< rms, of a pilot, kappa/d; nan: not known
  double times_critical;  ///< nan: not known
  double expansion;       ///< alpha DeltaT; nan without a body
  double dissipation;     ///< alpha g d/cp of the body or the case; nan: not known
  double surface;         ///< absolute temperature at T = 0 of the body or the case, DeltaT
};

/// A sentence each, the gravest first.
std::vector<std::string> cautions(const CautionInputs&);

}  // namespace lidwright
