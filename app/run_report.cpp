#include "app/run_report.hpp"

#include <fmt/format.h>

#include "io/collective.hpp"
#include "io/page.hpp"

namespace lidwright {

void write_run_report(const Session& session, const Case& c, const RunPaths& paths) {
  if (!c.output.report) return;
  on_first_rank<OutputError>(session.comm(), [&] {
    try {
      write_page(paths.report(), page_of(open_run(paths.folder), {}), ForeignFile::Refuse);
    } catch (const InputError& e) {
      fmt::print(stderr, "lidwright: no page about the run: {}\n", e.what());
    }
  });
}

}  // namespace lidwright
