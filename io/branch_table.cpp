#include "io/branch_table.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cmath>

#include "io/case_file.hpp"
#include "io/csv.hpp"
#include "io/history.hpp"
#include "io/number_table.hpp"

namespace lidwright {
namespace {

constexpr std::string_view title = "lidwright branch of steady states along ";
/// Ratio of the values asked for from which they are evenly spaced in the logarithm
/// (app/along_option.cpp).
constexpr double far_apart = 10 * (1 - 1e-9);

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

/// The columns that a picture shows, one row at a time.
class Reader {
 public:
  Reader(const NumberTable& t, const std::string& path) : table_(t), path_(path) {}
  double operator()(const char* column, std::size_t row) const {
    if (const auto* values = table_.find(column)) return (*values)[row];
    throw InputError(
        fmt::format("{}: has no column '{}'; follow the branch with this version of the program",
                    path_, column));
  }
  BranchRow row(std::size_t k) const {
    BranchRow r;
    r.parameter = (*this)("parameter", k);
    r.asked_for = (*this)("asked_for", k) != 0;
    r.backwards = (*this)("backwards", k) != 0;
    r.snapshot = static_cast<int>((*this)("snapshot", k));
    r.row.nusselt_outer = (*this)("nusselt_outer", k);
    r.row.nusselt_inner = (*this)("nusselt_inner", k);
    r.row.velocity_rms = (*this)("velocity_rms", k);
    r.leading = {(*this)("growth", k), (*this)("frequency", k)};
    return r;
  }

 private:
  const NumberTable& table_;
  std::string path_;
};

bool spans_decades(const std::vector<BranchRow>& rows) {
  double least = INFINITY, largest = 0;
  for (const BranchRow& r : rows) {
    if (!r.asked_for) continue;
    least = std::min(least, r.parameter);
    largest = std::max(largest, r.parameter);
  }
  return least > 0 && largest >= far_apart * least;
}

}  // namespace

SavedBranch read_branch(const std::string& text, const std::string& path) {
  const std::string mark = "# " + std::string(title);
  if (!text.starts_with(mark))
    throw InputError(fmt::format("{}: not a branch that settle --along has written", path));
  const NumberTable t = parse_numbers(text, path);
  if (t.rows() == 0) throw InputError(fmt::format("{}: holds no steady state", path));
  SavedBranch b;
  b.parameter.key = text.substr(mark.size(), text.find('\n') - mark.size());
  if (t.units.front() != "1") b.parameter.unit = t.units.front();
  const Reader read(t, path);
  for (std::size_t k = 0; k < t.rows(); ++k) b.rows.push_back(read.row(k));
  b.parameter.logarithmic = spans_decades(b.rows);
  return b;
}

std::string branch_table(const BranchParameter& p, const std::vector<BranchRow>& rows) {
  const std::string meaning = fmt::format("{} of the case, in the units of its file", p.key);
  std::string text = table_head(std::string(title) + p.key, columns_for(p, meaning));
  for (const BranchRow& r : rows) text += table_row(numbers_of(r));
  return text;
}

}  // namespace lidwright
