#pragma once

#include <string>
#include <vector>

#include "io/run_reader.hpp"
#include "io/run_statistics.hpp"
#include "io/toml_sections.hpp"

/// Budgets and the health of the computation, each judged at a threshold that is stated, so that a
/// reader can judge the run. The thresholds are common practice, no source, except where a setting
/// of the case is the threshold.
namespace lidwright::page {

enum class Judgement { Good, Look, Poor, None };
/// "good", "look closer", "poor", "": nothing to judge.
const char* word(Judgement);

/// `value` against the largest that is good and the largest that is not poor. nan: None.
Judgement judged_small(double value, double good, double fair);
/// The same of a value that had better be large.
Judgement judged_large(double value, double good, double fair);

struct HealthRow {
  std::string name, value, threshold, meaning;
  Judgement judgement = Judgement::None;
};

std::vector<HealthRow> march_health(const SavedRun&, const RunStatistics&);
std::vector<HealthRow> settle_health(const SavedRun&, const TomlSection& summary);
/// Of all states of a branch.
std::vector<HealthRow> branch_health(const SavedRun&, const NumberTable& branch);
std::vector<HealthRow> onset_health(const NumberTable& onset, const TomlSection& summary);

/// The rows and what they come to in words; JSON.
std::string json_of(const std::vector<HealthRow>&);

}  // namespace lidwright::page
