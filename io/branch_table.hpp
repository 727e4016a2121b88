#pragma once

#include <limits>
#include <string>
#include <vector>

#include "solver/branch.hpp"
#include "solver/stability.hpp"

/// What `lidwright settle --along` writes beside the fields: a table and a picture of the branch.
namespace lidwright {

/// A point of the branch without its fields.
struct BranchRow {
  double parameter = 0;
  bool asked_for = false, backwards = false;
  int snapshot = -1;  ///< its number; -1: none
  int newton_steps = 0;
  double residual = 0;
  HistoryRow row;
  /// Fastest growing disturbance; nan: not asked for.
  GrowthRate leading{std::numeric_limits<double>::quiet_NaN(),
                     std::numeric_limits<double>::quiet_NaN()};
};

/// The parameter as tables and pictures call it.
struct BranchParameter {
  std::string key, unit;  ///< unit empty: a plain number
  bool logarithmic = false;
};

/// Text of branch.csv: one row a point, in the order of the walk. Pure.
std::string branch_table(const BranchParameter&, const std::vector<BranchRow>&);

/// Bytes of branch.png: Nusselt numbers and rms velocity along the branch. `title`: plain text.
std::string branch_picture(const BranchParameter&, const std::vector<BranchRow>&,
                           const std::string& title);

}  // namespace lidwright
