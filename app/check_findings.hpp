#pragma once

#include <limits>
#include <string>
#include <vector>

#include "io/case_file.hpp"
#include "study/cautions.hpp"

/// What `check` found out about a case: what its text is made of.
namespace lidwright {

struct CheckFindings {
  Case c;
  std::string file;
  int ranks = 1;
  std::vector<DefaultTaken> defaults;
  AtRest rest;
  DerivedNumbers numbers;
  double critical = std::numeric_limits<double>::quiet_NaN();  ///< Rayleigh number of onset
  double times_critical = std::numeric_limits<double>::quiet_NaN();
  std::string no_onset;  ///< why they are not known
  Prediction prediction;
  std::vector<LayerOnGrid> layers;
  std::optional<Grid> finer;
  std::vector<std::string> cautions;
  // With steps only:
  bool steps = false;
  Pilot pilot;
  Trial trial;
  Forecast forecast;
  /// Did others take so much of the machine that it matters?
  bool crowded() const { return trial.crowding > 1.15; }
  double memory = 0, memory_largest = 0;  ///< bytes, of all ranks and of the largest
};

}  // namespace lidwright
