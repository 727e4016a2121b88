#include "app/figure_plan.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <filesystem>
#include <optional>

#include "io/atomic_file.hpp"
#include "io/field_view.hpp"
#include "io/picture.hpp"
#include "io/plain_text.hpp"

namespace lidwright {
namespace {

bool is_field(const std::string& kind) { return field_kind(kind).has_value(); }

/// Does the figure show one snapshot? Then its name has the number.
bool shows_snapshot(const std::string& kind) { return is_field(kind) || kind == "profiles"; }

namespace fs = std::filesystem;

/// Why the run has no such figure; empty: it has.
std::string lacking(const SavedRun& run, const std::string& kind) {
  if (shows_snapshot(kind) && run.snapshots.empty()) return "it has no snapshot yet";
  if (kind == "history" && (!run.history || run.history->rows() == 0))
    return run.kind == RunKind::March ? "its history has no rows yet"
                                      : "only a march has a history";
  if (kind == "branch" && !fs::exists(run.paths.branch()))
    return "only `settle --along` writes a branch.csv";
  if (kind == "profiles" && run.kind == RunKind::Onset)
    return "the mean of a neutral disturbance is 0 at all depths";
  if (kind == "onset" && run.kind != RunKind::Onset) return "only `onset` writes an onset.csv";
  return {};
}

std::vector<std::string> kinds_of(const SavedRun& run) {
  std::vector<std::string> has;
  for (const std::string& kind : figure_kinds())
    if (lacking(run, kind).empty()) has.push_back(kind);
  if (has.empty())
    throw InputError(fmt::format("{}: there is nothing to draw yet; wait for its first snapshot",
                                 run.paths.folder));
  return has;
}

std::vector<std::string> without_repetition(const std::vector<std::string>& words) {
  std::vector<std::string> once;
  for (const std::string& word : words)
    if (std::find(once.begin(), once.end(), word) == once.end()) once.push_back(word);
  return once;
}

void check_known(const std::vector<std::string>& kinds) {
  const std::vector<std::string> known = figure_kinds();
  for (const std::string& kind : kinds)
    if (std::find(known.begin(), known.end(), kind) == known.end())
      refuse_word("figure", kind, known);
}

std::vector<std::string> chosen_kinds(const SavedRun& run, const std::vector<std::string>& asked) {
  const std::vector<std::string> has = kinds_of(run);
  for (const std::string& kind : asked)
    if (const std::string why = lacking(run, kind); !why.empty())
      throw InputError(fmt::format("{}: there is no {} to draw, {}; it has {}", run.paths.folder,
                                   kind, why, fmt::join(has, ", ")));
  return asked.empty() ? has : without_repetition(asked);
}

bool any_field(const std::vector<std::string>& kinds) {
  return std::any_of(kinds.begin(), kinds.end(), is_field);
}

/// An option that no figure asked for would heed is a mistake.
void check_options(const FigureRequest& r, const std::vector<std::string>& kinds) {
  const auto refuse = [](const char* option, const char* why) {
    throw InputError(fmt::format("{}: {}", option, why));
  };
  const auto fields = std::count_if(kinds.begin(), kinds.end(), is_field);
  const bool history = std::find(kinds.begin(), kinds.end(), "history") != kinds.end();
  if (!r.range.empty() && fields != 1)
    refuse("--range",
           "the values of one field; name one, as in `lidwright figure RUN temperature`");
  if (!r.range.empty()) colour_range_asked(r.range, {});
  if (!r.with.empty() && fields == 0) refuse("--with", "draws over a field; name one");
  if (!r.columns.empty() && !history) refuse("--columns", "is for the kind history; name it");
  if (r.logarithmic && !history) refuse("--log", "is for the kind history; name it");
  if (!r.film) return;
  if (r.kinds.size() != 1 || fields != 1)
    refuse("--film", "shows one field; name it, as in `lidwright figure RUN temperature --film`");
  if (!r.at.empty()) refuse("--film", "shows every snapshot; leave out --at");
  if (r.format != "png") refuse("--film", "is made of PNG pictures; leave out --format");
}

std::optional<double> finite_number(std::string_view text) {
  const std::optional<double> value = number_of(text);
  return value && std::isfinite(*value) ? value : std::nullopt;
}

/// Times of states count them, and have no unit.
Shown time_units(const SavedRun& run) {
  if (run.kind != RunKind::March) return {};
  return picture_units(run.settings.body).time;
}

std::size_t numbered_snapshot(const SavedRun& run, const std::string& at) {
  const std::optional<double> n = finite_number(std::string_view(at).substr(at.find(':') + 1));
  if (!n || *n < 0 || *n != std::floor(*n) || *n >= static_cast<double>(run.snapshots.size()))
    throw InputError(
        fmt::format("--at {}: there is no such snapshot; {} has snapshot:0 to "
                    "snapshot:{}",
                    at, run.paths.folder, run.snapshots.size() - 1));
  return static_cast<std::size_t>(*n);
}

std::size_t nearest_snapshot(const SavedRun& run, double time) {
  const auto distance = [&](const CollectionEntry& s) { return std::abs(s.time - time); };
  const auto nearest =
      std::min_element(run.snapshots.begin(), run.snapshots.end(),
                       [&](const auto& p, const auto& q) { return distance(p) < distance(q); });
  return static_cast<std::size_t>(nearest - run.snapshots.begin());
}

/// The snapshot that one time or number means; adds what was taken to `taken`.
std::size_t snapshot_at(const SavedRun& run, const std::string& at, std::string& taken) {
  if (at.starts_with("snapshot:")) return numbered_snapshot(run, at);
  const std::optional<double> time = finite_number(at);
  if (!time)
    throw InputError(
        fmt::format("--at {}: must be a time, or a snapshot's number as snapshot:12", at));
  const Shown units = time_units(run);
  const std::size_t n = nearest_snapshot(run, (*time - units.offset) / units.scale);
  taken += fmt::format("{}snapshot {}, {}, is nearest to {}", taken.empty() ? "" : "\n", n,
                       snapshot_words(run, n), at);
  return n;
}

bool several(const std::string& at) { return at == "all" || at.find(',') != std::string::npos; }

/// "all", or a list with commas: profiles alone show several snapshots.
void choose_several(FigurePlan& plan, const std::string& at) {
  if (plan.kinds != std::vector<std::string>{"profiles"})
    throw InputError(fmt::format(
        "--at {}: only profiles show several snapshots at once; name that kind alone", at));
  for (std::size_t n = 0; at == "all" && n < plan.run.snapshots.size(); ++n)
    plan.profiles.push_back(n);
  if (at != "all")
    for (const std::string& one : names_in(at))
      plan.profiles.push_back(snapshot_at(plan.run, one, plan.taken));
  std::sort(plan.profiles.begin(), plan.profiles.end());
  plan.profiles.erase(std::unique(plan.profiles.begin(), plan.profiles.end()), plan.profiles.end());
}

void choose_snapshot(FigurePlan& plan, const std::string& at) {
  if (plan.run.snapshots.empty()) return;
  plan.snapshot = plan.run.snapshots.size() - 1;
  if (several(at)) return choose_several(plan, at);
  if (!at.empty()) plan.snapshot = snapshot_at(plan.run, at, plan.taken);
  plan.profiles = {plan.snapshot};
}

void check_lid(const FigurePlan& plan) {
  if (plan.overlays.lid && !plan.run.history)
    throw InputError(fmt::format(
        "--with lid: the base of the lid is read from the history of a march, which {} has not; "
        "leave out 'lid'",
        plan.run.paths.folder));
}

}  // namespace

std::string snapshot_words(const SavedRun& run, std::size_t snapshot) {
  const double time = run.snapshots[snapshot].time;
  if (run.kind == RunKind::Onset) return "the disturbance that grows first";
  if (run.kind == RunKind::Settle) return fmt::format("steady state {:g}", time);
  return fmt::format("time {:.4g} {}", time_units(run)(time),
                     run.settings.body ? "Myr" : "d^2/kappa");
}

std::vector<std::string> figure_kinds() {
  std::vector<std::string> all = field_words();
  all.insert(all.end(), {"profiles", "history", "branch", "onset"});
  return all;
}

FigurePlan figure_plan(const FigureRequest& r) {
  if (r.run.empty()) throw InputError("figure: name a run folder; see `lidwright figure --help`");
  check_known(r.kinds);
  FigurePlan plan;
  plan.style.format = figure_format(r.format);
  plan.style.size = figure_size(!r.size.empty() ? r.size : r.film ? "slide" : "one-column");
  plan.overlays = overlays_of(r.with);
  plan.run = open_run(r.run);
  plan.kinds = chosen_kinds(plan.run, r.kinds);
  check_options(r, plan.kinds);
  choose_snapshot(plan, r.at);
  if (any_field(plan.kinds)) check_lid(plan);
  plan.into = r.into.empty() ? plan.run.paths.folder + "/figures" : r.into;
  return plan;
}

std::string figure_path(const FigurePlan& plan, const std::string& kind) {
  const bool one = shows_snapshot(kind) && (kind != "profiles" || plan.profiles.size() == 1);
  const std::string number =
      one ? fmt::format("_{:04}", kind == "profiles" ? plan.profiles.front() : plan.snapshot)
          : std::string();
  return fmt::format("{}/{}{}.{}", plan.into, kind, number, format_word(plan.style.format));
}

void refuse_existing(const std::vector<std::string>& files, bool overwrite) {
  for (const std::string& file : files)
    if (!overwrite && fs::exists(file))
      throw InputError(
          fmt::format("{}: is there already; replace it with --overwrite, or write elsewhere with "
                      "--into FOLDER",
                      file));
}

void make_figure_folder(const std::string& path) {
  std::error_code error;
  fs::create_directories(path, error);
  if (error) throw OutputError(output_failure(path, error.value()));
}

}  // namespace lidwright
