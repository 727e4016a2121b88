#pragma once

#include <string>
#include <vector>

#include "solver/settle.hpp"
#include "study/error_bars.hpp"
#include "study/stability_verdict.hpp"

/// Tables of `lidwright settle`, as text. Pure.
namespace lidwright {

/// newton.csv: one row a Newton step or stretch of a march, in the order they were taken.
std::string newton_table(const std::vector<NewtonStep>&);

/// A column of the history on several grids, with its error bar.
struct QuantityBar {
  std::string name, unit, meaning;
  std::vector<double> values;  ///< from coarse to fine
  ErrorBar bar;
};

/// Of what has a meaning in a steady state and differs between the grids. `floor`: relative error
/// that the solver's tolerance leaves. At least two states, from coarse to fine.
std::vector<QuantityBar> quantity_bars(const std::vector<SteadyState>&, double floor);

/// error_bars.csv. `grids`: as many as there are values of each quantity.
std::string error_bars_table(const std::vector<QuantityBar>&, const std::vector<Grid>& grids);

/// growth_rates.csv.
std::string growth_table(const StabilityVerdict&);

}  // namespace lidwright
