#include "app/command_line.hpp"

#include <fmt/format.h>

#include "app/figure_plan.hpp"
#include "app/option_words.hpp"
#include "io/history.hpp"
#include "io/provenance.hpp"
#include "study/regime.hpp"

namespace lidwright {
namespace {

std::vector<std::string> names_of_verbs(const CLI::App& app) {
  std::vector<std::string> names;
  for (const CLI::App* verb : app.get_subcommands({})) names.push_back(verb->get_name());
  return names;
}

std::vector<std::string> columns_of_history() {
  std::vector<std::string> names;
  for (const Column& column : history_columns()) names.emplace_back(column.name);
  return names;
}

std::vector<std::string> settable_thresholds() {
  std::vector<std::string> names;
  for (const RegimeThreshold& row : regime_thresholds())
    names.push_back(row.name + std::string("="));
  return names;
}

void add_progress(CLI::App* verb, ProgressMode& progress) {
  verb->add_flag_callback(
      "--progress", [&] { progress = ProgressMode::Always; },
      "Show progress, also without a terminal");
  verb->add_flag_callback(
      "--no-progress", [&] { progress = ProgressMode::Never; }, "Show no progress");
}

void add_settings(CLI::App* verb, std::vector<std::string>& settings) {
  verb->add_option("--set", settings, "Change a key of the case; may be repeated")
      ->allow_extra_args(false)
      ->type_name("TABLE.KEY=VALUE");
}

void add_march(CLI::App& app, MarchRequest& request) {
  CLI::App* verb = app.add_subcommand("march", "Run a case in time")->group("Verbs");
  auto* case_file =
      verb->add_option("CASE", request.case_file, "Case file (TOML); see `lidwright keys`");
  add_settings(verb, request.settings);
  auto* into = verb->add_option("--into", request.into, "Run folder [runs/NAME of the case file]")
                   ->type_name("FOLDER");
  auto* resume = verb->add_option("--resume", request.resume,
                                  "Go on with the run in FOLDER, instead of CASE; only\n"
                                  "keys of [march] and [output] may change")
                     ->type_name("FOLDER");
  auto* overwrite =
      verb->add_flag("--overwrite", request.overwrite, "Replace a run that is in the folder");
  verb->add_flag("--resume-from-previous", request.from_previous,
                 "With --resume: from the checkpoint before the newest")
      ->needs(resume);
  add_progress(verb, request.progress);
  resume->excludes(case_file)->excludes(into)->excludes(overwrite);
}

void add_onset(CLI::App& app, OnsetRequest& request) {
  CLI::App* verb =
      app.add_subcommand("onset", "Find the Rayleigh number at which convection begins")
          ->group("Verbs");
  verb->add_option("CASE", request.case_file,
                   "Case file (TOML); its numbers.rayleigh serves to\n"
                   "compare only, all else is held fixed");
  add_settings(verb, request.settings);
  verb->add_option("--into", request.into, "Folder for the results [runs/NAME_onset]")
      ->type_name("FOLDER");
  verb->add_flag("--overwrite", request.overwrite, "Replace a run that is in the folder");
  verb->add_option("--modes", request.modes,
                   "Lateral modes A to B: whole waves along a\n"
                   "periodic shell, else half waves (the degree from\n"
                   "pole to pole) [1 until the least is passed]")
      ->type_name("A:B");
  verb->add_flag_callback(
      "--no-error-bars", [&] { request.error_bars = false; },
      "Take the case's own grid only, not a half and a\n"
      "quarter of it too");
  add_progress(verb, request.progress);
}

void add_settle(CLI::App& app, SettleRequest& request) {
  CLI::App* verb = app.add_subcommand("settle", "Find the steady state of a case")->group("Verbs");
  verb->add_option("CASE", request.case_file, "Case file (TOML); see `lidwright keys`");
  add_settings(verb, request.settings);
  verb->add_option("--into", request.into, "Folder for the results [runs/NAME_settle]")
      ->type_name("FOLDER");
  verb->add_flag("--overwrite", request.overwrite, "Replace a run that is in the folder");
  verb->add_option("--along", request.along,
                   "Follow the steady state along a key of the case,\n"
                   "past folds, and keep it at COUNT values")
      ->type_name("KEY=FROM:TO:COUNT");
  verb->add_flag("--stability", request.stability,
                 "Say whether small disturbances grow, and how fast");
  verb->add_flag("--error-bars", request.error_bars,
                 "Solve on a half and a quarter of the grid too, and\n"
                 "extrapolate");
  add_progress(verb, request.progress);
}

void add_verify(CLI::App& app, VerifyRequest& request) {
  CLI::App* verb =
      app.add_subcommand("verify", "Run published benchmarks and compare")->group("Verbs");
  verb->add_option("NAME", request.names, "Benchmarks to run [all quick ones]");
  verb->add_flag("--all", request.all, "The slow benchmarks and values too");
  verb->add_flag("--list", request.list, "Say which benchmarks there are");
  verb->add_option("--csv", request.csv, "Write the table to FILE too")->type_name("FILE");
  verb->add_option("--from", request.from, "Folder of benchmarks [the program's own]")
      ->type_name("FOLDER");
  add_progress(verb, request.progress);
}

void add_regime(CLI::App& app, RegimeRequest& request) {
  CLI::App* verb = app.add_subcommand("regime", "Say how the lid of a run moves")->group("Verbs");
  verb->add_option("RUN", request.run, "Run folder of a march");
  offer(verb->add_option("--threshold", request.thresholds, "Change a threshold; may be repeated")
            ->allow_extra_args(false)
            ->type_name("NAME=VALUE"),
        settable_thresholds());
  verb->add_flag("--thresholds", request.list, "List the thresholds with their sources");
}

void add_figure(CLI::App& app, FigureRequest& request) {
  CLI::App* verb =
      app.add_subcommand("figure", "Draw a run for a paper or for slides")->group("Verbs");
  verb->add_option("RUN", request.run, "Run folder");
  const std::vector<std::string> kinds = figure_kinds();
  one_of(verb->add_option("KIND", request.kinds, choice_text(kinds) + " [all the run has]"), kinds);
  const std::vector<std::string> formats = format_words();
  one_of(verb->add_option("--format", request.format, choice_text(formats) + " [png]"), formats)
      ->type_name("FORMAT");
  const std::vector<std::string> sizes = size_words();
  one_of(verb->add_option("--size", request.size,
                          choice_text(sizes) + "\n[one-column; a film: slide]"),
         sizes)
      ->type_name("SIZE");
  verb->add_option("--at", request.at,
                   "Snapshot nearest to TIME, in the unit that figures\n"
                   "show, or snapshot:N; of profiles also a list with\n"
                   "commas, or all [the last]")
      ->type_name("TIME");
  const std::vector<std::string> overlays = overlay_words();
  one_of(verb->add_option("--with", request.with,
                          "Over a field: " + choice_text(overlays) + " (a list with commas)"),
         overlays)
      ->delimiter(',')
      ->allow_extra_args(false)
      ->type_name("LIST");
  offer(verb->add_option("--columns", request.columns,
                         "Columns of the history to draw (a list with commas)"),
        columns_of_history())
      ->delimiter(',')
      ->allow_extra_args(false)
      ->type_name("LIST");
  verb->add_option("--range", request.range, "Values that the colours of a field span")
      ->type_name("LOW:HIGH");
  verb->add_flag("--log", request.logarithmic, "Logarithmic values in a history");
  verb->add_flag("--film", request.film, "Draw every snapshot of a field, and join them");
  verb->add_option("--into", request.into, "Folder for the figures [RUN/figures]")
      ->type_name("FOLDER");
  verb->add_flag("--overwrite", request.overwrite, "Replace figures that are in the folder");
  add_progress(verb, request.progress);
}

void add_report(CLI::App& app, ReportRequest& request) {
  CLI::App* verb = app.add_subcommand("report", "Write a page about a run")->group("Verbs");
  verb->add_option("RUN", request.run, "Run folder");
  verb->add_option("--onto", request.onto, "File to write [RUN/report.html]")->type_name("FILE");
  verb->add_flag("--follow", request.follow, "Write it anew until the run ends");
  verb->add_option("--every", request.every, "With --follow: seconds between two looks [30]")
      ->type_name("SECONDS");
  verb->add_flag("--overwrite", request.overwrite, "Replace a file that is not a report");
  add_progress(verb, request.progress);
}

void add_check(CLI::App& app, CheckRequest& request) {
  CLI::App* verb =
      app.add_subcommand("check", "Say what follows from a case, before it is run")->group("Verbs");
  verb->add_option("CASE", request.case_file, "Case file (TOML); see `lidwright keys`");
  add_settings(verb, request.settings);
  verb->add_flag("--no-steps", request.no_steps,
                 "Take no steps of the case: no forecast of its cost");
  add_progress(verb, request.progress);
}

/// What tells of the program itself.
void add_paper(CLI::App& app, Requests& requests) {
  app.add_subcommand("keys", "Print the reference of all case keys")
      ->group("Reference")
      ->add_flag("--markdown", requests.markdown, "As a Markdown page (docs/case.md)");
  CLI::App* completions =
      app.add_subcommand("completions", "Print completions for a shell")->group("Reference");
  one_of(completions->add_option("SHELL", requests.shell, choice_text(shells())), shells());
  CLI::App* manual = app.add_subcommand("manual", "Print a manual page")->group("Reference");
  one_of(manual->add_option("VERB", requests.manual_of, "Of this verb [of the program]"),
         names_of_verbs(app));
}

}  // namespace

std::unique_ptr<CLI::App> command_line(Requests& requests) {
  auto app = std::make_unique<CLI::App>(
      "Convection in the mantles of rocky bodies: heat flow, lid and budgets.", "lidwright");
  app->set_version_flag("--version",
                        "lidwright " + program_version() + " (" + program_commit() + ")");
  app->get_option("--version")->description("Print version and commit");
  app->set_help_flag("-h,--help", "Print this help");
  app->require_subcommand(1);
  add_check(*app, requests.check);
  add_march(*app, requests.march);
  add_settle(*app, requests.settle);
  add_onset(*app, requests.onset);
  add_regime(*app, requests.regime);
  add_figure(*app, requests.figure);
  add_report(*app, requests.report);
  add_verify(*app, requests.verify);
  add_paper(*app, requests);
  return app;
}

}  // namespace lidwright
