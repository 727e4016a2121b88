#include "app/march_verb.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <optional>

#include "app/known_watch.hpp"
#include "app/run_report.hpp"
#include "app/run_start.hpp"
#include "app/run_statistics.hpp"
#include "app/run_summary.hpp"
#include "app/shared_case.hpp"
#include "app/stop_signals.hpp"
#include "io/case_file.hpp"
#include "io/checkpoint.hpp"
#include "io/collective.hpp"
#include "io/history.hpp"
#include "io/picture.hpp"
#include "io/provenance.hpp"
#include "io/run_folder.hpp"
#include "io/snapshot.hpp"
#include "solver/march.hpp"

namespace lidwright {
namespace {

using Clock = std::chrono::steady_clock;

double seconds_since(Clock::time_point t) {
  return std::chrono::duration<double>(Clock::now() - t).count();
}

/// A run that is going on: the march, its files, and when which is written.
class Run {
 public:
  Run(const Session& session, const MarchRequest& request, Case c, RunFolder folder,
      std::unique_ptr<March> march, double wall_time_before, Clock::time_point start)
      : session_(session),
        case_(std::move(c)),
        folder_(std::move(folder)),
        march_(std::move(march)),
        wall_time_before_(wall_time_before),
        start_(start),
        resumed_(!request.resume.empty()),
        provenance_(session.comm(), folder_.paths().provenance(), march_->steps()),
        history_(resumed_
                     ? History::resume(session.comm(), folder_.paths().history(), march_->steps())
                     : History::start(session.comm(), folder_.paths().history())),
        snapshots_(session.comm(), folder_.paths(),
                   resumed_ ? std::optional(march_->time()) : std::nullopt),
        known_watch_(session.comm(), case_.march),
        progress_(request.progress, session.first()) {
    if (resumed_) known_ = known_watch_.take_up(folder_.paths().history());
  }

  ExitCode go();

 private:
  enum class End { None, Time, Steps, Steady, Known, WallClock, Signal };

  ExitCode go_on();
  HistoryRow row() const;
  End end_reached() const;
  double share_done() const;
  double next_snapshot_time() const;
  void record_step();
  void write_snapshot();
  void write_checkpoint_now();
  void checkpoint_if_due();
  void finish(End);
  RunStatistics write_statistics() const;
  static std::string reason(End);
  static bool complete(End end) {
    return end == End::Time || end == End::Steps || end == End::Steady || end == End::Known;
  }

