#include "app/run_start.hpp"

#include <filesystem>

#include "io/checkpoint.hpp"
#include "io/collective.hpp"

namespace lidwright {

std::string folder_for(const std::string& into, const std::string& case_file,
                       const std::string& ending) {
  if (!into.empty()) return into;
  return "runs/" + std::filesystem::path(case_file).stem().string() + ending;
}

StoredTemperature stored_start(MPI_Comm comm, const Case& c) {
  if (c.initial.from.empty()) return {};
  return read_temperature(comm, c.initial.from);
}

bool same_place(const std::string& path, const std::string& folder) {
  namespace fs = std::filesystem;
  std::error_code unused;
  const fs::path inside = fs::weakly_canonical(path, unused);
  const fs::path relative = inside.lexically_relative(fs::weakly_canonical(folder, unused));
  return !relative.empty() && *relative.begin() != "..";
}

std::string fingerprint(Case c) {
  c.title.clear();
  c.march = MarchSettings{};
  c.settle = SettleSettings{};
  c.output = OutputSettings{};
  return write_case(c);
}

RunFolder start_folder(MPI_Comm comm, const std::string& path, ExistingRun existing,
                       const Case& c) {
  RunFolder folder = RunFolder::create(comm, path, existing);
  on_first_rank<OutputError>(comm, [&] {
    // First of all files, so that a run that is killed at any moment is known as one.
    write_atomically(folder.paths().provenance(), provenance_mark);
    write_atomically(folder.paths().case_file(), write_case(c));
  });
  return folder;
}

}  // namespace lidwright
