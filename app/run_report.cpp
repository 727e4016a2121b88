#include "app/run_report.hpp"

#include <fmt/format.h>

#include "io/atomic_file.hpp"
#include "io/page.hpp"

namespace lidwright {
namespace {

void say(const std::string& why) {
  fmt::print(stderr, "lidwright: no page about the run: {}\n", why);
}

/// Did the disk take it?
bool write_on_this_rank(const RunPaths& paths) {
  try {
    write_page(paths.report(), page_of(open_run(paths.folder), {}), ForeignFile::Refuse);
  } catch (const OutputError& e) {
    say(e.what());
    return false;
  } catch (const std::exception& e) {
    say(e.what());
  }
  return true;
}

}  // namespace

ExitCode write_run_report(const Session& session, const Case& c, const RunPaths& paths,
                          ExitCode code) {
  if (!c.output.report) return code;
  int written = session.first() ? write_on_this_rank(paths) : 1;
  MPI_Bcast(&written, 1, MPI_INT, 0, session.comm());
  return code == ExitCode::Done && !written ? ExitCode::NotWritten : code;
}

}  // namespace lidwright
