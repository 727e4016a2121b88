#include "app/settle_files.hpp"

#include <fmt/format.h>

#include "app/run_start.hpp"
#include "io/checkpoint.hpp"
#include "io/picture.hpp"

namespace lidwright {
namespace {

/// The temperature alone: a steady state is no moment of a run that could go on.
Archive archive_of(const SteadyState& s) {
  Archive archive;
  archive.cells.emplace("temperature", s.snapshot.temperature);
  return archive;
}

}  // namespace

int SteadyFiles::write(const Case& c, SteadyState s, const std::string& at) {
  const auto number = snapshots_.count();
  // Viewers step through the states as through moments.
  s.snapshot.time = static_cast<double>(number);
  snapshots_.write(s.snapshot,
                   fmt::format("of a {} state{}{}", s.converged ? "steady" : "not steady",
                               at.empty() ? "" : " at ", at));
  if (c.output.pictures)
    draw_state(paths_.folder + "/" + picture_name(number), s, at, c.title, picture_units(c.body));
  write_checkpoint(checkpoint_path(paths_.checkpoints(), static_cast<long>(number)), archive_of(s),
                   s.snapshot.temperature.decomposition(), fingerprint(c));
  return static_cast<int>(number);
}

}  // namespace lidwright
