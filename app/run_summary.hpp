#pragma once

#include <string>
#include <vector>

#include "io/case_file.hpp"
#include "io/provenance.hpp"
#include "solver/diagnostics.hpp"

/// The end of a run in a few numbers, for programs (summary.toml) and for people (standard output).
namespace lidwright {

/// What describes a state, moving or steady.
std::vector<SummaryEntry> state_entries(const HistoryRow&);
std::string state_lines(const HistoryRow&);

/// `end`: why the run stopped.
std::vector<SummaryEntry> summary_entries(const Case&, const HistoryRow& last,
                                          const std::string& end);
/// `statistics`: lines about the run as a whole.
std::string summary_for_people(const Case&, const HistoryRow& last, const std::string& end,
                               const std::string& statistics, const std::string& folder);

}  // namespace lidwright
