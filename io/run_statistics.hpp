#pragma once

#include <string>
#include <vector>

#include "io/history_table.hpp"
#include "io/statistics_table.hpp"
#include "solver/settings.hpp"
#include "study/regime.hpp"

/// What a run's history says as a whole: means with errors, the lid's regime, whether the means
/// that were asked for are known.
namespace lidwright {

/// The columns that the verdict looks at. Throws InputError naming `path` when one is missing.
RegimeRecords regime_records(const HistoryTable&, const std::string& path);

struct RunStatistics {
  std::vector<NamedSummary> records;
  RegimeVerdict lid;
  std::string not_known;  ///< which means of march.known are not, and why; empty: all are

  /// Nothing is returned for a column that has no mean.
  const NamedSummary* find(const std::string& name) const;
};
RunStatistics run_statistics(const HistoryTable&, const std::string& path, const MarchSettings&);

/// How a settled part must be for its mean to be known: long enough for this flow, and steady
/// enough for the error that is asked for.
StatisticsSettings settings_for(const std::vector<double>& time,
                                const std::vector<double>& velocity_rms, const MarchSettings&);

}  // namespace lidwright
