#pragma once

#include <array>
#include <string>
#include <utility>
#include <vector>

#include "study/statistics.hpp"

/// How the lid of a mantle moves, from the records of a run. Pure. Choices:
/// docs/decisions/regime.md.
namespace lidwright {

enum class Regime { NotConvecting, Stagnant, Sluggish, Mobile, Episodic, Undecided };
const char* word(Regime);

/// The published thresholds; none is sharp. Mobility is the rms velocity along the outer wall over
/// that in the volume (P. J. Tackley 2000, Geochem. Geophys. Geosyst. 1, 2000GC000036).
struct RegimeThresholds {
  double mobile = 0.8;
  double stagnant = 0.1;
  double strictly_stagnant = 0.01;
  double lid_travel = 1;
  double burst_share = 0.05;
  double still_velocity = 1;
  double still_nusselt = 0.01;
  double spread = 0.02;
  double least_probability = 0.9;
};

/// One row of the table of thresholds.
struct RegimeThreshold {
  const char* name;
  double RegimeThresholds::*value;
  double low, high;  ///< allowed: low <= value <= high
  const char* meaning;
  const char* source;
};
const std::array<RegimeThreshold, 9>& regime_thresholds();

/// What is looked at, over rising times; nan where a quantity is not defined.
struct RegimeRecords {
  std::vector<double> time;              ///< d^2/kappa
  std::vector<double> velocity;          ///< rms in the volume, kappa/d
  std::vector<double> surface_velocity;  ///< rms along the outer wall, kappa/d
  std::vector<double> nusselt;           ///< of the outer wall
  std::vector<double> mobility;          ///< empty: surface_velocity over velocity
  std::vector<double> lid_thickness;     ///< fraction of d; empty: not known
  bool sources = false;  ///< heat is produced in the shell, so that the Nusselt number of a shell
                         ///< at rest is not 1
};

struct RegimeVerdict {
  Regime regime = Regime::Undecided;
  Regime likeliest = Regime::Undecided;  ///< of the resamples, whether or not that decides
  double probability = 0;  ///< share of the resamples that give `likeliest`; 0: none were taken
  std::vector<std::pair<Regime, double>>
      shares;                                 ///< the regimes that resamples give, largest first
  double settled_from = RecordSummary::none;  ///< time
  std::string why_undecided;                  ///< empty when decided
  std::vector<std::string> evidence;          ///< a sentence each
};

/// The regime of the part in which mobility, rms velocity and Nusselt number are all settled, with
/// the share of its block resamples that give the same: rows of all records together, and mobility
/// times a random factor of relative `spread`, as thresholds and grids are not exact. Undecided
/// where one of the three is no settled record, or the share is too small. Shells at rest are told
/// apart first.
RegimeVerdict judge_regime(const RegimeRecords&, const RegimeThresholds& = {});

/// The time that a settled part must last at this rms velocity: ten journeys from wall to wall or
/// half a diffusion time, whichever is shorter (common practice, no source).
double least_settled_time(double velocity_rms);

}  // namespace lidwright
