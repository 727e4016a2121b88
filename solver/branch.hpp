#pragma once

#include <functional>
#include <string>
#include <vector>

#include "solver/settle.hpp"

/// A branch of steady states along a parameter, past folds, by pseudo-arclength continuation
/// (Keller 1977, in Applications of Bifurcation Theory, Academic Press, 359).
namespace lidwright {

/// A steady state on the branch.
struct BranchPoint {
  double parameter = 0;
  bool asked_for = false;  ///< one of the values asked for, met exactly; else a step on the way
  bool backwards = false;  ///< the parameter falls along the branch here: beyond a fold
  double residual = 0;
  int newton_steps = 0;
  SteadyState state;  ///< without snapshot where not asked for
};

struct BranchRequest {
  std::function<Model(double)> model_at;  ///< the model at a value of the parameter, on one grid
  std::vector<double> values;             ///< asked for, in the order of the walk, two or more
  bool logarithmic = false;               ///< steps count in the parameter's logarithm
};

struct Branch {
  std::vector<BranchPoint> points;
  std::string remark;  ///< why it ended before the last value; empty: it did not
};

/// Told after every point; returns false to stop.
using BranchObserver = std::function<bool(const BranchPoint&)>;

/// Starts from the steady state at the first value. Where the branch folds back it is followed
/// until it passes the first value again, comes to rest, or the steps run out; every value is met
/// each time it is passed. Computed on the first rank. Collective; throws SolveError when not even
/// the start can be refined.
Branch follow_branch(const BranchRequest&, const CellField& start, const SettleSettings&, MPI_Comm,
                     const BranchObserver& = {});

}  // namespace lidwright
