#include <fmt/format.h>

#include <cstdio>
#include <exception>
#include <memory>
#include <sstream>

#include "app/command_line.hpp"
#include "app/exit_code.hpp"
#include "io/atomic_file.hpp"
#include "io/case_file.hpp"
#include "io/provenance.hpp"
#include "mesh/session.hpp"
#include "solver/march.hpp"

/// lidwright VERB ...: reads the command line, runs the verb, turns what was thrown into one
/// message and a code.
namespace lidwright {
namespace {

void print_help(const CLI::App& app, const CLI::ParseError& e) {
  std::ostringstream text;
  app.exit(e, text, text);
  const std::string all = text.str();
  fmt::print("{}\n", all.substr(0, all.find_last_not_of('\n') + 1));
}

std::string verbs_of(const CLI::App& app) {
  std::vector<std::string> names;
  for (const CLI::App* verb : app.get_subcommands({})) names.push_back(verb->get_name());
  return fmt::format("{}", fmt::join(names, ", "));
}

/// CLI11 reports a misspelt verb as a missing one.
std::string command_line_message(const CLI::App& app, const CLI::ParseError& e, int argc,
                                 char** argv) {
  if (argc < 2) return fmt::format("name a verb: {}", verbs_of(app));
  if (e.get_name() == "RequiredError")
    return fmt::format("'{}' is not a verb of this program ({})", argv[1], verbs_of(app));
  return e.what();
}

ExitCode run_verb(const Session& session, const CLI::App& app, const Requests& asked) {
  if (app.got_subcommand("keys")) {
    if (session.first()) fmt::print("{}", asked.markdown ? keys_as_markdown() : keys_as_text());
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
      if (session.first()) print_help(app, e);
      return ExitCode::Done;
    }
    return complain(
        session,
        fmt::format("{}; see `lidwright --help`", command_line_message(app, e, argc, argv)),
        ExitCode::BadInput);
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
