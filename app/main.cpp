#include <fmt/format.h>

#include <CLI/CLI.hpp>
#include <cstdio>
#include <exception>
#include <memory>
#include <sstream>

#include "app/exit_code.hpp"
#include "app/march_verb.hpp"
#include "app/onset_verb.hpp"
#include "app/regime_verb.hpp"
#include "app/settle_verb.hpp"
#include "app/verify_verb.hpp"
#include "io/atomic_file.hpp"
#include "io/case_file.hpp"
#include "io/provenance.hpp"
#include "mesh/session.hpp"
#include "solver/march.hpp"

/// lidwright VERB ...: reads the command line, runs the verb, turns what was thrown into one
/// message and a code.
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
    if (app->get_name() == "onset" || app->get_name() == "settle")
      return fmt::format("Usage: lidwright {} CASE [OPTIONS]\n", app->get_name());
    if (app->get_name() == "regime") return "Usage: lidwright regime RUN [OPTIONS]\n";
    return CLI::Formatter::make_usage(app, std::move(name));
  }
};

void add_march(CLI::App& app, MarchRequest& request) {
  CLI::App* verb = app.add_subcommand("march", "Run a case in time")->group("Verbs");
  auto* case_file =
      verb->add_option("CASE", request.case_file, "Case file (TOML); see `lidwright keys`");
  verb->add_option("--set", request.settings, "Change a key of the case; may be repeated")
      ->allow_extra_args(false)
      ->type_name("TABLE.KEY=VALUE");
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
  verb->add_flag_callback(
      "--progress", [&] { request.progress = ProgressMode::Always; },
      "Show progress, also without a terminal");
  verb->add_flag_callback(
      "--no-progress", [&] { request.progress = ProgressMode::Never; }, "Show no progress");
  resume->excludes(case_file)->excludes(into)->excludes(overwrite);
}

void add_onset(CLI::App& app, OnsetRequest& request) {
  CLI::App* verb =
      app.add_subcommand("onset", "Find the Rayleigh number at which convection begins")
          ->group("Verbs");
  verb->add_option("CASE", request.case_file,
                   "Case file (TOML); its numbers.rayleigh serves to\n"
                   "compare only, all else is held fixed");
  verb->add_option("--set", request.settings, "Change a key of the case; may be repeated")
      ->allow_extra_args(false)
      ->type_name("TABLE.KEY=VALUE");
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
  verb->add_flag_callback(
      "--progress", [&] { request.progress = ProgressMode::Always; },
      "Show progress, also without a terminal");
  verb->add_flag_callback(
      "--no-progress", [&] { request.progress = ProgressMode::Never; }, "Show no progress");
}

void add_settle(CLI::App& app, SettleRequest& request) {
  CLI::App* verb = app.add_subcommand("settle", "Find the steady state of a case")->group("Verbs");
  verb->add_option("CASE", request.case_file, "Case file (TOML); see `lidwright keys`");
  verb->add_option("--set", request.settings, "Change a key of the case; may be repeated")
      ->allow_extra_args(false)
      ->type_name("TABLE.KEY=VALUE");
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
  verb->add_flag_callback(
      "--progress", [&] { request.progress = ProgressMode::Always; },
      "Show progress, also without a terminal");
  verb->add_flag_callback(
      "--no-progress", [&] { request.progress = ProgressMode::Never; }, "Show no progress");
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
  verb->add_flag_callback(
      "--progress", [&] { request.progress = ProgressMode::Always; },
      "Show progress, also without a terminal");
  verb->add_flag_callback(
      "--no-progress", [&] { request.progress = ProgressMode::Never; }, "Show no progress");
}

void add_regime(CLI::App& app, RegimeRequest& request) {
  CLI::App* verb = app.add_subcommand("regime", "Say how the lid of a run moves")->group("Verbs");
  verb->add_option("RUN", request.run, "Run folder of a march");
  verb->add_option("--threshold", request.thresholds, "Change a threshold; may be repeated")
      ->allow_extra_args(false)
      ->type_name("NAME=VALUE");
  verb->add_flag("--thresholds", request.list, "List the thresholds with their sources");
}

void print_help(const CLI::App& app, const CLI::ParseError& e) {
  std::ostringstream text;
  app.exit(e, text, text);
  const std::string all = text.str();
  fmt::print("{}\n", all.substr(0, all.find_last_not_of('\n') + 1));
}

