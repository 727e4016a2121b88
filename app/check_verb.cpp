#include "app/check_verb.hpp"

#include <fmt/format.h>

#include <cmath>

#include "app/check_text.hpp"
#include "app/peak_memory.hpp"
#include "app/run_start.hpp"
#include "app/shared_case.hpp"
#include "app/stop_signals.hpp"
#include "io/collective.hpp"
#include "solver/solve_error.hpp"
#include "study/onset_curve.hpp"

namespace lidwright {
namespace {

constexpr double nan = std::numeric_limits<double>::quiet_NaN();
// Seconds that each part may take.
constexpr double pilot_seconds = 3, trial_seconds = 2.5, onset_seconds = 2;
/// Radial cells on which onset is sought, at most: good to a few percent.
constexpr int onset_cells = 24;

MarchInputs inputs(const Case& c) { return {c.model, c.initial, c.flow, c.heat, c.march}; }

/// The mantle whose small disturbances those of the case are: at rest nothing yields. Empty: none.
std::optional<Model> at_rest_like(const Model& m) {
  if (m.dislocation && m.dislocation->alone) return std::nullopt;
  Model like = m;
  like.dislocation.reset();
  like.yielding.reset();
  if (m.yielding && m.yielding->law == YieldingLaw::HarmonicMean) like.viscosity.constant *= 2;
  like.grid.radial = std::min(like.grid.radial, onset_cells);
  return like;
}

/// The critical Rayleigh number; nan and a word when it takes too long or there is none. On one
/// rank.
double critical_rayleigh(const Model& m, std::string& why_not, WorkLine& shown) {
  const std::optional<Model> like = at_rest_like(m);
  if (!like) {
    why_not = "a power law alone does not creep at rest";
    return nan;
  }
  // Not by the clock: what a check says should not go with what else the machine does.
  const double start = processor_time();
  const auto in_time = [&] { return processor_time() - start < onset_seconds; };
  try {
    const OnsetCurve curve = onset_curve(*like, {.error_bars = false}, [&](int mode) {
      shown.show(fmt::format("onset: mode {} done", mode));
      return in_time();
    });
    if (!curve.interrupted || curve.bracketed) return curve.shape.rayleigh;
    why_not = "takes longer than a check may; see `lidwright onset`";
  } catch (const SolveError&) {
    why_not = "no small disturbance grows at any Rayleigh number, or it was not found";
  }
  return nan;
}

class Check {
 public:
  Check(const Session& session, const CheckRequest& request)
      : session_(session),
        request_(request),
        shown_(session.first() ? request.progress : ProgressMode::Never) {}
  ExitCode run();

 private:
  void read();
  void derive();
  void take_steps();
  void find_onset();
  void judge();
  Pilot pilot(const StoredTemperature& start);
  void show(const std::string& text) { shown_.show(text); }

  const Session& session_;
  const CheckRequest& request_;
  WorkLine shown_;
  CheckFindings f_;
};

void Check::read() {
  if (request_.case_file.empty())
    throw InputError("check: name a case file; see `lidwright check --help`");
  f_.c = shared_case(session_.comm(), request_.case_file, request_.settings);
  f_.file = request_.case_file;
  MPI_Comm_size(session_.comm(), &f_.ranks);
  on_first_rank<InputError>(session_.comm(), [&] {
    f_.defaults = defaults_taken(request_.case_file, request_.settings);
  });
}

void Check::derive() {
  f_.rest = or_bad_input([&] { return at_rest(f_.c.model, session_.comm()); });
  f_.numbers = derived_numbers(f_.c.model, f_.rest);
}

/// On the first rank alone; the others learn how long its steps were and where it ended.
Pilot Check::pilot(const StoredTemperature& start) {
  Pilot p;
  on_first_rank<SolveError>(session_.comm(), [&] {
    p = run_pilot(inputs(f_.c), start, pilot_seconds, [&](const std::string& t) { show(t); });
  });
  broadcast(session_.comm(), p.last.face_radius);
  broadcast(session_.comm(), p.last.face_lateral);
  broadcast(session_.comm(), p.last.values);
  p.last.shell = f_.c.model.shell;
  return p;
}

void Check::take_steps() {
  const StoredTemperature start = stored_start(session_.comm(), f_.c);
  f_.pilot = pilot(start);
  std::vector<double> step{first_guess_of_step(f_.pilot, f_.c.model.grid, f_.c.heat)};
  broadcast(session_.comm(), step);
  f_.trial = or_bad_input([&] {
    return run_trial(inputs(f_.c), f_.pilot.last, step.front(), trial_seconds,
                     f_.c.output.normal_stress, session_.comm(),
                     [&](const std::string& t) { show(t); });
  });
  const PeakMemory peak = peak_memory(session_.comm());
  f_.memory = peak.all_ranks;
  f_.memory_largest = peak.largest;
  f_.steps = true;
}

void Check::find_onset() {
  std::vector<double> found{0};
  on_first_rank<SolveError>(session_.comm(),
                            [&] { found = {critical_rayleigh(f_.c.model, f_.no_onset, shown_)}; });
  broadcast(session_.comm(), found);
  f_.critical = found.front();
  f_.times_critical = f_.c.model.rayleigh / f_.critical;
}

void Check::judge() {
  const Model& m = f_.c.model;
  const auto geometry = make_geometry(m);
  f_.prediction = predict(m, *geometry, f_.rest, f_.numbers, f_.times_critical);
  f_.layers = layers_on_grid(f_.prediction.balance, *geometry);
  f_.finer = finer_grid(f_.prediction.balance, m);
  if (f_.steps) {
    f_.forecast =
        forecast(f_.pilot, f_.trial, f_.c.heat, f_.c.march, output_plan(f_.c), m.nonlinear());
    f_.memory += writers_memory(f_.c, f_.forecast);
    f_.memory_largest += writers_memory(f_.c, f_.forecast);
  }
  const auto& body = f_.c.body;
  const MarchInputs in = inputs(f_.c);
  f_.cautions = cautions({m, in, f_.numbers, f_.prediction, f_.layers,
                          f_.steps ? late_mean(f_.pilot).velocity_rms : nan, f_.times_critical,
                          body ? body->expansivity * body->temperature_drop : nan,
                          body ? dissipation_number(*body) : m.reference.dissipation_number,
                          body ? body->surface_temperature / body->temperature_drop
                               : m.reference.surface_temperature});
}

ExitCode Check::run() {
  read();
  derive();
  if (!request_.no_steps) take_steps();
  find_onset();
  on_first_rank<SolveError>(session_.comm(), [&] { judge(); });
  shown_.clear();
  if (session_.first()) fmt::print("{}", check_for_people(f_));
  return ExitCode::Done;
}

}  // namespace

ExitCode check(const Session& session, const CheckRequest& request) {
  return Check(session, request).run();
}

}  // namespace lidwright
