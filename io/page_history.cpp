#include "io/page_history.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <iterator>
#include <numeric>
#include <sstream>

#include "io/csv_table.hpp"
#include "io/figure_words.hpp"
#include "io/history.hpp"
#include "io/json.hpp"
#include "io/page_words.hpp"
#include "io/thinning.hpp"

namespace lidwright::page {
namespace {

/// Seven digits are more than a chart or its readout shows; times need all they have, for zooming.
constexpr int digits_of_a_value = 7, digits_of_a_time = 12;

std::string meaning_of(const std::string& column) {
  for (const Column& c : history_columns())
    if (c.name == column) return std::string(c.meaning);
  return "";
}

/// Rows of the table beside the charts.
constexpr std::size_t rows_of_the_table = 60;

/// Rows of all columns that are drawn, and for each column which of them are its. Those of the
/// table are in all, so that each of its lines has the values of one time.
struct Drawn {
  std::vector<std::size_t> rows, table;
  std::vector<std::vector<std::size_t>> of_column;
};

std::vector<std::size_t> merged(const std::vector<std::size_t>& p,
                                const std::vector<std::size_t>& q) {
  std::vector<std::size_t> both;
  std::set_union(p.begin(), p.end(), q.begin(), q.end(), std::back_inserter(both));
  return both;
}

Drawn rows_drawn(const HistoryTable& t) {
  Drawn d;
  d.table = evenly_chosen(t.rows(), rows_of_the_table);
  const std::size_t most = points_to_draw(t.rows());
  for (const auto& column : t.columns) {
    d.of_column.push_back(merged(rows_to_draw(column, most), d.table));
    d.rows = merged(d.rows, d.of_column.back());
  }
  return d;
}

std::vector<double> values_at(const std::vector<double>& column,
                              const std::vector<std::size_t>& rows) {
  std::vector<double> values;
  for (const std::size_t k : rows) values.push_back(column[k]);
  return values;
}

/// Places of some rows among all that are drawn.
std::vector<std::size_t> places_among(const std::vector<std::size_t>& all,
                                      const std::vector<std::size_t>& rows) {
  std::vector<std::size_t> places;
  for (const std::size_t row : rows)
    places.push_back(
        static_cast<std::size_t>(std::lower_bound(all.begin(), all.end(), row) - all.begin()));
  return places;
}

/// The places of a column's rows as steps from one to the next: small numbers make a small page.
/// null: all of them.
std::string steps_among(const std::vector<std::size_t>& all, const std::vector<std::size_t>& rows) {
  if (rows.size() == all.size()) return "null";
  std::vector<std::size_t> steps = places_among(all, rows);
  std::adjacent_difference(steps.begin(), steps.end(), steps.begin());
  return json::indices(steps);
}

std::string mean_json(const NamedSummary* s) {
  if (!s) return "null";
  const RecordSummary& r = s->record;
  return json::object({{"mean", json::number(r.mean, digits_of_a_value)},
                       {"error", json::number(r.error, 3)},
                       {"from", json::number(r.discarded_until, digits_of_a_time)},
                       {"known", json::truth(r.enough())},
                       {"words", json::text(r.words)}});
}

std::string column_json(const HistoryTable& t, std::size_t k, const Drawn& d,
                        const RunStatistics& s) {
  const bool constant = std::all_of(t.columns[k].begin(), t.columns[k].end(),
                                    [&](double v) { return v == t.columns[k].front(); });
  const std::vector<double> values = values_at(t.columns[k], d.of_column[k]);
  return json::object({{"name", json::text(t.names[k])},
                       {"label", json::text(column_words(t.names[k]))},
                       {"unit", json::text(unit(t.units[k]))},
                       {"meaning", json::text(meaning_of(t.names[k]))},
                       {"steps", steps_among(d.rows, d.of_column[k])},
                       {"constant", json::truth(constant)},
                       {"values", json::numbers(values, digits_of_a_value)},
                       {"mean", mean_json(s.find(t.names[k]))}});
}

std::string column_of_numbers(const NumberTable& t, std::size_t k, int digits) {
  return json::object({{"name", json::text(t.names[k])},
                       {"label", json::text(column_words(t.names[k]))},
                       {"unit", json::text(unit(t.units[k]))},
                       {"values", json::numbers(t.columns[k], digits)}});
}

}  // namespace

std::size_t points_to_draw(std::size_t rows) {
  if (rows <= 1500) return 1500;
  return rows <= 20000 ? 1000 : 400;
}

std::string history_json(const SavedRun& run, const RunStatistics& s) {
  const HistoryTable& t = *run.history;
  const std::vector<double>* time = t.find("time");
  if (!time || time->empty()) return "null";
  const Drawn d = rows_drawn(t);
  std::vector<std::string> columns;
  for (std::size_t k = 0; k < t.names.size(); ++k)
    if (t.names[k] != "time") columns.push_back(column_json(t, k, d, s));
  return json::object({{"file", json::text("history.csv")},
                       {"rows", json::number(static_cast<double>(t.rows()))},
                       {"times", json::numbers(values_at(*time, d.rows), digits_of_a_time)},
                       {"table", json::indices(places_among(d.rows, d.table))},
                       {"columns", json::list(columns)}});
}

std::string table_json(const NumberTable& t, const std::string& file, const std::string& title,
                       int digits) {
  std::vector<std::string> columns;
  for (std::size_t k = 0; k < t.names.size(); ++k)
    columns.push_back(column_of_numbers(t, k, digits));
  return json::object(
      {{"file", json::text(file)}, {"title", json::text(title)}, {"columns", json::list(columns)}});
}

std::string text_table_json(const std::string& csv, const std::string& file,
                            const std::string& title) {
  std::vector<std::string> rows;
  std::istringstream lines(csv);
  for (std::string line; std::getline(lines, line);)
    if (!line.empty() && line.front() != '#') rows.push_back(json::texts(text_fields(line, file)));
  return json::object(
      {{"file", json::text(file)}, {"title", json::text(title)}, {"rows", json::list(rows)}});
}

std::string profiles_json(const SavedRun& run, const std::vector<std::size_t>& snapshots) {
  std::vector<std::string> all;
  for (const std::size_t n : snapshots)
    all.push_back(
        table_json(read_profiles(run, n), fmt::format("profiles/profiles_{:04}.csv", n), "", 6));
  return json::list(all);
}

}  // namespace lidwright::page
