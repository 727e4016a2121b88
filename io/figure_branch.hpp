#pragma once

#include <string>
#include <vector>

#include "io/branch_table.hpp"
#include "io/figure_sheet.hpp"
#include "io/plot_chart.hpp"
#include "io/run_reader.hpp"

/// Nusselt numbers and rms velocity along a branch of steady states: stable and unstable stretches,
/// folds, and where the parameter turns back.
namespace lidwright {

enum class Stability { Unknown, Stable, Unstable };

/// A stretch of one kind, from point to point of the branch; it changes where the growth rate,
/// taken as a straight line between two points, is 0.
struct BranchPiece {
  Stability stability = Stability::Unknown;
  std::vector<double> place;  ///< along the rows: 1.25 is a quarter of the way from 1 to 2
};
std::vector<BranchPiece> pieces_of(const std::vector<BranchRow>&);

/// Rows at which the parameter turns.
std::vector<std::size_t> folds_of(const std::vector<BranchRow>&);

/// Bytes of the figure's file. `title`: plain text.
std::string branch_figure(const SavedBranch&, const std::string& title, const FigureStyle&);
/// Of a run's branch.csv. Throws InputError: it has none, or a damaged one.
std::string branch_figure(const SavedRun&, const FigureStyle&);

}  // namespace lidwright
