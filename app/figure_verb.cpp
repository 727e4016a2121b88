#include "app/figure_verb.hpp"

#include <fmt/format.h>

#include <optional>

#include "app/field_source.hpp"
#include "app/figure_film.hpp"
#include "app/figure_plan.hpp"
#include "io/atomic_file.hpp"
#include "io/collective.hpp"
#include "io/figure_branch.hpp"
#include "io/figure_history.hpp"
#include "io/figure_onset.hpp"
#include "io/figure_profiles.hpp"

namespace lidwright {
namespace {

/// Draws the figures of one plan; the snapshot is read when the first field asks for it.
class Drawer {
 public:
  Drawer(const FigurePlan& plan, const FigureRequest& request) : plan_(plan), request_(request) {}
  std::string bytes(const std::string& kind);

 private:
  std::string field(FieldKind);

  const FigurePlan& plan_;
  const FigureRequest& request_;
  std::optional<FieldSource> source_;
};

std::string Drawer::field(FieldKind kind) {
  if (!source_) source_.emplace(plan_, plan_.snapshot);
  const FieldView view = source_->view(kind);
  return source_->draw(view, colours_for(request_, kind, view.span));
}

std::string Drawer::bytes(const std::string& kind) {
  if (const auto of_field = field_kind(kind)) return field(*of_field);
  if (kind == "profiles") return profiles_figure(plan_.run, plan_.profiles, plan_.style);
  if (kind == "branch") return branch_figure(plan_.run, plan_.style);
  if (kind == "onset") return onset_figure(plan_.run, plan_.style);
  return history_figure(plan_.run, {request_.columns, request_.logarithmic}, plan_.style);
}

std::vector<std::string> files_of(const FigurePlan& plan, bool film) {
  if (film) return film_files(plan);
  std::vector<std::string> files;
  for (const std::string& kind : plan.kinds) files.push_back(figure_path(plan, kind));
  return files;
}

void draw_figures(const FigurePlan& plan, const FigureRequest& request, WorkLine& line) {
  Drawer drawer(plan, request);
  for (const std::string& kind : plan.kinds) {
    line.show("drawing " + kind);
    const std::string path = figure_path(plan, kind), bytes = drawer.bytes(kind);
    make_figure_folder(plan.into);
    write_atomically(path, bytes);
    line.clear();
    fmt::print("{}\n", path);
  }
}

void report_film(const Film& film) {
  fmt::print("{}: {} pictures, frame_0000.png to frame_{:04}.png\n", film.frames, film.count,
             film.count - 1);
  if (!film.video.empty())
    fmt::print("{}\n", film.video);
  else
    fmt::print(
        "no video: there is no ffmpeg on the PATH; install it (on Debian the package "
        "ffmpeg) and ask again with --overwrite, or join the pictures with another program\n");
}

void draw_all(const FigureRequest& request) {
  const FigurePlan plan = figure_plan(request);
  refuse_existing(files_of(plan, request.film), request.overwrite);
  if (!plan.taken.empty()) fmt::print("{}\n", plan.taken);
  WorkLine line(request.progress);
  if (request.film)
    report_film(make_film(plan, request, line));
  else
    draw_figures(plan, request, line);
}

/// The first rank draws; what it says goes to all, as the kind of failure that it is.
struct Outcome {
  std::string bad_input, not_written;
};

Outcome draw_on_first(const Session& session, const FigureRequest& request) {
  Outcome outcome;
  if (!session.first()) return outcome;
  try {
    draw_all(request);
  } catch (const InputError& e) {
    outcome.bad_input = e.what();
  } catch (const OutputError& e) {
    outcome.not_written = e.what();
  } catch (const std::runtime_error& e) {  // a file that cannot be read; the message names it
    outcome.bad_input = e.what();
  }
  return outcome;
}

}  // namespace

ExitCode figure(const Session& session, const FigureRequest& request) {
  const Outcome outcome = draw_on_first(session, request);
  agree<InputError>(session.comm(), outcome.bad_input);
  agree<OutputError>(session.comm(), outcome.not_written);
  return ExitCode::Done;
}

}  // namespace lidwright
