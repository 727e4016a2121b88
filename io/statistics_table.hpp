#pragma once

#include <string>
#include <vector>

#include "io/history_table.hpp"
#include "study/statistics.hpp"

/// statistics.csv: means of a run's history with errors.
namespace lidwright {

struct NamedSummary {
  std::string name, unit;
  RecordSummary record;
};

/// Of every column but the bookkeeping's. `settings.least_time` goes for all.
std::vector<NamedSummary> summarise_history(const HistoryTable&, const StatisticsSettings&);

std::string statistics_table(const std::vector<NamedSummary>&);

}  // namespace lidwright
