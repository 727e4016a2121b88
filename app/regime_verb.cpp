#include "app/regime_verb.hpp"

#include <fmt/format.h>

#include <charconv>
#include <cmath>
#include <filesystem>

#include "app/run_statistics.hpp"
#include "io/atomic_file.hpp"
#include "io/case_entries.hpp"
#include "io/case_file.hpp"
#include "io/collective.hpp"
#include "io/run_folder.hpp"
#include "io/wrapped.hpp"

namespace lidwright {
namespace {

const RegimeThreshold& threshold_named(const std::string& name, const std::string& setting) {
  std::vector<std::string> names;
  for (const RegimeThreshold& row : regime_thresholds()) {
    if (name == row.name) return row;
    names.emplace_back(row.name);
  }
  throw InputError(
      fmt::format("--threshold {}: there is no threshold '{}'{}; see `lidwright "
                  "regime --thresholds`",
                  setting, name, case_text::nearest(name, names)));
}

/// "NAME=VALUE" of --threshold.
void set_threshold(const std::string& setting, RegimeThresholds& t) {
  const std::size_t equals = setting.find('=');
  if (equals == std::string::npos)
    throw InputError(
        fmt::format("--threshold {}: must be NAME=VALUE, as in --threshold mobile=0.7", setting));
  const RegimeThreshold& row = threshold_named(setting.substr(0, equals), setting);
  double value = 0;
  const char *begin = setting.data() + equals + 1, *end = setting.data() + setting.size();
  const auto [read_to, error] = std::from_chars(begin, end, value);
  if (error != std::errc() || read_to != end || !(value >= row.low && value <= row.high))
    throw InputError(fmt::format("--threshold {}: must be a number from {:g} to {:g}", setting,
                                 row.low, row.high));
  t.*row.value = value;
}

RegimeThresholds thresholds_of(const RegimeRequest& request) {
  RegimeThresholds t;
  for (const std::string& setting : request.thresholds) set_threshold(setting, t);
  return t;
}

std::string thresholds_for_people(const RegimeThresholds& t) {
  std::string text;
  for (const RegimeThreshold& row : regime_thresholds())
    text += fmt::format("{} = {:g}\n{}{}", row.name, t.*row.value, wrapped(row.meaning, 4),
                        wrapped(fmt::format("[{}]", row.source), 4));
  return text;
}

std::string history_of(const std::string& folder) {
  if (!std::filesystem::is_directory(folder))
    throw InputError(fmt::format("{}: is no folder; name the folder of a march", folder));
  if (holds_steady_states(folder))
    throw InputError(fmt::format(
        "{}: holds steady states, which have no history; name the folder of a march", folder));
  const std::string path = RunPaths{folder}.history();
  if (!std::filesystem::is_regular_file(path))
    throw InputError(fmt::format("{}: holds no history.csv; name the folder of a march", folder));
  return path;
}

HistoryTable read_history(const std::string& path) {
  HistoryTable t = parse_history(read_whole_file(path), path);
  if (t.rows() < 2)
    throw InputError(
        fmt::format("{}: too short for a verdict, it has {} rows; go on with the run (--resume)",
                    path, t.rows()));
  return t;
}

std::string judged(const RegimeRequest& request, const RegimeThresholds& t) {
  const std::string path = history_of(request.run);
  const HistoryTable table = read_history(path);
  const RegimeVerdict v = judge_regime(regime_records(table, path), t);
  std::string text = fmt::format("{}\n{}", request.run, regime_for_people(v));
  if (std::isfinite(v.settled_from))
    text += fmt::format("  looked at             time {:.4g} to {:.4g}\n", v.settled_from,
                        table.find("time")->back());
  std::string list;
  for (const RegimeThreshold& row : regime_thresholds())
    list += fmt::format("{}{} = {:g}", list.empty() ? "" : ", ", row.name, t.*row.value);
  return text + fmt::format("  thresholds            {}\n", list);
}

}  // namespace

ExitCode regime(const Session& session, const RegimeRequest& request) {
  const RegimeThresholds t = thresholds_of(request);
  std::string text;
  if (request.list) {
    text = thresholds_for_people(t);
  } else {
    if (request.run.empty())
      throw InputError("regime: name a run folder; see `lidwright regime --help`");
    on_first_rank<InputError>(session.comm(), [&] { text = judged(request, t); });
  }
  if (session.first()) fmt::print("{}", text);
  return ExitCode::Done;
}

}  // namespace lidwright
