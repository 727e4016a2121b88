#include "app/figure_film.hpp"

#include <fmt/format.h>

#include <filesystem>

#include "app/field_source.hpp"
#include "io/atomic_file.hpp"
#include "io/run_folder.hpp"
#include "io/video.hpp"

namespace lidwright {
namespace {

namespace fs = std::filesystem;

std::string film_base(const FigurePlan& plan) {
  return fmt::format("{}/film_{}", plan.into, plan.kinds.front());
}

/// figure_plan lets nothing but a field be filmed.
FieldKind kind_of(const FigurePlan& plan) { return field_kind(plan.kinds.front()).value(); }

/// What all snapshots together span.
FieldSpan whole_span(const FigurePlan& plan, WorkLine& line) {
  FieldSpan span;
  for (std::size_t n = 0; n < plan.run.snapshots.size(); ++n) {
    line.show(fmt::format("looking for the range of colours: snapshot {} of {}", n + 1,
                          plan.run.snapshots.size()));
    const FieldSpan one = FieldSource(plan, n).view(kind_of(plan)).span;
    span = n == 0 ? one : joined(span, one);
  }
  return span;
}

std::string frame_name(const std::string& folder, std::size_t n) {
  return fmt::format("{}/frame_{:04}.png", folder, n);
}

/// Frames and videos of an earlier film, which may have been longer.
void remove_film(const FigurePlan& plan) {
  const std::string base = film_base(plan);
  std::error_code none;
  for (const char* ending : {".mp4", ".webm"}) fs::remove(base + ending, none);
  std::vector<fs::path> frames;
  for (const auto& entry : fs::directory_iterator(base, none))
    if (numbered(entry.path().filename().string(), "frame_", 4, ".png"))
      frames.push_back(entry.path());
  for (const fs::path& frame : frames) fs::remove(frame, none);
}

void draw_frames(const FigurePlan& plan, const ColourRange& colours, const std::string& folder,
                 WorkLine& line) {
  const std::size_t all = plan.run.snapshots.size();
  for (std::size_t n = 0; n < all; ++n) {
    line.show(fmt::format("drawing picture {} of {}", n + 1, all));
    const FieldSource source(plan, n);
    write_atomically(frame_name(folder, n), source.draw(source.view(kind_of(plan)), colours, true));
  }
}

/// The frames as ffmpeg counts them: a percent sign that does not count is written twice.
std::string counted_frames(const std::string& folder) {
  std::string name;
  for (const char c : folder) name += c == '%' ? "%%" : std::string(1, c);
  return name + "/frame_%04d.png";
}

std::string video_of(const FigurePlan& plan, WorkLine& line) {
  const std::string program = program_on_path("ffmpeg");
  if (program.empty()) return {};
  line.show_always("joining the pictures");
  return write_video({program, counted_frames(film_base(plan)),
                      frame_rate(plan.run.snapshots.size()), film_base(plan)});
}

}  // namespace

std::vector<std::string> film_files(const FigurePlan& plan) {
  const std::string base = film_base(plan);
  return {base, base + ".mp4", base + ".webm"};
}

Film make_film(const FigurePlan& plan, const FigureRequest& request, WorkLine& line) {
  if (plan.run.snapshots.size() < 2)
    throw InputError(
        fmt::format("--film: {} has one snapshot, a film needs two or more; see "
                    "output.snapshot_every in `lidwright keys`",
                    plan.run.paths.folder));
  const FieldSpan span = whole_span(plan, line);
  const ColourRange colours = colours_for(request, kind_of(plan), span);
  Film film{film_base(plan), plan.run.snapshots.size(), ""};
  remove_film(plan);
  make_figure_folder(film.frames);
  draw_frames(plan, colours, film.frames, line);
  film.video = video_of(plan, line);
  line.clear();
  return film;
}

}  // namespace lidwright
