#include "io/benchmark_folder.hpp"

#include <fmt/format.h>
#include <fmt/ranges.h>

#include <algorithm>
#include <array>
#include <charconv>
#include <cmath>
#include <filesystem>

#include "io/atomic_file.hpp"
#include "io/benchmark_file.hpp"
#include "io/case_entries.hpp"
#include "io/case_file.hpp"
#include "io/csv_table.hpp"
#include "io/linear_rules.hpp"
#include "study/measured.hpp"

namespace lidwright {
namespace {

using case_text::nearest;
using case_text::refuse;
namespace fs = std::filesystem;

constexpr std::array marks{Mark::Analytic,  Mark::Computed,   Mark::Published,
                           Mark::Confirmed, Mark::Remembered, Mark::Doubtful};

std::string path_of(const std::string& folder, const std::string& name, const char* file) {
  return (fs::path(folder) / name / file).string();
}

std::string contents(const std::string& path) {
  try {
    return read_whole_file(path);
  } catch (const std::exception& e) {
    throw InputError(e.what());
  }
}

std::vector<TextRow> expected_rows(const std::string& folder, const std::string& name) {
  const std::string path = path_of(folder, name, "expected.csv");
  return parse_text_table(contents(path), path, {"quantity", "value", "mark", "source"},
                          {"variant", "case", "settings", "start", "spread", "definition", "run"});
}

bool quick_row(const BenchmarkFile& head, const TextRow& row) {
  if (row["run"] != "" && row["run"] != "all" && row["run"] != "quick")
    refuse(row.place, fmt::format("run = '{}': must be quick or all, or empty for what "
                                  "benchmark.toml says",
                                  row["run"]));
  return row["run"].empty() ? head.quick : row["run"] == "quick";
}

double number(const TextRow& row, const char* column) {
  const std::string& text = row[column];
  double value = 0;
  const auto [end, error] = std::from_chars(text.data(), text.data() + text.size(), value);
  if (error != std::errc() || end != text.data() + text.size() || !std::isfinite(value))
    refuse(row.place, fmt::format("{} = '{}': must be a number", column, text));
  return value;
}

Mark mark_of(const TextRow& row) {
  std::vector<std::string> words;
  for (const Mark m : marks) {
    if (row["mark"] == word(m)) return m;
    words.emplace_back(word(m));
  }
  refuse(row.place,
         fmt::format("mark = '{}': must be one of {}", row["mark"], fmt::join(words, ", ")));
}

void check_quantity(How how, const TextRow& row) {
  if (measurable(how, row["quantity"])) return;
  const std::vector<std::string> names = measurable_names(how);
  std::string hint = nearest(row["quantity"], names);
  if (hint.empty()) hint = fmt::format("; the quantities are {}", fmt::join(names, ", "));
  refuse(row.place, fmt::format("unknown quantity '{}'{}", row["quantity"], hint));
}

Expectation expectation(How how, const TextRow& row) {
  check_quantity(how, row);
  Expectation e;
  e.quantity = row["quantity"];
  e.text = row["value"];
  e.value = number(row, "value");
  e.spread_stated = !row["spread"].empty();
  e.spread = e.spread_stated ? number(row, "spread") : rounding_of(e.text);
  if (e.spread < 0)
    refuse(row.place, fmt::format("spread = '{}': must not be negative", row["spread"]));
  e.mark = mark_of(row);
  e.source = row["source"];
  e.definition = row["definition"];
  return e;
}

std::vector<std::string> split(const std::string& list) {
  std::vector<std::string> parts;
  for (std::size_t from = 0; from < list.size();) {
    const std::size_t end = std::min(list.find(';', from), list.size());
    const std::size_t first = list.find_first_not_of(' ', from);
    if (first < end) parts.push_back(list.substr(first, end - first));
    from = end + 1;
  }
  return parts;
}

/// The grids halve the case's own without remainder, down to one that is worth a computation.
void check_grids(const Grid& grid, int grids, const std::string& place) {
  const int part = 1 << (grids - 1);
  if (grid.radial % part == 0 && grid.lateral % part == 0 && grid.radial / part >= 8 &&
      grid.lateral / part >= 8)
    return;
  refuse(place, fmt::format("grid {} x {}: must be divisible by {} and leave at least 8 cells, for "
                            "{} grids that halve each other (benchmark.toml: grids)",
                            grid.radial, grid.lateral, part, grids));
}

Problem problem(const BenchmarkFile& head, const std::string& case_path, const TextRow& row) {
  Problem p;
  p.forcing = head.forcing;
  p.cycles = head.cycles;
  std::vector<std::string> settings;
  for (const std::string& s : split(row["settings"]))
    if (!set_forcing(p.forcing, s, row.place)) settings.push_back(s);
  try {
    const Case c = read_case(case_path, settings);
    p.model = c.model;
    p.initial = c.initial;
    p.flow = c.flow;
    p.heat = c.heat;
    p.march = c.march;
    p.settle = c.settle;
  } catch (const InputError& e) {
    refuse(row.place, fmt::format("settings: {}", e.what()));
  }
  check_grids(p.model.grid, head.grids, row.place);
  if (head.how == How::Relax && !(p.march.steady > 0))
    refuse(row.place,
           "march.steady must be greater than 0: how = \"relax\" marches until the rate of change "
           "is below it");
  if (head.how == How::Settle) refuse_nonlinear(p.model, Linearised::SteadyState, row.place);
  if (head.how == How::Onset) refuse_nonlinear(p.model, Linearised::Onset, row.place);
  return p;
}

/// The state it starts from is found before it.
void check_start(const Benchmark& b, const TextRow& row) {
  const auto same = [&](const Variant& v) { return v.name == row["start"]; };
  if (row["start"].empty() || std::any_of(b.variants.begin(), b.variants.end(), same)) return;
  refuse(row.place, fmt::format("start = '{}': must be the name of a variant above that is run "
                                "whenever this one is",
                                row["start"]));
}

}  // namespace

std::vector<std::string> benchmark_names(const std::string& folder) {
  std::vector<std::string> names;
  std::error_code error;
  for (const auto& entry : fs::directory_iterator(folder, error))
    if (fs::exists(entry.path() / "benchmark.toml", error))
      names.push_back(entry.path().filename().string());
  if (names.empty())
    refuse(folder, "holds no benchmarks; give a folder of folders with a benchmark.toml in each");
  std::sort(names.begin(), names.end());
  return names;
}

std::string nearest_name(const std::string& name, const std::vector<std::string>& known) {
  return nearest(name, known);
}

BenchmarkHead read_benchmark_head(const std::string& folder, const std::string& name) {
  const BenchmarkFile file = read_benchmark_file(path_of(folder, name, "benchmark.toml"));
  BenchmarkHead head{name, file.title, file.reference, 0, 0};
  for (const TextRow& row : expected_rows(folder, name)) {
    ++head.values;
    head.quick_values += quick_row(file, row);
  }
  return head;
}

Benchmark read_benchmark(const std::string& folder, const std::string& name, Rows rows) {
  const BenchmarkFile file = read_benchmark_file(path_of(folder, name, "benchmark.toml"));
  Benchmark b{name, file.title, file.reference, file.how, file.grids, {}};
  for (const TextRow& row : expected_rows(folder, name)) {
    const bool quick = quick_row(file, row);
    if (rows == Rows::Quick && !quick) continue;
    const auto same = [&](const Variant& v) {
      return v.case_file == row["case"] && v.settings == row["settings"] && v.start == row["start"];
    };
    auto variant = std::find_if(b.variants.begin(), b.variants.end(), same);
    if (variant == b.variants.end()) {
      const std::string case_name = row["case"].empty() ? "case.toml" : row["case"];
      Problem p = problem(file, path_of(folder, name, case_name.c_str()), row);
      check_start(b, row);
      b.variants.push_back(
          {row["variant"], row["case"], row["settings"], row["start"], std::move(p), {}});
      variant = b.variants.end() - 1;
    }
    variant->expected.push_back(expectation(b.how, row));
  }
  return b;
}

}  // namespace lidwright
