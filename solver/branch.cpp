#include "solver/branch.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <memory>
#include <optional>

#include "mesh/gather.hpp"
#include "solver/first_rank.hpp"
#include "solver/found.hpp"
#include "solver/newton.hpp"

namespace lidwright {
namespace {

constexpr int most_corrections = 7;
constexpr double far = 30;  ///< a residual from which no correction is tried
constexpr double shortest_step = 1e-7;
constexpr double at_rest = 0.3;  ///< rms velocity, kappa/d: hardly any heat is carried
constexpr int most_steps_per_value = 40;
/// Relative change of the parameter by which its effect on the residual is told.
constexpr double difference = 1e-5;

/// Where on the branch: the temperature, and the parameter p in which steps count.
struct Place {
  Eigen::VectorXd temperature;
  double p = 0;
};

/// On the first rank. Lengths along the branch are measured by
///     |T|^2 = T . M T / (total capacity * spread of T^2),  |p|^2 = (p / whole range)^2.
class Walk {
 public:
  Walk(const BranchRequest& request, const SettleSettings& settings, const BranchObserver& observer)
      : request_(request),
        settings_(settings),
        observer_(observer),
        range_(std::abs(to_p(request.values.back()) - to_p(request.values.front()))),
        solver_(settings.linear) {}

  void go(const std::vector<double>& start);
  std::vector<BranchPoint> points;
  std::vector<Found> found;  ///< of the points
  std::string remark;

 private:
  double to_p(double value) const {
    return request_.logarithmic ? std::log(std::abs(value)) : value;
  }
  /// A value asked for comes back to the last bit.
  double to_value(double p) const {
    for (const double value : request_.values)
      if (to_p(value) == p) return value;
    return request_.logarithmic ? std::copysign(std::exp(p), request_.values.front()) : p;
  }
  std::unique_ptr<SteadyEquations> equations_at(const Place&);
  Eigen::VectorXd gain_by_p(const Place&);
  Place tangent(const Place&, const Place* former);
  struct Kept {
    BranchPoint point;
    Found found;
  };
  double sense() const { return to_p(request_.values.back()) - to_p(request_.values.front()); }
  Place begin(const std::vector<double>& start);
  std::optional<Kept> step(const Place& here, const Place& direction, double length, Place& next);
  std::optional<Kept> correct(Place& trial, const Place& direction);
  double next_length(double length, int corrections, const Place& direction) const;
  Kept state_of(const SteadyEquations&, double p, bool asked_for, int steps) const;
  void keep(Kept);
  bool meet(const Place& from, const Place& to, double value);
  bool meet_values_between(const Place& from, const Place& to);
  double product(const Place& a, const Place& b) const {
    return a.temperature.dot(weight_.cwiseProduct(b.temperature)) + a.p * b.p / (range_ * range_);
  }

