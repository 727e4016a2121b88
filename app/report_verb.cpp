#include "app/report_verb.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <chrono>
#include <thread>

#include "app/stop_signals.hpp"
#include "io/case_file.hpp"
#include "io/collective.hpp"
#include "io/page.hpp"
#include "io/run_reader.hpp"

namespace lidwright {
namespace {

/// How often a pause is broken off to look for a signal.
constexpr std::chrono::milliseconds nap{100};
constexpr double shortest_pause = 1, longest_pause = 86400;

std::string target(const ReportRequest& request) {
  return request.onto.empty() ? RunPaths{without_trailing_slash(request.run)}.report()
                              : request.onto;
}

ForeignFile foreign(const ReportRequest& request) {
  return request.overwrite ? ForeignFile::Replace : ForeignFile::Refuse;
}

void refuse_bad(const ReportRequest& request) {
  if (request.run.empty())
    throw InputError("report: name a run folder; see `lidwright report --help`");
  if (!(request.every >= shortest_pause && request.every <= longest_pause))
    throw InputError(fmt::format("--every {:g}: must be a number of seconds from {:g} to {:g}",
                                 request.every, shortest_pause, longest_pause));
}

/// Writes the page once, to be read anew after `reload` seconds while the run goes on; does it?
bool write_once(const ReportRequest& request, double reload) {
  // Asked first: a run that ends in between has all its results in the page that is written next.
  const bool running = run_goes_on(request.run);
  write_page(target(request), page_of(open_run(request.run), {running, reload}), foreign(request));
  return running;
}

/// Until the pause is over or a signal comes; did one come?
bool rest(double seconds) {
  const auto end = std::chrono::steady_clock::now() + std::chrono::duration<double>(seconds);
  while (std::chrono::steady_clock::now() < end) {
    if (stop_requested(MPI_COMM_SELF)) return true;
    std::this_thread::sleep_for(nap);
  }
  return stop_requested(MPI_COMM_SELF);
}

/// A page that nobody writes anew any more is not read anew either.
void follow(const ReportRequest& request) {
  WorkLine line(request.progress);
  for (bool running = true; running;) {
    running = write_once(request, request.every);
    line.show_always(
        fmt::format("{} written, the run {}", target(request), running ? "goes on" : "has ended"));
    if (!running || !rest(request.every)) continue;
    write_once(request, 0);
    return;
  }
}

void write_report(const ReportRequest& request) {
  refuse_bad(request);
  if (!request.overwrite) refuse_foreign_page(target(request));
  if (request.follow)
    follow(request);
  else
    write_once(request, 0);
}

}  // namespace

ExitCode report(const Session& session, const ReportRequest& request) {
  if (request.follow) catch_stop_signals();
  std::string not_read, not_written;
  if (session.first()) {
    try {
      write_report(request);
    } catch (const OutputError& e) {
      not_written = e.what();
    } catch (const std::exception& e) {
      not_read = e.what();
    }
  }
  agree<InputError>(session.comm(), not_read);
  agree<OutputError>(session.comm(), not_written);
  if (session.first()) fmt::print("page in {}\n", target(request));
  return ExitCode::Done;
}

}  // namespace lidwright
