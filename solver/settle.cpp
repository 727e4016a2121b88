#include "solver/settle.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <memory>
#include <stdexcept>

#include "solver/first_guess.hpp"
#include "solver/first_rank.hpp"
#include "solver/found.hpp"
#include "solver/initial.hpp"
#include "solver/newton.hpp"

namespace lidwright {
namespace {

constexpr double start_tolerance = 1e-4;
/// Of a march to a first guess: where a coarse grid has no steady state, a finer one goes on.
constexpr long steps_on_coarse_grids = 3000, steps_on_the_grid = 20000;

/// How often the grid can be halved without fewer than `coarsest` radial cells.
int halvings(const Grid& grid, int coarsest) {
  int times = 0;
  for (Grid g = grid;
       g.radial % 2 == 0 && g.lateral % 2 == 0 && g.radial / 2 >= coarsest && g.lateral / 2 >= 4;
       g = halved(g, 1))
    ++times;
  return times;
}

/// On the first rank: from the coarsest grid on which a steady state can be had to the model's own.
class Ladder {
 public:
  Ladder(const Model& model, const InitialSettings& initial, const StoredTemperature& start,
         const SettleSettings& settings, const SettleObserver& observer)
      : model_(model), initial_(initial), start_(start), settings_(settings), observer_(observer) {}

  std::vector<Found> climb(int grids);

 private:
  Found solve(int times, const StoredTemperature& from, bool passing);
  void on_the_models_grid(Found&) const;
  Model halved_model(int times) const {
    Model m = model_;
    m.grid = halved(m.grid, times);
    return m;
  }

  const Model& model_;
  const InitialSettings& initial_;
  const StoredTemperature& start_;
  const SettleSettings& settings_;
  const SettleObserver& observer_;
  bool stopped_ = false;
};

/// From a temperature near by, else by marching on from it.
Found Ladder::solve(int times, const StoredTemperature& from, bool passing) {
  const Model model = halved_model(times);
  SteadyEquations equations(model, settings_.flux);
  CoupledSolver solver(settings_.linear);
  SettleSettings settings = settings_;
  // What only serves as a start need not be exact.
  if (passing) settings.tolerance = std::max(settings.tolerance, start_tolerance);
  Found found;
  InitialSettings start;
  if (from.values.empty()) start = initial_;
  const auto take = [&](const NewtonOutcome& outcome) {
    found.converged = outcome.converged;
    found.remark = outcome.remark;
    found.steps.insert(found.steps.end(), outcome.steps.begin(), outcome.steps.end());
    stopped_ = outcome.stopped;
  };
  equations.set_temperature(initial_temperature(equations.heat(), start, from));
  // A start that is far away, like a disturbed conductive one, must not fall back on an unstable
  // state near by: it is marched first.
  if (!from.values.empty() || equations.residual() <= settings.tolerance) {
    SettleSettings few = settings;
    few.most_steps = std::min(settings.most_steps, 25);
    take(newton(equations, solver, few, observer_));
  }
  if (!found.converged && !stopped_)
    take(settle_by_marching(equations, solver, settings, start, from,
                            times > 0 ? steps_on_coarse_grids : steps_on_the_grid, observer_));
  found.keep(equations);
  return found;
}

/// What was found before a search was stopped on a coarse grid, interpolated: that grid may be too
/// small for the ranks.
void Ladder::on_the_models_grid(Found& found) const {
  SteadyEquations equations(model_, settings_.flux);
  equations.set_temperature(initial_temperature(equations.heat(), {}, found.temperature));
  found.keep(equations);
}

/// Grid by grid upwards, each from the one below. A grid may have no steady state, being too coarse
/// for the flow: the next goes on from where it was left, and what was found below does not count.
std::vector<Found> Ladder::climb(int grids) {
  // A stored start is near already: coarser grids than asked for might lead away from it.
  const int coarsest = start_.values.empty()
                           ? std::max(halvings(model_.grid, settings_.coarsest), grids - 1)
                           : grids - 1;
  std::vector<Found> found;
  std::vector<NewtonStep> in_vain;
  StoredTemperature from = start_;
  for (int times = coarsest; times >= 0 && !stopped_; --times) {
    Found here = solve(times, from, times >= grids);
    from = here.temperature;
    if (stopped_) here.remark = "stopped";
    const bool last = times == 0 || stopped_;
    if (!here.converged && !last) {
      in_vain.insert(in_vain.end(), here.steps.begin(), here.steps.end());
      found.clear();
      continue;
    }
    here.steps.insert(here.steps.begin(), in_vain.begin(), in_vain.end());
    in_vain.clear();
    if (!here.converged) {
      found.clear();
      if (times > 0) on_the_models_grid(here);
    }
    found.push_back(std::move(here));
  }
  if (found.size() > static_cast<std::size_t>(grids))
    found.erase(found.begin(), found.end() - grids);
  return found;
}

}  // namespace

Grid halved(Grid grid, int times) {
  for (int k = 0; k < times; ++k) {
    grid.radial /= 2;
    grid.lateral /= 2;
  }
  return grid;
}

void refuse_unhalvable(const Grid& grid, int grids) {
  if (halvings(grid, 4) < grids - 1)
    throw std::invalid_argument(fmt::format(
        "a grid of {} x {} cells cannot be halved {} times; error bars need a multiple of {} "
        "cells each way, at least {} of them radial",
        grid.radial, grid.lateral, grids - 1, 1 << (grids - 1), 4 << (grids - 1)));
}

std::vector<SteadyState> settle(const Model& model, const InitialSettings& initial,
                                const StoredTemperature& start, const SettleSettings& settings,
                                int grids, MPI_Comm comm, const SettleObserver& observer) {
  refuse_unhalvable(model.grid, grids);
  int ranks = 1;
  MPI_Comm_size(comm, &ranks);
  const int columns = halved(model.grid, grids - 1).lateral;
  if (columns / ranks < Decomposition::least_columns)
    throw std::invalid_argument(fmt::format(
        "{} lateral cells on {} ranks: each rank needs {} or more; use fewer ranks or more lateral "
        "cells",
        columns, ranks, Decomposition::least_columns));
  std::vector<Found> found;
  on_first_rank_or_throw(comm, "not enough memory for this grid; use fewer cells", [&] {
    found = Ladder(model, initial, start, settings, observer).climb(grids);
  });
  return share_all(model, settings.flux, found, comm);
}

}  // namespace lidwright