  const BranchRequest& request_;
  const SettleSettings& settings_;
  const BranchObserver& observer_;
  double range_;
  CoupledSolver solver_;
  Eigen::VectorXd weight_;  ///< of temperatures in the product
  bool backwards_ = false;
  double fastest_ = 0;  ///< rms velocity of all points
};

std::unique_ptr<SteadyEquations> Walk::equations_at(const Place& place) {
  auto made =
      std::make_unique<SteadyEquations>(request_.model_at(to_value(place.p)), settings_.flux);
  CellField t(made->decomposition());
  made->unknowns().set_temperature(place.temperature, t);
  made->set_temperature(t);
  return made;
}

/// d(gain)/dp at one temperature, its flow included; one-sided where the model ends.
Eigen::VectorXd Walk::gain_by_p(const Place& place) {
  const double h = difference * (request_.logarithmic ? 1.0 : range_);
  const auto shifted = [&](double by) {
    try {
      return equations_at({place.temperature, place.p + by});
    } catch (const SolveError&) {
      return std::unique_ptr<SteadyEquations>();
    }
  };
  const auto above = shifted(h), below = shifted(-h);
  const auto here = above && below ? nullptr : equations_at(place);
  const double width = (above ? h : 0) + (below ? h : 0);
  return ((above ? above : here)->gain() - (below ? below : here)->gain()) / width;
}

/// Unit tangent: J T' = (gain by p) p'. Its sense is that of the former one, at first towards the
/// last value.
Place Walk::tangent(const Place& at, const Place* former) {
  const auto equations = equations_at(at);
  set_jacobian(solver_, *equations, 0);
  solver_.drop_factor();
  Place t{temperature_change(solver_, *equations, gain_by_p(at), 1e-8), 1};
  double scale = 1 / std::sqrt(product(t, t));
  if ((former ? product(t, *former) : sense()) < 0) scale = -scale;
  t.temperature *= scale;
  t.p *= scale;
  return t;
}

/// Newton's method in the plane through the trial point normal to the direction.
std::optional<Walk::Kept> Walk::correct(Place& trial, const Place& direction) {
  const Eigen::VectorXd by_p = gain_by_p(trial);
  const Place start = trial;
  for (int n = 0; n <= most_corrections; ++n) {
    const auto equations = equations_at(trial);
    if (equations->residual() <= settings_.tolerance)
      return state_of(*equations, trial.p, false, n);
    if (n == most_corrections || equations->residual() > far) break;
    set_jacobian(solver_, *equations, 0);
    const auto response = [&](const Eigen::VectorXd& gain) {
      return temperature_change(solver_, *equations, gain, 1e-9);
    };
    const Place a{response(equations->gain()), 0}, b{response(by_p), 1};
    const Place off{trial.temperature - start.temperature, trial.p - start.p};
    const double step = -(product(direction, off) + product(direction, a)) / product(direction, b);
    trial.temperature += a.temperature + step * b.temperature;
    trial.p += step;
    if (!trial.temperature.allFinite()) break;
  }
  return std::nullopt;
}

Walk::Kept Walk::state_of(const SteadyEquations& equations, double p, bool asked_for,
                          int steps) const {
  Kept kept;
  if (asked_for) kept.found.keep(equations);
  kept.found.converged = true;
  BranchPoint& point = kept.point;
  point.parameter = to_value(p);
  point.asked_for = asked_for;
  point.backwards = backwards_;
  point.residual = equations.residual();
  point.newton_steps = steps;
  point.state.grid = equations.model().grid;
  point.state.row = measure(equations.view());
  return kept;
}

void Walk::keep(Kept kept) {
  points.push_back(std::move(kept.point));
  found.push_back(std::move(kept.found));
  if (observer_ && !observer_(points.back())) remark = "stopped";
}

/// The steady state at exactly this value, from a straight line between its neighbours.
bool Walk::meet(const Place& from, const Place& to, double value) {
  const double share = (to_p(value) - from.p) / (to.p - from.p);
  const Place between{from.temperature + share * (to.temperature - from.temperature), to_p(value)};
  const auto equations = equations_at(between);
  const NewtonOutcome outcome = newton(*equations, solver_, settings_, {});
  if (!outcome.converged) return false;
  keep(state_of(*equations, between.p, true, static_cast<int>(outcome.steps.size()) - 1));
  return true;
}

bool Walk::meet_values_between(const Place& from, const Place& to) {
  std::vector<double> passed;
  for (const double value : request_.values)
    if ((to_p(value) - from.p) * (to_p(value) - to.p) <= 0 && to_p(value) != from.p)
      passed.push_back(value);
  if (backwards_) std::reverse(passed.begin(), passed.end());
  return std::all_of(passed.begin(), passed.end(),
                     [&](double value) { return meet(from, to, value); });
}

/// The start refined at the first value, and the weights of the product from it.
Place Walk::begin(const std::vector<double>& start) {
  const Place guess{
      Eigen::Map<const Eigen::VectorXd>(start.data(), static_cast<long>(start.size())),
      to_p(request_.values.front())};
  const auto equations = equations_at(guess);
  const NewtonOutcome outcome = newton(*equations, solver_, settings_, {});
  if (!outcome.converged)
    throw SolveError("the branch's start is not a steady state: " + outcome.remark);
  Place here{equations->unknowns().temperature_vector(equations->temperature()), guess.p};
  const double spread = here.temperature.maxCoeff() - here.temperature.minCoeff();
  weight_ = equations->linearise().capacity /
            (equations->heat().total_capacity() * std::max(spread * spread, 1e-30));
  keep(state_of(*equations, here.p, true, static_cast<int>(outcome.steps.size()) - 1));
  return here;
}

/// One step along the branch with the values passed on it, all or nothing.
std::optional<Walk::Kept> Walk::step(const Place& here, const Place& direction, double length,
                                     Place& next) {
  next = {here.temperature + length * direction.temperature, here.p + length * direction.p};
  const std::size_t before = points.size();
  try {
    std::optional<Kept> end = correct(next, direction);
    backwards_ = (next.p - here.p) * sense() < 0;
    if (end && meet_values_between(here, next)) {
      end->point.backwards = backwards_;
      return end;
    }
  } catch (const SolveError&) {
    // As for a correction that does not converge: a shorter step.
  }
  points.resize(before);
  found.resize(before);
  return std::nullopt;
}

double Walk::next_length(double length, int corrections, const Place& direction) const {
  const double growth = corrections <= 3 ? 1.6 : (corrections >= 6 ? 0.6 : 1.0);
  // Not much further than from one value to the next.
  const double along_p = std::max(0.2, std::abs(direction.p / range_));
  const double spacing = 1 / static_cast<double>(request_.values.size() - 1);
  return std::min({length * growth, 1.2 * spacing / along_p, 0.5});
}

void Walk::go(const std::vector<double>& start) {
  const double first = to_p(request_.values.front()), last = to_p(request_.values.back());
  const auto most_steps = most_steps_per_value * static_cast<int>(request_.values.size());
  double length = 0.5 / static_cast<double>(request_.values.size() - 1);
  Place here = begin(start), next;
  Place direction = tangent(here, nullptr);
  for (int n = 0; n < most_steps && remark.empty();) {
    std::optional<Kept> end = step(here, direction, length, next);
    if (!end) {
      length /= 2;
      if (length < shortest_step)
        remark =
            fmt::format("no further than {:.6g}: the steps became too short", to_value(here.p));
      continue;
    }
    ++n;
    if ((next.p - last) * sense() >= 0) return;
    if ((next.p - first) * sense() <= 0) remark = "the branch folds back beyond the first value";
    if (!remark.empty()) return;
    const int corrections = end->point.newton_steps;
    const double velocity = end->point.state.row.velocity_rms;
    fastest_ = std::max(fastest_, velocity);
    // Beyond it lies the branch's own mirror image.
    const bool comes_to_rest = velocity < at_rest && fastest_ > 3 * at_rest;
    keep(std::move(*end));
    if (comes_to_rest && remark.empty())
      remark = fmt::format("it ends in the state at rest near {:.6g}", to_value(next.p));
    direction = tangent(next, &direction);
    length = next_length(length, corrections, direction);
    here = next;
  }
  if (remark.empty()) remark = fmt::format("ended after {} steps along the branch", most_steps);
}

}  // namespace

Branch follow_branch(const BranchRequest& request, const CellField& start,
                     const SettleSettings& settings, MPI_Comm comm,
                     const BranchObserver& observer) {
  const std::vector<double> temperature = gather_to_first(start);
  Walk walk(request, settings, observer);
  on_first_rank_or_throw(comm, "not enough memory for this grid; use fewer cells",
                         [&] { walk.go(temperature); });
  auto count = static_cast<int>(walk.points.size()), letters = static_cast<int>(walk.remark.size());
  MPI_Bcast(&count, 1, MPI_INT, 0, comm);
  MPI_Bcast(&letters, 1, MPI_INT, 0, comm);
  walk.points.resize(static_cast<std::size_t>(count));
  walk.found.resize(walk.points.size());
  walk.remark.resize(static_cast<std::size_t>(letters));
  MPI_Bcast(walk.remark.data(), letters, MPI_CHAR, 0, comm);
  Branch branch{{}, walk.remark};
  for (std::size_t k = 0; k < walk.points.size(); ++k) {
    BranchPoint& p = walk.points[k];
    double numbers[] = {p.parameter, p.asked_for ? 1.0 : 0.0, p.backwards ? 1.0 : 0.0, p.residual,
                        static_cast<double>(p.newton_steps)};
    MPI_Bcast(numbers, 5, MPI_DOUBLE, 0, comm);
    MPI_Bcast(&p.state.row, sizeof p.state.row, MPI_BYTE, 0, comm);
    p.parameter = numbers[0];
    p.asked_for = numbers[1] != 0;
    p.backwards = numbers[2] != 0;
    p.residual = numbers[3];
    p.newton_steps = static_cast<int>(numbers[4]);
    const Model model = request.model_at(p.parameter);
    if (p.asked_for) {
      walk.found[k].grid = model.grid;
      p.state = share(model, settings.flux, walk.found[k], comm);
    }
    p.state.grid = model.grid;
    p.state.converged = true;
    p.state.residual = p.residual;
    branch.points.push_back(std::move(p));
  }
  return branch;
}

}  // namespace lidwright
