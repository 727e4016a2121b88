#include "app/settle_verb.hpp"

#include <fmt/format.h>

#include "app/run_report.hpp"
#include "app/run_start.hpp"
#include "app/settle_along.hpp"
#include "app/settle_files.hpp"
#include "app/settle_job.hpp"
#include "app/settle_summary.hpp"
#include "app/settle_watch.hpp"
#include "app/shared_case.hpp"
#include "app/stop_signals.hpp"
#include "io/collective.hpp"
#include "io/linear_rules.hpp"
#include "io/provenance.hpp"
#include "solver/initial.hpp"
#include "solver/solve_error.hpp"
#include "solver/stability.hpp"
#include "study/steady_grids.hpp"

namespace lidwright {
namespace {

constexpr int grids_of_error_bars = 3;
constexpr int growth_rates_shown = 6;
/// What the tolerance of the residual may leave in a quantity, in units of that tolerance.
constexpr double residual_to_quantity = 100;

int grids_for(const SettleRequest& request) { return request.error_bars ? grids_of_error_bars : 1; }

void refuse_together(const SettleRequest& request) {
  if (request.case_file.empty())
    throw InputError("settle: name a case file; see `lidwright settle --help`");
  if (request.along && request.error_bars)
    throw InputError(
        "--along and --error-bars do not go together; take error bars at one value of the key, "
        "with --set instead of --along");
}

/// What would spoil the search later: grid, ranks, the start's region.
void refuse_unfit(const SettleRequest& request, const Case& c, const StoredTemperature& stored,
                  MPI_Comm comm) {
  or_bad_input([&] {
    refuse_unhalvable(c.model.grid, grids_for(request));
    for (int times = 1; times < grids_for(request); ++times) {
      Model coarse = c.model;
      coarse.grid = halved(c.model.grid, times);
      decompose(coarse, comm);
    }
    const Model& m = c.model;
    const HeatOperator heat(decompose(m, comm), m.walls, m.heat, c.settle.flux, m.reference);
    return initial_temperature(heat, c.initial, stored);
  });
}

/// The text of a case file as the first rank sees it, on all ranks.
CaseAlong shared_along(MPI_Comm comm, const SettleRequest& request) {
  const Along along = read_along(*request.along);
  std::string text;
  on_first_rank<InputError>(comm, [&] { text = read_case_text(request.case_file); });
  broadcast(comm, text);
  CaseAlong cases(text, request.case_file, request.settings, along);
  on_first_rank<InputError>(comm, [&] { cases.refuse_bad_values(); });
  return cases;
}

std::vector<Grid> grids_of(const std::vector<SteadyState>& states) {
  std::vector<Grid> grids;
  for (const SteadyState& s : states) grids.push_back(s.grid);
  return grids;
}

/// Tables that were asked for beside the state, as they are printed; collects summary entries.
class Extras {
 public:
  Extras(const SettleJob& job, const RunPaths& paths) : job_(job), paths_(paths) {}
  void add_bars(const std::vector<SteadyState>&);
  void add_stability(const SteadyState&);
  const std::string& text() const { return text_; }
  const std::vector<SummaryEntry>& entries() const { return entries_; }

 private:
  const SettleJob& job_;
  const RunPaths& paths_;
  std::string text_;
  std::vector<SummaryEntry> entries_;
};

void Extras::add_bars(const std::vector<SteadyState>& states) {
  const double floor = residual_to_quantity * job_.c.settle.tolerance;
  const std::vector<QuantityBar> bars = quantity_bars(states, floor);
  write_text(job_.session.comm(), paths_.error_bars(), error_bars_table(bars, grids_of(states)));
  text_ += bars_for_people(bars, grids_of(states));
}

void Extras::add_stability(const SteadyState& s) {
  const StabilityVerdict verdict = judge_stability(
      growth_rates(job_.c.model, job_.c.settle.flux, s.snapshot.temperature, growth_rates_shown));
  write_text(job_.session.comm(), paths_.growth_rates(), growth_table(verdict));
  entries_ = stability_entries(verdict);
  text_ += stability_for_people(verdict);
}

ExitCode settle_one(const SettleJob& job, const RunPaths& paths, SettleWatch& watch) {
  const MPI_Comm comm = job.session.comm();
  const Case& c = job.c;
  const int grids = grids_for(job.request);
  const std::vector<SteadyState> states =
      or_bad_input([&] {  // a coarse grid may have too few cells for the ranks
        return settle_on_grids(c.model, c.initial, job.stored, c.settle, grids, comm,
                               watch.observer());
      });
  const SteadyState& found = states.back();
  write_found(job, paths, found, watch);
  Extras extras(job, paths);
  if (found.converged && states.size() > 1) extras.add_bars(states);
  std::string no_rates;
  if (found.converged && job.request.stability) {
    watch.say("growth of disturbances");
    try {
      extras.add_stability(found);
    } catch (const SolveError& e) {
      no_rates = e.what();  // after what was found is written and told
    }
  }
  watch.finish();
  end_with(job, paths, found, watch, extras.entries(), extras.text());
  if (!no_rates.empty())
    throw SolveError(fmt::format("{}. The steady state itself is in {}", no_rates, paths.folder));
  if (found.converged && job.request.error_bars && states.size() == 1 && stop_requested(comm))
    return ExitCode::Interrupted;
  if (found.converged && job.request.error_bars && states.size() == 1)
    throw SolveError(fmt::format(
        "no error bars: there is no steady state of this kind on the grid of {} x {} cells; take a "
        "finer grid. The steady state itself is in {}",
        c.model.grid.radial / 2, c.model.grid.lateral / 2, paths.folder));
  return code_for(found, paths);
}

ExitCode settle_in(const SettleJob& job, const RunPaths& paths, Provenance& provenance) {
  SettleWatch watch(job.session.first() ? job.request.progress : ProgressMode::Never);
  try {
    const ExitCode code =
        job.along ? settle_along(job, *job.along, paths, watch) : settle_one(job, paths, watch);
    provenance.end_session(0, code == ExitCode::Done ? "complete" : "interrupted");
    return write_run_report(job.session, job.c, paths, code);
  } catch (const SolveError&) {
    provenance.end_session(0, "not solved");
    if (holds_steady_states(paths.folder))
      write_run_report(job.session, job.c, paths, ExitCode::NotSolved);
    throw;
  }
}

}  // namespace

ExitCode settle(const Session& session, const SettleRequest& request) {
  catch_stop_signals();
  const auto start = SettleJob::Clock::now();
  const MPI_Comm comm = session.comm();
  refuse_together(request);
  std::optional<CaseAlong> along;
  if (request.along) along = shared_along(comm, request);
  const Case c = along ? along->at(along->along().values.front())
                       : shared_case(comm, request.case_file, request.settings);
  refuse_nonlinear(c.model, Linearised::SteadyState, request.case_file);
  const std::string path = folder_for(request.into, request.case_file, "_settle");
  const ExistingRun existing = existing_run(request.overwrite);
  RunFolder::refuse_taken(comm, path, existing);
  const StoredTemperature stored = stored_start(comm, c);
  if (!c.initial.from.empty() && same_place(c.initial.from, path))
    throw InputError(
        fmt::format("initial.from = \"{}\" lies in the folder of the results, {}; write into "
                    "another one (--into)",
                    c.initial.from, path));
  refuse_unfit(request, c, stored, comm);
  const RunFolder folder = start_folder(comm, path, existing, c);
  Provenance provenance(comm, folder.paths().provenance(), 0);
  return settle_in({session, request, c, stored, along, start}, folder.paths(), provenance);
}

}  // namespace lidwright
