#pragma once

#include <cstddef>
#include <string>
#include <vector>

#include "app/figure_verb.hpp"
#include "io/field_overlays.hpp"
#include "io/figure_sheet.hpp"
#include "io/run_reader.hpp"

/// What `lidwright figure` was asked for, checked against the run before anything is drawn.
namespace lidwright {

struct FigurePlan {
  SavedRun run;
  std::vector<std::string> kinds;
  FigureStyle style;
  Overlays overlays;
  std::size_t snapshot = 0;           ///< meaningless in a run without
  std::vector<std::size_t> profiles;  ///< snapshots of the profiles: that one, or several asked for
  std::string taken;  ///< which snapshot is nearest to the time asked for; empty: not asked
  std::string into;
};

/// All words for KIND.
std::vector<std::string> figure_kinds();

/// Opens the run. Throws InputError.
FigurePlan figure_plan(const FigureRequest&);

/// Path of a figure: INTO/temperature_0012.png, INTO/history.pdf.
std::string figure_path(const FigurePlan&, const std::string& kind);

/// "time 0.25 d^2/kappa" or "state 3", plain.
std::string snapshot_words(const SavedRun&, std::size_t snapshot);

/// Throws InputError when one of the files is there and may not be replaced.
void refuse_existing(const std::vector<std::string>& files, bool overwrite);

/// Makes the folder and its parents. Throws OutputError.
void make_figure_folder(const std::string&);

}  // namespace lidwright
