#include "app/onset_verb.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <charconv>
#include <chrono>
#include <new>

#include "app/onset_summary.hpp"
#include "app/run_report.hpp"
#include "app/run_start.hpp"
#include "app/shared_case.hpp"
#include "app/stop_signals.hpp"
#include "io/collective.hpp"
#include "io/figure_onset.hpp"
#include "io/linear_rules.hpp"
#include "io/onset_table.hpp"
#include "io/provenance.hpp"
#include "io/run_folder.hpp"
#include "io/snapshot.hpp"
#include "solver/solve_error.hpp"

namespace lidwright {
namespace {

using Clock = std::chrono::steady_clock;

/// Cells to a half wave that the fields have at least, however coarse the case's grid is.
constexpr int least_cells_in_half_wave = 8;

/// "A:B" of --modes.
void read_modes(const std::string& text, OnsetSettings& settings) {
  if (text.empty()) return;
  const char* const end = text.data() + text.size();
  const auto first = std::from_chars(text.data(), end, settings.first);
  bool good = first.ec == std::errc() && first.ptr != end && *first.ptr == ':';
  if (good) {
    const auto last = std::from_chars(first.ptr + 1, end, settings.last);
    good = last.ec == std::errc() && last.ptr == end;
  }
  if (!good || settings.first < 1 || settings.last < settings.first || settings.last > 10000)
    throw InputError(fmt::format(
        "--modes {}: must be two whole numbers A:B with 1 <= A <= B <= 10000, as in --modes 1:12",
        text));
}

void refuse_coarse(const Case& c, bool error_bars) {
  const int coarsest = onset_grids(c.model.grid.radial, error_bars).front();
  if (coarsest >= least_onset_cells) return;
  throw InputError(fmt::format(
      "grid.radial = {}: too few cells for onset, whose coarsest grid must have at least {}; take "
      "grid.radial >= {}{}",
      c.model.grid.radial, least_onset_cells, (error_bars ? 4 : 1) * least_onset_cells,
      error_bars ? ", or --no-error-bars" : ""));
}

OnsetCurve watched_curve(const Model& model, const OnsetSettings& settings, ProgressMode progress) {
  WorkLine shown(progress);
  try {
    return onset_curve(model, settings, [&](int number) {
      shown.show(fmt::format("mode {} done", number));
      return !stop_requested(MPI_COMM_SELF);
    });
  } catch (const std::bad_alloc&) {
    throw SolveError("not enough memory for this grid; use fewer radial cells");
  }
}

/// The search itself, on the first rank; other ranks learn what they need for the fields.
OnsetCurve search(const Session& session, const Case& c, const OnsetSettings& settings,
                  ProgressMode progress) {
  OnsetCurve curve;
  on_first_rank<SolveError>(session.comm(),
                            [&] { curve = watched_curve(c.model, settings, progress); });
  std::vector<double> numbers;
  if (session.first())
    numbers = {curve.interrupted ? 1.0 : 0.0,
               static_cast<double>(curve.points[static_cast<std::size_t>(curve.least)].wave.number),
               curve.shape.rayleigh};
  broadcast(session.comm(), numbers);
  broadcast(session.comm(), curve.shape.temperature);
  broadcast(session.comm(), curve.shape.psi);
  curve.interrupted = numbers[0] != 0;
  curve.shape.number = static_cast<int>(numbers[1]);
  curve.shape.rayleigh = numbers[2];
  return curve;
}

/// The case's own mesh, or one with more columns where the mode needs them.
Model model_of_fields(const Case& c, int number) {
  Model m = c.model;
  const int half_waves = m.shell.sides == Sides::Periodic ? 2 * number : number;
  m.grid.lateral = std::max(m.grid.lateral, least_cells_in_half_wave * half_waves);
  return m;
}

void write_results(const Session& session, const Case& c, const OnsetCurve& curve,
                   const RunPaths& paths) {
  Provenance provenance(session.comm(), paths.provenance(), 0);
  const int number = curve.shape.number;
  SnapshotWriter(session.comm(), paths)
      .write(onset_snapshot(model_of_fields(c, number), curve.shape, session.comm()));
  on_first_rank<OutputError>(session.comm(), [&] {
    write_atomically(paths.folder + "/onset.csv", onset_table(curve));
    if (c.output.pictures)
      write_atomically(paths.folder + "/onset.png",
                       onset_figure(curve, c.title, {FigureSize::Slide}));
  });
  std::vector<SummaryEntry> entries;
  if (session.first()) entries = onset_entries(c, curve);
  write_summary(session.comm(), paths.summary(), entries);
  provenance.end_session(0, curve.interrupted ? "interrupted" : "complete");
}

OnsetSettings settings_of(const OnsetRequest& request) {
  OnsetSettings settings;
  settings.error_bars = request.error_bars;
  read_modes(request.modes, settings);
  return settings;
}

}  // namespace

ExitCode onset(const Session& session, const OnsetRequest& request) {
  catch_stop_signals();
  const Clock::time_point start = Clock::now();
  if (request.case_file.empty())
    throw InputError("onset: name a case file; see `lidwright onset --help`");
  const OnsetSettings settings = settings_of(request);
  const Case c = shared_case(session.comm(), request.case_file, request.settings);
  refuse_nonlinear(c.model, Linearised::Onset, request.case_file);
  refuse_coarse(c, settings.error_bars);
  or_bad_input([&] { return decompose(c.model, session.comm()); });
  const std::string path = folder_for(request.into, request.case_file, "_onset");
  const ExistingRun existing = existing_run(request.overwrite);
  RunFolder::refuse_taken(session.comm(), path, existing);
  const OnsetCurve curve = search(session, c, settings, request.progress);
  const RunFolder folder = start_folder(session.comm(), path, existing, c);
  write_results(session, c, curve, folder.paths());
  const double seconds = std::chrono::duration<double>(Clock::now() - start).count();
  if (session.first()) fmt::print("{}", onset_for_people(c, curve, seconds, folder.paths().folder));
  return write_run_report(session, c, folder.paths(),
                          curve.interrupted ? ExitCode::Interrupted : ExitCode::Done);
}

}  // namespace lidwright
