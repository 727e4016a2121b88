#include <fmt/format.h>

#include <CLI/CLI.hpp>
#include <cstdio>
#include <exception>

#include "app/exit_code.hpp"
#include "app/march_verb.hpp"
#include "app/session.hpp"
#include "io/atomic_file.hpp"
#include "io/case_file.hpp"
#include "io/provenance.hpp"
#include "solver/march.hpp"

/// lidwright VERB ...: reads the command line, runs the verb, turns what was thrown into one
/// message and a code.
namespace lidwright {
namespace {

void add_march(CLI::App& app, MarchRequest& request) {
  CLI::App* verb = app.add_subcommand("march", "Run a case in time");
  auto* case_file =
      verb->add_option("CASE", request.case_file, "Case file (TOML); see `lidwright keys`");
  verb->add_option("--set", request.settings,
                   "Change a key of the case: table.key=value (repeatable)")
      ->allow_extra_args(false);
  auto* into = verb->add_option("--into", request.into, "Run folder [runs/NAME of the case file]");
  auto* resume = verb->add_option("--resume", request.resume, "Go on with the run in this folder");
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

ExitCode run_verb(const Session& session, const CLI::App& app, const MarchRequest& request,
                  bool markdown) {
  if (app.got_subcommand("keys")) {
    if (session.first()) fmt::print("{}", markdown ? keys_as_markdown() : keys_as_text());
    return ExitCode::Done;
  }
  if (request.case_file.empty() && request.resume.empty())
    throw InputError(
        "march: name a case file, or a run folder with --resume; see `lidwright march --help`");
  return march(session, request);
}

ExitCode report(const Session& session, const std::string& message, ExitCode code) {
  if (session.first()) fmt::print(stderr, "lidwright: {}\n", message);
  return code;
}

ExitCode run(const Session& session, int argc, char** argv) {
  CLI::App app("Convection in the mantles of rocky bodies: heat flow, lid and budgets.",
               "lidwright");
  app.set_version_flag("--version",
                       "lidwright " + program_version() + " (" + program_commit() + ")");
  app.require_subcommand(1);
  app.footer(
      "Exit codes: 0 done, 1 fault of the program, 2 bad input, 3 not solved, 4 not written,\n"
      "5 interrupted with a checkpoint written (go on with march --resume FOLDER).");
  MarchRequest request;
  bool markdown = false;
  add_march(app, request);
  app.add_subcommand("keys", "Print the reference of all case keys")
      ->add_flag("--markdown", markdown, "As a Markdown page (docs/case.md)");
  try {
    app.parse(argc, argv);
  } catch (const CLI::ParseError& e) {
    if (e.get_exit_code() == 0) {
      if (session.first()) app.exit(e);
      return ExitCode::Done;
    }
    return report(session, fmt::format("{}; see `lidwright --help`", e.what()), ExitCode::BadInput);
  }
  try {
    return run_verb(session, app, request, markdown);
  } catch (const InputError& e) {
    return report(session, e.what(), ExitCode::BadInput);
  } catch (const SolveError& e) {
    return report(session, e.what(), ExitCode::NotSolved);
  } catch (const OutputError& e) {
    return report(session, e.what(), ExitCode::NotWritten);
  } catch (const std::bad_alloc&) {
    return report(session, "not enough memory for this grid; use fewer cells", ExitCode::NotSolved);
  } catch (const std::exception& e) {
    return report(session, fmt::format("a fault of the program, please report it: {}", e.what()),
                  ExitCode::Fault);
  }
}

}  // namespace
}  // namespace lidwright

int main(int argc, char** argv) {
  const lidwright::Session session(argc, argv);
  return static_cast<int>(lidwright::run(session, argc, argv));
}
