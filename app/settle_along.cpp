#include "app/settle_along.hpp"

#include <fmt/format.h>

#include "app/settle_files.hpp"
#include "app/settle_summary.hpp"
#include "app/stop_signals.hpp"
#include "io/branch_table.hpp"
#include "io/collective.hpp"
#include "io/figure_branch.hpp"
#include "solver/branch.hpp"
#include "solver/solve_error.hpp"
#include "solver/stability.hpp"

namespace lidwright {
namespace {

/// The two leading ones: one of them may be that of turning the pattern.
constexpr int growth_rates_of_a_point = 2;

BranchParameter parameter_of(const Along& along, const Case& c) {
  return {along.key.path, c.body ? along.key.unit_with_body : along.key.unit, along.logarithmic};
}

class BranchWalk {
 public:
  BranchWalk(const SettleJob& job, const CaseAlong& cases, const RunPaths& paths,
             SettleWatch& watch)
      : job_(job),
        cases_(cases),
        paths_(paths),
        watch_(watch),
        comm_(job.session.comm()),
        parameter_(parameter_of(cases.along(), job.c)) {}

  ExitCode go(const SteadyState& start);

 private:
  BranchRequest request() const;
  bool see(const BranchPoint&);
  BranchRow row_of(const BranchPoint&);
  void write(const Branch&);
  void finish(const std::string& end);

  const SettleJob& job_;
  const CaseAlong& cases_;
  const RunPaths& paths_;
  SettleWatch& watch_;
  MPI_Comm comm_;
  BranchParameter parameter_;
  int stopped_ = 0;
  std::vector<BranchRow> rows_;
};

BranchRequest BranchWalk::request() const {
  const Along& along = cases_.along();
  const auto model_at = [this](double value) {
    try {
      return cases_.at(value).model;
    } catch (const InputError& e) {
      throw SolveError(e.what());  // a value that a step tried: a shorter one may do
    }
  };
  return {model_at, along.values, along.logarithmic};
}

bool BranchWalk::see(const BranchPoint& p) {
  watch_.say(fmt::format("{}  Nu {:.5g} outer, {:.5g} inner  v_rms {:.5g}  {} Newton steps{}{}",
                         cases_.text_of(p.parameter), p.state.row.nusselt_outer,
                         p.state.row.nusselt_inner, p.state.row.velocity_rms, p.newton_steps,
                         p.backwards ? "  beyond a fold" : "", p.asked_for ? "  asked for" : ""));
  stopped_ = stop_requested(MPI_COMM_SELF) ? 1 : 0;
  return stopped_ == 0;
}

BranchRow BranchWalk::row_of(const BranchPoint& p) {
  BranchRow row{.parameter = p.parameter,
                .asked_for = p.asked_for,
                .backwards = p.backwards,
                .newton_steps = p.newton_steps,
                .residual = p.residual,
                .row = p.state.row};
  if (!p.asked_for || !job_.request.stability) return row;
  const Case c = cases_.at(p.parameter);
  try {
    const StabilityVerdict verdict = judge_stability(growth_rates(
        c.model, c.settle.flux, p.state.snapshot.temperature, growth_rates_of_a_point));
    if (verdict.leading >= 0) row.leading = verdict.leader();
  } catch (const SolveError&) {
    // The state is found all the same: its growth rate stays nan.
  }
  return row;
}

/// All states first: they are what cannot be had again quickly.
void BranchWalk::write(const Branch& branch) {
  SteadyFiles files(comm_, paths_);
  std::vector<int> numbers;
  for (const BranchPoint& p : branch.points)
    numbers.push_back(
        p.asked_for ? files.write(cases_.at(p.parameter), p.state, cases_.text_of(p.parameter))
                    : -1);
  if (job_.request.stability) watch_.say("growth of disturbances");
  for (std::size_t k = 0; k < branch.points.size(); ++k) {
    rows_.push_back(row_of(branch.points[k]));
    rows_.back().snapshot = numbers[k];
  }
  write_text(comm_, paths_.newton(), newton_table(watch_.steps()));
  write_text(comm_, paths_.branch(), branch_table(parameter_, rows_));
  if (job_.c.output.pictures)
    on_first_rank<OutputError>(comm_, [&] {
      write_atomically(paths_.branch_picture(),
                       branch_figure({parameter_, rows_}, job_.c.title, {FigureSize::Slide}));
    });
}

void BranchWalk::finish(const std::string& end) {
  watch_.finish();
  write_summary(comm_, paths_.summary(),
                branch_entries(job_.c, parameter_, rows_, end, job_.seconds()));
  if (job_.session.first())
    fmt::print("{}  results in            {}\n",
               branch_for_people(job_.c, parameter_, rows_, end, job_.seconds()), paths_.folder);
}

ExitCode BranchWalk::go(const SteadyState& start) {
  const Branch branch = follow_branch(request(), start.snapshot.temperature, job_.c.settle, comm_,
                                      [&](const BranchPoint& p) { return see(p); });
  MPI_Bcast(&stopped_, 1, MPI_INT, 0, comm_);
  write(branch);
  const bool whole = branch.remark.empty();
  finish(stopped_ ? "interrupted" : whole ? "complete" : "ended early");
  if (stopped_) return ExitCode::Interrupted;
  if (whole) return ExitCode::Done;
  throw SolveError(fmt::format("the branch ends before {}: {}. The states up to there are in {}",
                               cases_.text_of(cases_.along().values.back()), branch.remark,
                               paths_.folder));
}

}  // namespace

ExitCode settle_along(const SettleJob& job, const CaseAlong& cases, const RunPaths& paths,
                      SettleWatch& watch) {
  const Case& c = job.c;
  const std::vector<SteadyState> first =
      settle(c.model, c.initial, job.stored, c.settle, 1, job.session.comm(), watch.observer());
  if (first.back().converged) return BranchWalk(job, cases, paths, watch).go(first.back());
  write_found(job, paths, first.back(), watch);
  watch.finish();
  end_with(job, paths, first.back(), watch, {}, "");
  return code_for(first.back(), paths);
}

}  // namespace lidwright
