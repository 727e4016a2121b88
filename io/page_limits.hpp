#pragma once

#include <string>
#include <vector>

#include "io/run_reader.hpp"

namespace lidwright::page {

/// What the results of a run are not fit for, and the approximations that were made: a sentence
/// each, those of this very case among them. The long form is in README.md.
std::vector<std::string> limits_of(const SavedRun&);

}  // namespace lidwright::page