  const Session& session_;
  Case case_;
  RunFolder folder_;
  std::unique_ptr<March> march_;
  double wall_time_before_;
  Clock::time_point start_;
  bool resumed_;
  Provenance provenance_;
  History history_;
  SnapshotWriter snapshots_;
  KnownWatch known_watch_;
  bool known_ = false;
  Progress progress_;
  long last_checkpoint_ = -1;
};

HistoryRow Run::row() const {
  HistoryRow r = march_->row();
  r.wall_time = wall_time_before_ + seconds_since(start_);
  return r;
}

std::string Run::reason(End end) {
  switch (end) {
    case End::None:
      return "";
    case End::Time:
      return "end time reached";
    case End::Steps:
      return "number of steps reached";
    case End::Steady:
      return "steady";
    case End::Known:
      return "means known";
    case End::WallClock:
      return "wall-clock limit reached";
    case End::Signal:
      return "interrupted";
  }
  return "";
}

Run::End Run::end_reached() const {
  const MarchSettings& m = case_.march;
  if (known_) return End::Known;
  if (march_->time() >= m.end_time) return End::Time;
  if (m.most_steps > 0 && march_->steps() >= m.most_steps) return End::Steps;
  if (m.steady > 0 && march_->temperature_change_rate() < m.steady) return End::Steady;
  if (stop_requested(session_.comm())) return End::Signal;
  // The ranks' clocks differ: the first one's counts.
  double elapsed = seconds_since(start_);
  MPI_Bcast(&elapsed, 1, MPI_DOUBLE, 0, session_.comm());
  if (m.wall_clock > 0 && elapsed >= m.wall_clock) return End::WallClock;
  return End::None;
}

double Run::share_done() const {
  const double by_time = march_->time() / case_.march.end_time;
  const double by_steps =
      case_.march.most_steps > 0
          ? static_cast<double>(march_->steps()) / static_cast<double>(case_.march.most_steps)
          : 0;
  return std::clamp(std::max(by_time, by_steps), 0.0, 1.0);
}

/// The first multiple of the interval after now, or the end.
double Run::next_snapshot_time() const {
  const double every = case_.output.snapshot_every;
  if (every <= 0) return case_.march.end_time;
  const double next = (std::floor(march_->time() / every * (1 + 1e-12)) + 1) * every;
  return std::min(next, case_.march.end_time);
}

void Run::write_snapshot() {
  const Snapshot snapshot = march_->snapshot(case_.output.normal_stress);
  const RunPaths& paths = folder_.paths();
  snapshots_.write(snapshot);
  if (case_.output.pictures)
    draw_run(paths.folder + "/" + picture_name(snapshots_.count() - 1), snapshot, paths.history(),
             case_.title, picture_units(case_.body));
}

void Run::write_checkpoint_now() {
  if (last_checkpoint_ == march_->steps()) return;
  history_.sync();
  Archive archive = march_->archive();
  archive.numbers["wall_time"] = wall_time_before_ + seconds_since(start_);
  const RunPaths& paths = folder_.paths();
  write_checkpoint(checkpoint_path(paths.checkpoints(), march_->steps()), archive,
                   *march_->decomposition(), fingerprint(case_));
  remove_old_checkpoints(session_.comm(), paths.checkpoints(), case_.output.checkpoints_kept);
  last_checkpoint_ = march_->steps();
}

/// A checkpoint comes after everything that belongs to its step: a resumed run never lacks it.
void Run::checkpoint_if_due() {
  const long every = case_.output.checkpoint_every;
  if (every > 0 && march_->steps() % every == 0) write_checkpoint_now();
}

void Run::record_step() {
  const long step = march_->steps();
  if (step % case_.output.history_every == 0) {
    const HistoryRow r = row();
    history_.append(r);
    known_ = known_watch_.known_after(r);
    progress_.show(r, share_done());
  }
}

/// Of the whole history; on the first rank.
RunStatistics Run::write_statistics() const {
  RunStatistics statistics;
  const RunPaths& paths = folder_.paths();
  on_first_rank<OutputError>(session_.comm(), [&] {
    const HistoryTable table = parse_history(read_whole_file(paths.history()), paths.history());
    statistics = run_statistics(table, paths.history(), case_.march);
    write_atomically(paths.statistics(), statistics_table(statistics.records));
  });
  return statistics;
}

void Run::finish(End end) {
  progress_.finish();
  const HistoryRow last = row();
  if (complete(end) && history_.last_step() != march_->steps()) history_.append(last);
  if (complete(end)) write_snapshot();
  write_checkpoint_now();
  provenance_.end_session(march_->steps(), reason(end));
  const RunStatistics statistics = write_statistics();
  std::vector<SummaryEntry> entries = summary_entries(case_, last, reason(end));
  if (session_.first())
    for (SummaryEntry& e : statistics_entries(statistics, case_.march))
      entries.push_back(std::move(e));
  write_summary(session_.comm(), folder_.paths().summary(), entries);
  if (!session_.first()) return;
  const std::string& folder = folder_.paths().folder;
  fmt::print("{}\n", summary_for_people(case_, last, reason(end),
                                        statistics_for_people(statistics, case_.march), folder));
  if (!complete(end)) fmt::print("  to go on              lidwright march --resume {}\n", folder);
}

ExitCode Run::go() {
  try {
    return go_on();
  } catch (const SolveError&) {
    progress_.finish();
    provenance_.end_session(march_->steps(), "not solved");
    throw;
  } catch (...) {
    progress_.finish();
    throw;
  }
}

ExitCode Run::go_on() {
  if (!resumed_) {
    record_step();
    write_snapshot();
    write_checkpoint_now();
  }
  End end = end_reached();
  while (end == End::None) {
    const double until = next_snapshot_time();
    march_->step(until);
    record_step();
    end = end_reached();
    if (march_->time() >= until && !complete(end)) write_snapshot();
    checkpoint_if_due();
  }
  finish(end);
  return write_run_report(session_, case_, folder_.paths(),
                          complete(end) ? ExitCode::Done : ExitCode::Interrupted);
}

ExitCode start_new(const Session& session, const MarchRequest& request, Clock::time_point start) {
  const Case c = shared_case(session.comm(), request.case_file, request.settings);
  const std::string path = folder_for(request.into, request.case_file, "");
  const ExistingRun existing = existing_run(request.overwrite);
  RunFolder::refuse_taken(session.comm(), path, existing);
  const StoredTemperature stored = stored_start(session.comm(), c);
  // Everything that bad input can spoil comes before the folder is made.
  auto march = or_bad_input([&] {
    return std::make_unique<March>(c.model, c.initial, stored, c.flow, c.heat, session.comm());
  });
  RunFolder folder = start_folder(session.comm(), path, existing, c);
  return Run(session, request, c, std::move(folder), std::move(march), 0, start).go();
}

CheckpointFile chosen_checkpoint(const Session& session, const MarchRequest& request,
                                 const RunPaths& paths) {
  const std::vector<CheckpointFile> found = list_checkpoints(session.comm(), paths.checkpoints());
  if (found.empty())
    throw InputError(
        fmt::format("{0}: holds no checkpoint, the run ended before its first one; start it anew "
                    "with --into {0} --overwrite",
                    paths.folder));
  if (request.from_previous && found.size() < 2)
    throw InputError(
        fmt::format("{0}: holds one checkpoint only, none before it; resume without "
                    "--resume-from-previous, or start the run anew with --into {0} --overwrite",
                    paths.folder));
  return found[request.from_previous ? 1 : 0];
}

void refuse_steady_states(const Session& session, const std::string& folder) {
  on_first_rank<InputError>(session.comm(), [&] {
    if (holds_steady_states(folder))
      throw InputError(
          fmt::format("{0}: holds steady states, which do not go on in time; start a run from "
                      "there, with initial.from = \"{0}\"",
                      folder));
  });
}

/// Before anything of the run is changed.
void refuse_unfit_history(const Session& session, const std::string& path, long step) {
  on_first_rank<InputError>(session.comm(),
                            [&] { history_until(read_whole_file(path), step, path); });
}

ExitCode resume(const Session& session, const MarchRequest& request, Clock::time_point start) {
  refuse_steady_states(session, request.resume);
  RunFolder folder = RunFolder::resume(session.comm(), request.resume);
  const RunPaths& paths = folder.paths();
  const CheckpointFile checkpoint = chosen_checkpoint(session, request, paths);
  const Case before = shared_case(session.comm(), paths.case_file(), {});
  const Case c = shared_case(session.comm(), paths.case_file(), request.settings);
  if (fingerprint(c) != fingerprint(before))
    throw InputError(
        "--set: a resumed run may change keys of [march] and [output] only; start a new run, from "
        "this "
        "one's state if you like (initial.from)");
  const auto decomposition = or_bad_input([&] { return decompose(c.model, session.comm()); });
  const Archive archive = read_checkpoint(checkpoint.path, decomposition, fingerprint(c));
  auto march = std::make_unique<March>(c.model, c.flow, c.heat, archive, session.comm());
  refuse_unfit_history(session, paths.history(), checkpoint.step);
  remove_checkpoints_after(session.comm(), paths.checkpoints(), checkpoint.step);
  on_first_rank<OutputError>(session.comm(),
                             [&] { write_atomically(paths.case_file(), write_case(c)); });
  const double wall_time = archive.numbers.at("wall_time");
  return Run(session, request, c, std::move(folder), std::move(march), wall_time, start).go();
}

}  // namespace

ExitCode march(const Session& session, const MarchRequest& request) {
  catch_stop_signals();
  const Clock::time_point start = Clock::now();
  return request.resume.empty() ? start_new(session, request, start)
                                : resume(session, request, start);
}

}  // namespace lidwright
