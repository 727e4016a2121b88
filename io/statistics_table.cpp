#include "io/statistics_table.hpp"

#include <fmt/format.h>

#include <array>

#include "io/csv.hpp"
#include "io/csv_table.hpp"

namespace lidwright {
namespace {

constexpr std::array<Column, 11> columns{{
    {"quantity", "1", "column of history.csv"},
    {"unit", "1", "of mean, error, min and max"},
    {"mean", "unit", "over the time of the settled part"},
    {"error", "unit", "half width of the 95 % interval about the mean; nan: not known"},
    {"min", "unit", "least value in the settled part"},
    {"max", "unit", "largest value in the settled part"},
    {"period", "d^2/kappa", "of the dominant peak of the spectrum; nan: none stands out"},
    {"effective", "1", "number of independent values; nan: not known"},
    {"discarded_until", "d^2/kappa", "time at which the settled part begins"},
    {"finding", "1",
     "sound or steady: mean and error may be used; undefined, too-short, slow-period, transient or "
     "drifting: may not"},
    {"words", "1", "the finding in words"},
}};

std::string number(double x) { return fmt::format("{}", x); }

}  // namespace

std::vector<NamedSummary> summarise_history(const HistoryTable& t,
                                            const StatisticsSettings& settings) {
  std::vector<NamedSummary> all;
  for (std::size_t k = 0; k < t.names.size(); ++k)
    if (!is_bookkeeping(t.names[k]))
      all.push_back({t.names[k], t.units[k], summarise(*t.find("time"), t.columns[k], settings)});
  return all;
}

std::string statistics_table(const std::vector<NamedSummary>& all) {
  std::string text = table_head("lidwright statistics", columns);
  for (const auto& [name, unit, r] : all)
    text += text_line({name, unit, number(r.mean), number(r.error), number(r.min), number(r.max),
                       number(r.period), number(r.effective), number(r.discarded_until),
                       word(r.finding), r.words});
  return text;
}

}  // namespace lidwright
