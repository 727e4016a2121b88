#pragma once

#include <string>
#include <vector>

#include "io/provenance.hpp"
#include "io/run_statistics.hpp"

/// What a run's history says as a whole (io/run_statistics.hpp), in words.
namespace lidwright {

/// For summary.toml and for standard output.
std::vector<SummaryEntry> statistics_entries(const RunStatistics&, const MarchSettings&);
std::string statistics_for_people(const RunStatistics&, const MarchSettings&);
/// Verdict, probability and evidence, a line each.
std::string regime_for_people(const RegimeVerdict&);

}  // namespace lidwright
