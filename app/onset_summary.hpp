#pragma once

#include <string>
#include <vector>

#include "io/case_file.hpp"
#include "io/provenance.hpp"
#include "study/onset_curve.hpp"

/// The onset of convection in a few numbers, for programs (summary.toml) and for people (standard
/// output).
namespace lidwright {

std::vector<SummaryEntry> onset_entries(const Case&, const OnsetCurve&);
std::string onset_for_people(const Case&, const OnsetCurve&, double seconds,
                             const std::string& folder);

}  // namespace lidwright
