#include <fmt/format.h>

#include <cstdio>
#include <exception>
#include <memory>

#include "app/command_line.hpp"
#include "app/exit_code.hpp"
#include "app/help.hpp"
#include "app/manual.hpp"
#include "app/parse_message.hpp"
#include "io/atomic_file.hpp"
#include "io/case_file.hpp"
#include "io/provenance.hpp"
#include "mesh/session.hpp"
#include "solver/march.hpp"

/// lidwright VERB ...: reads the command line, runs the verb, turns what was thrown into one
/// message and a code.
namespace lidwright {
namespace {

std::string help_text(CLI::App& app) {
  const ProgramEntry program = program_entry(app);
  const std::vector<CLI::App*> named = app.get_subcommands();
  return named.empty() ? program_help(program) : verb_help(*program.find(named[0]->get_name()));
}

/// --help and --version come as exceptions too.
std::string answer(CLI::App& app, const CLI::ParseError& e) {
  return e.get_name() == "CallForVersion" ? fmt::format("{}\n", e.what()) : help_text(app);
}

/// A shell offers the program's own benchmarks too.
ProgramEntry with_benchmarks(ProgramEntry program) {
  for (VerbEntry& verb : program.verbs)
    if (verb.name == "verify") verb.options.front().words = own_benchmarks();
  return program;
}

std::string completions_text(CLI::App& app, const std::string& shell) {
  if (shell.empty())
    throw InputError("completions: name a shell; see `lidwright completions --help`");
  return completions(with_benchmarks(program_entry(app)), shell);
}

std::string manual_text(CLI::App& app, const std::string& verb) {
  const ProgramEntry program = program_entry(app);
  return verb.empty() ? program_manual(program) : verb_manual(program, *program.find(verb));
}

/// What the verbs print that tell of the program itself; empty: another verb is asked for.
std::string paper(CLI::App& app, const Requests& asked) {
  if (app.got_subcommand("keys")) return asked.markdown ? keys_as_markdown() : keys_as_text();
  if (app.got_subcommand("completions")) return completions_text(app, asked.shell);
  if (app.got_subcommand("manual")) return manual_text(app, asked.manual_of);
  return "";
}

ExitCode run_verb(const Session& session, CLI::App& app, const Requests& asked) {
  if (const std::string text = paper(app, asked); !text.empty()) {
    if (session.first()) fmt::print("{}", text);
    return ExitCode::Done;
  }
  if (app.got_subcommand("check")) return check(session, asked.check);
  if (app.got_subcommand("figure")) return figure(session, asked.figure);
  if (app.got_subcommand("report")) return report(session, asked.report);
  if (app.got_subcommand("onset")) return onset(session, asked.onset);
  if (app.got_subcommand("settle")) return settle(session, asked.settle);
  if (app.got_subcommand("regime")) return regime(session, asked.regime);
  if (app.got_subcommand("verify")) return verify(session, asked.verify);
  if (asked.march.case_file.empty() && asked.march.resume.empty())
    throw InputError(
        "march: name a case file, or a run folder with --resume; see `lidwright march --help`");
  return march(session, asked.march);
}

ExitCode complain(const Session& session, const std::string& message, ExitCode code) {
  if (session.first()) fmt::print(stderr, "lidwright: {}\n", message);
  return code;
}

/// For what may have happened on one rank only: the others must not wait for it.
ExitCode give_up(const Session& session, const std::string& message, ExitCode code) {
  int ranks = 1;
  MPI_Comm_size(session.comm(), &ranks);
  if (ranks == 1) return complain(session, message, code);
  fmt::print(stderr, "lidwright: {} (rank {})\n", message, session.rank());
  MPI_Abort(session.comm(), static_cast<int>(code));
  return code;
}

ExitCode run(const Session& session, int argc, char** argv) {
  Requests asked;
  const std::unique_ptr<CLI::App> read = command_line(asked);
  CLI::App& app = *read;
  try {
    app.parse(argc, argv);
  } catch (const CLI::ParseError& e) {
    if (e.get_exit_code() == 0) {
      if (session.first()) fmt::print("{}", answer(app, e));
      return ExitCode::Done;
    }
    return complain(session, parse_message(app, e, argc < 2 ? "" : argv[1]), ExitCode::BadInput);
  }
  try {
    return run_verb(session, app, asked);
  } catch (const InputError& e) {
    return complain(session, e.what(), ExitCode::BadInput);
  } catch (const SolveError& e) {
    return complain(session, e.what(), ExitCode::NotSolved);
  } catch (const OutputError& e) {
    return complain(session, e.what(), ExitCode::NotWritten);
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
