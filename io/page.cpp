#include "io/page.hpp"

#include <fmt/format.h>
#include <unistd.h>

#include <cmath>
#include <filesystem>
#include <functional>

#include "io/atomic_file.hpp"
#include "io/branch_table.hpp"
#include "io/json.hpp"
#include "io/page_assets.hpp"
#include "io/page_fields.hpp"
#include "io/page_headline.hpp"
#include "io/page_health.hpp"
#include "io/page_history.hpp"
#include "io/page_limits.hpp"
#include "io/page_words.hpp"
#include "io/provenance.hpp"

namespace lidwright {
namespace {

namespace fs = std::filesystem;
using namespace page;

std::string text_if_there(const std::string& path) {
  return fs::is_regular_file(path) ? read_whole_file(path) : "";
}

std::optional<NumberTable> table_if_there(const std::string& path) {
  const std::string text = text_if_there(path);
  if (text.empty()) return std::nullopt;
  return parse_numbers(text, path);
}

/// What stands before the first table of summary.toml; empty while there is none.
TomlSection summary_of(const SavedRun& run) {
  const std::string path = run.paths.summary();
  return toml_sections(text_if_there(path), path).front();
}

std::string provenance_json(const SavedRun& run) {
  std::vector<std::string> sessions;
  const std::string path = run.paths.provenance();
  for (const TomlSection& s : toml_sections(text_if_there(path), path)) {
    if (s.entries.empty()) continue;
    std::vector<std::string> entries;
    for (const auto& [key, value] : s.entries) entries.push_back(json::texts({key, value}));
    sessions.push_back(json::list(entries));
  }
  return json::list(sessions);
}

/// Parts of a page that depend on the kind of run.
struct Parts {
  Verdict verdict;
  std::string soundness;
  std::vector<Figure> figures;
  std::vector<HealthRow> health;
  std::string history = "null";
  std::vector<std::string> tables;
  std::vector<std::string> labels;  ///< of every snapshot
  std::string parameter;            ///< key of a branch, and its unit as people write it
  std::string parameter_unit;
};

Parts march_parts(const SavedRun& run, const PageState& state) {
  Parts parts;
  for (const CollectionEntry& s : run.snapshots)
    parts.labels.push_back(time_words(s.time, run.settings.body));
  if (!run.history || run.history->rows() < 2) {
    parts.verdict = {"too short",
                     "The history has fewer than two rows: nothing can be said yet.",
                     {},
                     Tone::Doubtful};
    return parts;
  }
  const RunStatistics s = run_statistics(*run.history, run.paths.history(), run.settings.march);
  parts.verdict = march_verdict(s, state.running);
  parts.soundness = soundness(s);
  parts.figures = march_figures(run, s);
  parts.health = march_health(run, s);
  parts.history = history_json(run, s);
  parts.tables.push_back(text_table_json(statistics_table(s.records), "statistics.csv",
                                         "Means over time, with errors"));
  return parts;
}

void add_table(Parts& parts, const std::string& path, const std::string& title) {
  if (const auto t = table_if_there(path))
    parts.tables.push_back(table_json(*t, fs::path(path).filename().string(), title));
}

/// Number of a state and value of the key there.
void label_states(Parts& parts, const std::vector<BranchRow>& rows) {
  for (const BranchRow& r : rows)
    if (r.snapshot >= 0 && static_cast<std::size_t>(r.snapshot) < parts.labels.size())
      parts.labels[static_cast<std::size_t>(r.snapshot)] =
          fmt::format("{} = {}", parts.parameter, with_unit(r.parameter, parts.parameter_unit));
}

Parts settle_parts(const SavedRun& run) {
  Parts parts;
  const TomlSection summary = summary_of(run);
  for (std::size_t k = 0; k < run.snapshots.size(); ++k)
    parts.labels.push_back(run.snapshots.size() == 1 ? "the state" : fmt::format("state {}", k));
  const std::string path = run.paths.branch(), bars = text_if_there(run.paths.error_bars());
  if (const std::string text = text_if_there(path); !text.empty()) {
    const SavedBranch branch = read_branch(text, path);
    const NumberTable numbers = parse_numbers(text, path);
    parts.parameter = branch.parameter.key;
    parts.parameter_unit = unit(branch.parameter.unit);
    parts.figures = branch_figures(numbers, parts.parameter);
    parts.health = branch_health(run, numbers);
    label_states(parts, branch.rows);
  } else {
    parts.figures = settle_figures(run, summary, bars);
    parts.health = settle_health(run, summary);
  }
  parts.verdict = settle_verdict(summary, parts.parameter);
  add_table(parts, path, "The branch, state by state");
  if (!bars.empty())
    parts.tables.push_back(text_table_json(bars, "error_bars.csv", "Quantities on three grids"));
  add_table(parts, run.paths.growth_rates(), "Growth of small disturbances");
  add_table(parts, run.paths.newton(), "The way to the steady state");
  return parts;
}

Parts onset_parts(const SavedRun& run) {
  Parts parts;
  const TomlSection summary = summary_of(run);
  parts.labels.assign(run.snapshots.size(), "the mode that sets in first, to no scale");
  parts.verdict = onset_verdict(summary);
  parts.figures = onset_figures(summary);
  const std::string path = run.paths.folder + "/onset.csv";
  if (const auto curve = table_if_there(path)) parts.health = onset_health(*curve, summary);
  add_table(parts, path, "Neutral Rayleigh number, mode by mode");
  return parts;
}

Parts parts_of(const SavedRun& run, const PageState& state) {
  switch (run.kind) {
    case RunKind::March:
      return march_parts(run, state);
    case RunKind::Settle:
      return settle_parts(run);
    case RunKind::Onset:
      return onset_parts(run);
  }
  return {};
}

const char* kind_word(RunKind kind) {
  if (kind == RunKind::March) return "march";
  return kind == RunKind::Settle ? "settle" : "onset";
}

/// Fields and profiles of the same snapshots. A run whose snapshots were moved away has a page all
/// the same, which says what is missing.
struct Shown {
  std::string fields = "null", profiles = "[]", missing;
};
Shown shown_of(const SavedRun& run, const std::vector<std::string>& labels) {
  Shown shown;
  try {
    const Frames frames = frames_of(run, labels, {});
    shown.fields = frames.json;
    shown.profiles = profiles_json(run, frames.snapshots);
  } catch (const InputError& e) {
    shown.missing = e.what();
  }
  return shown;
}

std::string title_of(const SavedRun& run) {
  return run.settings.title.empty() ? fs::canonical(run.paths.folder).filename().string()
                                    : run.settings.title;
}

std::string data_of(const SavedRun& run, const PageState& state) {
  const Parts parts = parts_of(run, state);
  const Shown shown = shown_of(run, parts.labels);
  return json::object({{"title", json::text(title_of(run))},
                       {"folder", json::text(run.paths.folder)},
                       {"kind", json::text(kind_word(run.kind))},
                       {"program", json::text(fmt::format("lidwright {} ({})", program_version(),
                                                          program_commit()))},
                       {"written", json::text(utc_now())},
                       {"running", json::truth(state.running)},
                       {"reload", json::number(state.running ? state.reload : 0)},
                       {"parameter", json::text(parts.parameter)},
                       {"parameterUnit", json::text(parts.parameter_unit)},
                       {"verdict", json_of(parts.verdict)},
                       {"soundness", json::text(parts.soundness)},
                       {"figures", json_of(parts.figures, run.settings.body)},
                       {"health", json_of(parts.health)},
                       {"fields", shown.fields},
                       {"profiles", shown.profiles},
                       {"missing", json::text(shown.missing)},
                       {"history", parts.history},
                       {"tables", json::list(parts.tables)},
                       {"limits", json::texts(limits_of(run))},
                       {"case", json::text(text_if_there(run.paths.case_file()))},
                       {"provenance", provenance_json(run)}});
}

std::string as_html(const std::string& plain) {
  std::string text;
  for (const char c : plain) {
    if (c == '<')
      text += "&lt;";
    else if (c == '>')
      text += "&gt;";
    else if (c == '&')
      text += "&amp;";
    else if (c == '"')
      text += "&quot;";
    else
      text += c;
  }
  return text;
}

/// Each `{{name}}` of the skeleton, once, from its beginning to its end: what is put in is not
/// looked at again.
std::string filled(std::string_view frame,
                   const std::function<std::string(std::string_view)>& part) {
  std::string text;
  for (std::size_t open; (open = frame.find("{{")) != std::string_view::npos;) {
    const std::size_t close = frame.find("}}", open);
    text += frame.substr(0, open);
    text += part(frame.substr(open + 2, close - open - 2));
    frame.remove_prefix(close + 2);
  }
  return text + std::string(frame);
}

}  // namespace

std::string page_of(const SavedRun& run, const PageState& state) {
  return filled(skeleton(), [&](std::string_view name) -> std::string {
    if (name == "mark") return std::string(page_mark);
    if (name == "title") return as_html(title_of(run));
    if (name == "style") return charts_style() + std::string(style());
    if (name == "charts") return charts_script();
    if (name == "notice") return std::string(charts_notice());
    if (name == "script") return script();
    return data_of(run, state);
  });
}

void refuse_foreign_page(const std::string& path) {
  if (!fs::exists(path)) return;
  if (fs::is_regular_file(path) && read_whole_file(path).starts_with(page_mark)) return;
  throw InputError(fmt::format(
      "{}: is there already and is no report of this program; write to another file with --onto "
      "FILE{}",
      path, fs::is_directory(path) ? "" : ", or replace it with --overwrite"));
}

void write_page(const std::string& path, const std::string& page, ForeignFile foreign) {
  if (foreign == ForeignFile::Refuse || fs::is_directory(path)) refuse_foreign_page(path);
  // A run that ends and a session that follows it may write the page at the same moment.
  write_atomically(path, page, fmt::format(".{}", ::getpid()));
}

}  // namespace lidwright
