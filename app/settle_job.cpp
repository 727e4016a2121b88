#include "app/settle_job.hpp"

#include <fmt/format.h>

#include "app/settle_files.hpp"
#include "app/settle_summary.hpp"
#include "io/collective.hpp"
#include "solver/solve_error.hpp"

namespace lidwright {

void write_text(MPI_Comm comm, const std::string& path, const std::string& text) {
  on_first_rank<OutputError>(comm, [&] { write_atomically(path, text); });
}

void write_found(const SettleJob& job, const RunPaths& paths, const SteadyState& found,
                 const SettleWatch& watch) {
  const MPI_Comm comm = job.session.comm();
  write_text(comm, paths.newton(), newton_table(watch.steps()));
  SteadyFiles(comm, paths).write(job.c, found, "");
}

void end_with(const SettleJob& job, const RunPaths& paths, const SteadyState& found,
              const SettleWatch& watch, const std::vector<SummaryEntry>& more,
              const std::string& text) {
  std::size_t steps = 0;
  for (const NewtonStep& s : watch.steps()) steps += s.step > 0 ? 1 : 0;
  std::vector<SummaryEntry> entries = settle_entries(job.c, found, steps, job.seconds());
  entries.insert(entries.end(), more.begin(), more.end());
  write_summary(job.session.comm(), paths.summary(), entries);
  if (job.session.first())
    fmt::print("{}{}  results in            {}\n",
               settle_for_people(job.c, found, steps, job.seconds()), text, paths.folder);
}

ExitCode code_for(const SteadyState& found, const RunPaths& paths) {
  if (found.converged) return ExitCode::Done;
  if (end_of(found) == "interrupted") return ExitCode::Interrupted;
  throw SolveError(fmt::format(
      "no steady state on {} x {} cells: {}. The last state is in {}. If the flow changes for "
      "ever, "
      "march it (`lidwright march`); else give a better start (initial.from), more time "
      "(settle.most_time, settle.most_steps) or a finer grid",
      found.grid.radial, found.grid.lateral, found.remark, paths.folder));
}

}  // namespace lidwright
