#pragma once

#include <string>
#include <vector>

#include "io/branch_table.hpp"
#include "io/case_file.hpp"
#include "io/provenance.hpp"
#include "io/settle_tables.hpp"
#include "solver/settle.hpp"

/// Steady states in a few numbers, for programs (summary.toml) and for people (standard output).
namespace lidwright {

/// "steady", "does not convect", "not steady" or "interrupted".
std::string end_of(const SteadyState&);
/// A slower flow carries no heat to speak of.
bool convects(const HistoryRow&);

/// `steps`: Newton steps on all grids.
std::vector<SummaryEntry> settle_entries(const Case&, const SteadyState&, std::size_t steps,
                                         double seconds);
std::string settle_for_people(const Case&, const SteadyState&, std::size_t steps, double seconds);

std::string bars_for_people(const std::vector<QuantityBar>&, const std::vector<Grid>&);

std::vector<SummaryEntry> stability_entries(const StabilityVerdict&);
std::string stability_for_people(const StabilityVerdict&);

/// `end`: why the branch ends.
std::vector<SummaryEntry> branch_entries(const Case&, const BranchParameter&,
                                         const std::vector<BranchRow>&, const std::string& end,
                                         double seconds);
std::string branch_for_people(const Case&, const BranchParameter&, const std::vector<BranchRow>&,
                              const std::string& end, double seconds);

}  // namespace lidwright
