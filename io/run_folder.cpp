#include "io/run_folder.hpp"

#include <fcntl.h>
#include <fmt/format.h>
#include <sys/file.h>
#include <sys/stat.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <cerrno>
#include <charconv>
#include <chrono>
#include <filesystem>
#include <thread>
#include <vector>

#include "io/case_file.hpp"
#include "io/collective.hpp"

namespace lidwright {
namespace {

namespace fs = std::filesystem;

/// How long a process that was killed may need until the system lets go of its lock.
constexpr std::chrono::seconds patience{2};

std::array<std::string, 5> subfolders(const RunPaths& p) {
  return {p.fields(), p.walls(), p.profiles(), p.pictures(), p.checkpoints()};
}

/// Is it the name of a rank's piece of a snapshot?
bool piece_name(std::string_view name) {
  const std::size_t rank = name.rfind("_piece_");
  return rank != std::string_view::npos && numbered(name.substr(rank), "_piece_", 1, ".vts") &&
         numbered(name.substr(0, rank), "fields/fields_", snapshot_digits, "");
}

/// Is this name, relative to the run folder, one that the program writes? provenance.toml is not
/// meant.
bool own_name(std::string_view name) {
  if (name.ends_with(partial_suffix)) {
    name.remove_suffix(partial_suffix.size());
    if (name == "provenance.toml" || numbered(name, "report.html.", 1, "")) return true;
  }
  static constexpr std::array<std::string_view, 14> plain{
      "case_as_read.toml", "summary.toml", "history.csv",    "fields.pvd", "walls.pvd",
      "onset.csv",         "onset.png",    "newton.csv",     "branch.csv", "error_bars.csv",
      "growth_rates.csv",  "branch.png",   "statistics.csv", "report.html"};
  const auto of_snapshot = [&](std::string_view before, std::string_view after) {
    return numbered(name, before, snapshot_digits, after).has_value();
  };
  return std::find(plain.begin(), plain.end(), name) != plain.end() || piece_name(name) ||
         of_snapshot("fields/fields_", ".pvts") || of_snapshot("walls/walls_", ".csv") ||
         of_snapshot("walls/walls_", ".vtp") || of_snapshot("walls/topography_", ".csv") ||
         of_snapshot("profiles/profiles_", ".csv") || of_snapshot("pictures/picture_", ".png") ||
         numbered(name, "checkpoints/step_", checkpoint_digits, ".h5");
}

void remove_file(const std::string& path) {
  if (::unlink(path.c_str()) != 0 && errno != ENOENT)
    throw OutputError(fmt::format("cannot replace the run: {}", output_failure(path, errno)));
}

/// provenance.toml, by which a run is known, goes last: an interrupted clean-up can be taken up
/// again.
void remove_run(const RunPaths& paths) {
  for (const std::string& name : own_files(paths)) remove_file(paths.folder + "/" + name);
  remove_file(paths.provenance());
}

void refuse_unless_free(const RunPaths& paths, ExistingRun existing) {
  if (fs::exists(paths.folder) && !fs::is_directory(paths.folder))
    throw InputError(
        fmt::format("{}: is not a folder; give another one with --into", paths.folder));
  if (holds_run(paths.folder)) {
    if (existing == ExistingRun::Overwrite) return;
    throw InputError(
        fmt::format("{0}: holds a run already; write into another folder with --into FOLDER, go on "
                    "with it by --resume {0}, or replace it with --overwrite",
                    paths.folder));
  }
  std::vector<std::string> names = own_files(paths);
  // What was never completed is nobody's result: a run that was killed right at its start.
  std::erase_if(names, [](const std::string& name) { return name.ends_with(partial_suffix); });
  if (!names.empty())
    throw InputError(fmt::format(
        "{}: holds {}, which a run would overwrite, but is not the folder of a run; move it "
        "away or write into another folder with --into FOLDER",
        paths.folder, names.front()));
}

/// Makes a folder and its parents; takes back what it made when told to.
class FolderMaker {
 public:
  void make(const fs::path& folder) {
    if (folder.empty() || fs::is_directory(folder)) return;
    if (folder.has_parent_path() && folder.parent_path() != folder) make(folder.parent_path());
    if (::mkdir(folder.c_str(), 0777) != 0) {
      if (errno == EEXIST && fs::is_directory(folder)) return;
      throw OutputError(output_failure(folder.string(), errno));
    }
    made_.push_back(folder);
  }
  void take_back() noexcept {
    for (auto folder = made_.rbegin(); folder != made_.rend(); ++folder) ::rmdir(folder->c_str());
  }

