#pragma once

#include <string>

#include "study/onset_curve.hpp"

/// The table that `lidwright onset` writes beside the fields; io/figure_onset.hpp draws it.
namespace lidwright {

/// Text of onset.csv: one row a mode. Pure.
std::string onset_table(const OnsetCurve&);

/// The table's text read back: of each point mode, Rayleigh number and error, and which is the
/// least. Throws InputError naming `path` when it is no such table or is damaged.
OnsetCurve read_onset(const std::string& text, const std::string& path);

}  // namespace lidwright
