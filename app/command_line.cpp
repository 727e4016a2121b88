#include "app/command_line.hpp"

#include <fmt/format.h>

#include "io/provenance.hpp"

namespace lidwright {
namespace {

/// Help without the library's notes on types and on which options go together: the line says it.
class PlainHelp : public CLI::Formatter {
 public:
  PlainHelp() {
    column_width(28);
    label("SUBCOMMAND", "VERB");
  }
  std::string make_option_opts(const CLI::Option* option) const override {
    const std::string type = option->get_type_name();
    return type.empty() || option->get_positional() ? "" : " " + type;
  }
  std::string make_usage(const CLI::App* app, std::string name) const override {
    if (app->get_name() == "march")
      return "Usage: lidwright march CASE [OPTIONS]\n"
             "       lidwright march --resume FOLDER [OPTIONS]\n";
    if (app->get_name() == "onset" || app->get_name() == "settle" || app->get_name() == "check")
      return fmt::format("Usage: lidwright {} CASE [OPTIONS]\n", app->get_name());
    if (app->get_name() == "figure") return "Usage: lidwright figure RUN [KIND...] [OPTIONS]\n";
    if (app->get_name() == "regime" || app->get_name() == "report")
      return fmt::format("Usage: lidwright {} RUN [OPTIONS]\n", app->get_name());
    return CLI::Formatter::make_usage(app, std::move(name));
  }
};

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
  verb->add_option("--threshold", request.thresholds, "Change a threshold; may be repeated")
      ->allow_extra_args(false)
      ->type_name("NAME=VALUE");
  verb->add_flag("--thresholds", request.list, "List the thresholds with their sources");
}

void add_figure(CLI::App& app, FigureRequest& request) {
  CLI::App* verb =
      app.add_subcommand("figure", "Draw a run for a paper or for slides")->group("Verbs");
  verb->add_option("RUN", request.run, "Run folder");
  verb->add_option("KIND", request.kinds,
                   "temperature, viscosity, speed, strain-rate, stress,\n"
                   "profiles, history, branch, onset [all the run has]");
  verb->add_option("--format", request.format, "png, svg or pdf [png]")->type_name("FORMAT");
  verb->add_option("--size", request.size,
                   "one-column, two-column or slide [one-column; a film:\n"
                   "slide]")
      ->type_name("SIZE");
  verb->add_option("--at", request.at,
                   "Snapshot nearest to TIME, in the unit that figures\n"
                   "show, or snapshot:N; of profiles also a list with\n"
                   "commas, or all [the last]")
      ->type_name("TIME");
  verb->add_option("--with", request.with,
                   "Over a field: flow-lines, arrows, lid, isotherms\n"
                   "(a list with commas)")
      ->delimiter(',')
      ->allow_extra_args(false)
      ->type_name("LIST");
  verb->add_option("--columns", request.columns,
                   "Columns of the history to draw (a list with commas)")
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

}  // namespace

std::unique_ptr<CLI::App> command_line(Requests& requests) {
  auto app = std::make_unique<CLI::App>(
      "Convection in the mantles of rocky bodies: heat flow, lid and budgets.", "lidwright");
  app->set_version_flag("--version",
                        "lidwright " + program_version() + " (" + program_commit() + ")");
  app->require_subcommand(1);
  app->formatter(std::make_shared<PlainHelp>());
  app->footer(
      "Exit codes: 0 done, 1 fault of the program, 2 bad input, 3 not solved,\n"
      "4 not written, 5 interrupted, what was found is written (march goes on with\n"
      "--resume), 6 a published benchmark disagrees (verify).");
  add_check(*app, requests.check);
  add_march(*app, requests.march);
  add_settle(*app, requests.settle);
  add_onset(*app, requests.onset);
  add_regime(*app, requests.regime);
  add_figure(*app, requests.figure);
  add_report(*app, requests.report);
  add_verify(*app, requests.verify);
  app->add_subcommand("keys", "Print the reference of all case keys")
      ->group("Verbs")
      ->add_flag("--markdown", requests.markdown, "As a Markdown page (docs/case.md)");
  return app;
}

}  // namespace lidwright
