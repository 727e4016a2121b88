#pragma once

#include <string>

#include "study/onset_curve.hpp"

/// What `lidwright onset` writes beside the fields: a table and a picture of the neutral Rayleigh
/// numbers.
namespace lidwright {

/// Text of onset.csv: one row a mode. Pure.
std::string onset_table(const OnsetCurve&);

/// Bytes of onset.png: the curve with error bars, the least one marked. `title`: plain text.
std::string onset_picture(const OnsetCurve&, const std::string& title);

}  // namespace lidwright
