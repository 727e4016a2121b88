#pragma once

#include <limits>
#include <string>
#include <vector>

#include "solver/branch.hpp"
#include "solver/stability.hpp"

/// The table that `lidwright settle --along` writes beside the fields; io/figure_branch.hpp draws
/// it.
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

struct SavedBranch {
  BranchParameter parameter;
  std::vector<BranchRow> rows;
};
/// The table's text read back, of the state's numbers what a picture shows: Nusselt numbers and rms
/// velocity. Throws InputError naming `path` when it is no such table or is damaged.
SavedBranch read_branch(const std::string& text, const std::string& path);

}  // namespace lidwright