 private:
  std::vector<fs::path> made_;
};

/// Finds out now, not at the first checkpoint, whether files can be written here.
void try_writing(const std::string& folder) {
  const std::string probe = folder + "/provenance.toml" + std::string(partial_suffix);
  Descriptor file(::open(probe.c_str(), O_WRONLY | O_CREAT | O_CLOEXEC, 0666));
  if (file < 0) throw OutputError(output_failure(folder, errno));
  const int error = write_all(file, provenance_mark);
  ::unlink(probe.c_str());
  if (error != 0) throw OutputError(output_failure(folder, error));
}

void make_folders(const RunPaths& paths) {
  FolderMaker maker;
  try {
    maker.make(fs::path(paths.folder));
    try_writing(paths.folder);
    for (const std::string& sub : subfolders(paths)) maker.make(sub);
  } catch (...) {
    maker.take_back();
    throw;
  }
}

}  // namespace

std::string without_trailing_slash(std::string path) {
  while (path.size() > 1 && path.back() == '/') path.pop_back();
  return path.empty() ? "." : path;
}

std::vector<std::string> own_files(const RunPaths& paths) {
  std::vector<std::string> names;
  const auto look_in = [&](const std::string& folder, const std::string& prefix) {
    if (!fs::is_directory(folder)) return;
    for (const auto& entry : fs::directory_iterator(folder)) {
      const std::string name = prefix + entry.path().filename().string();
      if (!entry.is_directory() && own_name(name)) names.push_back(name);
    }
  };
  look_in(paths.folder, "");
  for (const std::string& sub : subfolders(paths))
    look_in(sub, fs::path(sub).filename().string() + "/");
  return names;
}

std::optional<long> numbered(std::string_view name, std::string_view before, std::size_t digits,
                             std::string_view after) {
  if (name.size() < before.size() + digits + after.size()) return std::nullopt;
  if (!name.starts_with(before) || !name.ends_with(after)) return std::nullopt;
  name.remove_prefix(before.size());
  name.remove_suffix(after.size());
  long number = 0;
  const auto [end, error] = std::from_chars(name.data(), name.data() + name.size(), number);
  const bool whole =
      error == std::errc() && end == name.data() + name.size() && name.front() != '-';
  return whole ? std::optional(number) : std::nullopt;
}

bool holds_run(const std::string& folder) {
  const std::string path = RunPaths{folder}.provenance();
  return fs::is_regular_file(path) && read_whole_file(path).starts_with(provenance_mark);
}

bool holds_steady_states(const std::string& folder) {
  return fs::is_regular_file(RunPaths{folder}.newton());
}

bool run_goes_on(const std::string& folder) {
  const Descriptor file(::open(folder.c_str(), O_RDONLY | O_DIRECTORY | O_CLOEXEC));
  // Shared, so that two who look do not take each other for a writer; let go of at once.
  return file >= 0 && ::flock(file, LOCK_SH | LOCK_NB) != 0 && errno == EWOULDBLOCK;
}

void RunFolder::lock() {
  lock_ = Descriptor(::open(paths_.folder.c_str(), O_RDONLY | O_DIRECTORY | O_CLOEXEC));
  const auto deadline = std::chrono::steady_clock::now() + patience;
  // Only "held by another" counts: some network file systems have no locks, and a run must work
  // there too.
  while (::flock(lock_, LOCK_EX | LOCK_NB) != 0 && errno == EWOULDBLOCK) {
    if (std::chrono::steady_clock::now() > deadline)
      throw InputError(fmt::format(
          "{}: another process is writing this run; wait for it or end it, or write into "
          "another folder with --into FOLDER",
          paths_.folder));
    std::this_thread::sleep_for(std::chrono::milliseconds(50));
  }
}

void RunFolder::refuse_taken(MPI_Comm comm, const std::string& path, ExistingRun existing) {
  on_first_rank<InputError>(comm,
                            [&] { refuse_unless_free({without_trailing_slash(path)}, existing); });
}

RunFolder RunFolder::create(MPI_Comm comm, const std::string& path, ExistingRun existing) {
  RunFolder run(without_trailing_slash(path));
  on_first_rank<InputError>(comm, [&] {
    refuse_unless_free(run.paths_, existing);
    if (fs::is_directory(run.paths_.folder)) run.lock();
  });
  on_first_rank<OutputError>(comm, [&] {
    make_folders(run.paths_);
    remove_run(run.paths_);
  });
  on_first_rank<InputError>(comm, [&] {
    if (run.lock_ < 0) run.lock();
  });
  return run;
}

RunFolder RunFolder::resume(MPI_Comm comm, const std::string& path) {
  RunFolder run(without_trailing_slash(path));
  on_first_rank<InputError>(comm, [&] {
    if (!holds_run(run.paths_.folder))
      throw InputError(fmt::format(
          "{}: holds no run to resume (no provenance.toml of one); check the path, or start "
          "the run with --into {}",
          run.paths_.folder, run.paths_.folder));
    run.lock();
  });
  on_first_rank<OutputError>(comm, [&] {
    make_folders(run.paths_);
    for (const std::string& name : own_files(run.paths_))
      if (name.ends_with(partial_suffix)) remove_file(run.paths_.folder + "/" + name);
  });
  return run;
}

}  // namespace lidwright
