#include "io/branch_table.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>

#include "io/csv.hpp"
#include "io/history.hpp"

namespace lidwright {
namespace {

/// Columns of the history that mean nothing, or something else, in a steady state.
constexpr std::array<std::string_view, 11> of_marches{"step",
                                                      "time",
                                                      "time_step",
                                                      "flow_error",
                                                      "heat_budget_residual",
                                                      "temperature_change_rate",
                                                      "flow_iterations",
                                                      "fixed_point_steps",
                                                      "applications",
                                                      "factorisations",
                                                      "wall_time"};

bool of_a_state(const Column& c) {
  return std::find(of_marches.begin(), of_marches.end(), c.name) == of_marches.end();
}

std::vector<Column> columns_for(const BranchParameter& p, const std::string& meaning) {
  std::vector<Column> columns{
      {"parameter", p.unit.empty() ? "1" : std::string_view(p.unit), meaning},
      {"asked_for", "1", "1: one of the values asked for; 0: a step on the way"},
      {"backwards", "1", "1: the parameter turns back along the branch here, beyond a fold"},
      {"snapshot", "1", "number of its snapshot, picture and checkpoint; -1: none"}};
  for (const Column& c : history_columns())
    if (of_a_state(c)) columns.push_back(c);
  columns.push_back(
      {"heat_budget_residual", "1",
       "what flows in and is produced less what flows out, over the largest of these"});
  columns.push_back(
      {"residual", "1",
       "root mean square of dT/dt, over heat flow through heat capacity of the shell"});
  columns.push_back({"newton_steps", "1", "that led to it from the point before"});
  columns.push_back({"growth", "kappa/d^2",
                     "of the fastest growing disturbance, > 0: unstable; nan: not asked for"});
  columns.push_back({"frequency", "kappa/d^2", "of the same, per radian; 0: no oscillation"});
  return columns;
}

std::vector<double> numbers_of(const BranchRow& r) {
  std::vector<double> numbers{r.parameter, r.asked_for ? 1.0 : 0.0, r.backwards ? 1.0 : 0.0,
                              static_cast<double>(r.snapshot)};
  const std::vector<double> all = history_numbers(r.row);
  for (std::size_t k = 0; k < all.size(); ++k)
    if (of_a_state(history_columns()[k])) numbers.push_back(all[k]);
  numbers.insert(numbers.end(),
                 {r.row.heat_budget_residual, r.residual, static_cast<double>(r.newton_steps),
                  r.leading.growth, r.leading.frequency});
  return numbers;
}

}  // namespace

std::string branch_table(const BranchParameter& p, const std::vector<BranchRow>& rows) {
  const std::string meaning = fmt::format("{} of the case, in the units of its file", p.key);
  std::string text =
      table_head("lidwright branch of steady states along " + p.key, columns_for(p, meaning));
  for (const BranchRow& r : rows) text += table_row(numbers_of(r));
  return text;
}

}  // namespace lidwright