/// CLI11 reports a misspelt verb as a missing one.
std::string command_line_message(const CLI::ParseError& e, int argc, char** argv) {
  if (argc < 2) return "name a verb: march, settle, onset, regime, verify or keys";
  if (e.get_name() == "RequiredError")
    return fmt::format(
        "'{}' is not a verb of this program (march, settle, onset, regime, verify, keys)", argv[1]);
  return e.what();
}

/// What the command line asks of each verb.
struct Requests {
  MarchRequest march;
  SettleRequest settle;
  OnsetRequest onset;
  RegimeRequest regime;
  VerifyRequest verify;
  bool markdown = false;
};

ExitCode run_verb(const Session& session, const CLI::App& app, const Requests& asked) {
  if (app.got_subcommand("keys")) {
    if (session.first()) fmt::print("{}", asked.markdown ? keys_as_markdown() : keys_as_text());
    return ExitCode::Done;
  }
  if (app.got_subcommand("onset")) return onset(session, asked.onset);
  if (app.got_subcommand("settle")) return settle(session, asked.settle);
  if (app.got_subcommand("regime")) return regime(session, asked.regime);
  if (app.got_subcommand("verify")) return verify(session, asked.verify);
  if (asked.march.case_file.empty() && asked.march.resume.empty())
    throw InputError(
        "march: name a case file, or a run folder with --resume; see `lidwright march --help`");
  return march(session, asked.march);
}

ExitCode report(const Session& session, const std::string& message, ExitCode code) {
  if (session.first()) fmt::print(stderr, "lidwright: {}\n", message);
  return code;
}

/// For what may have happened on one rank only: the others must not wait for it.
ExitCode give_up(const Session& session, const std::string& message, ExitCode code) {
  int ranks = 1;
  MPI_Comm_size(session.comm(), &ranks);
  if (ranks == 1) return report(session, message, code);
  fmt::print(stderr, "lidwright: {} (rank {})\n", message, session.rank());
  MPI_Abort(session.comm(), static_cast<int>(code));
  return code;
}

ExitCode run(const Session& session, int argc, char** argv) {
  CLI::App app("Convection in the mantles of rocky bodies: heat flow, lid and budgets.",
               "lidwright");
  app.set_version_flag("--version",
                       "lidwright " + program_version() + " (" + program_commit() + ")");
  app.require_subcommand(1);
  app.formatter(std::make_shared<PlainHelp>());
  app.footer(
      "Exit codes: 0 done, 1 fault of the program, 2 bad input, 3 not solved,\n"
      "4 not written, 5 interrupted, what was found is written (march goes on with\n"
      "--resume), 6 a published benchmark disagrees (verify).");
  Requests asked;
  add_march(app, asked.march);
  add_settle(app, asked.settle);
  add_onset(app, asked.onset);
  add_regime(app, asked.regime);
  add_verify(app, asked.verify);
  app.add_subcommand("keys", "Print the reference of all case keys")
      ->group("Verbs")
      ->add_flag("--markdown", asked.markdown, "As a Markdown page (docs/case.md)");
  try {
    app.parse(argc, argv);
  } catch (const CLI::ParseError& e) {
    if (e.get_exit_code() == 0) {
      if (session.first()) print_help(app, e);
      return ExitCode::Done;
    }
    return report(session,
                  fmt::format("{}; see `lidwright --help`", command_line_message(e, argc, argv)),
                  ExitCode::BadInput);
  }
  try {
    return run_verb(session, app, asked);
  } catch (const InputError& e) {
    return report(session, e.what(), ExitCode::BadInput);
  } catch (const SolveError& e) {
    return report(session, e.what(), ExitCode::NotSolved);
  } catch (const OutputError& e) {
    return report(session, e.what(), ExitCode::NotWritten);
  } catch (const std::bad_alloc&) {
    return give_up(session, "not enough memory for this grid; use fewer cells",
                   ExitCode::NotSolved);
  } catch (const std::exception& e) {
    return give_up(session, fmt::format("a fault of the program, please report it: {}", e.what()),
                   ExitCode::Fault);
  }
}

}  // namespace
}  // namespace lidwright

int main(int argc, char** argv) {
  const lidwright::Session session(argc, argv);
  return static_cast<int>(lidwright::run(session, argc, argv));
}
