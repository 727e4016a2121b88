#include "io/provenance.hpp"

#include <Eigen/src/Core/util/Macros.h>
#include <fmt/format.h>
#include <hdf5.h>
#include <petscsys.h>
#include <slepcversion.h>
#include <suitesparse/cholmod.h>
#include <unistd.h>

#include <array>
#include <cmath>
#include <ctime>
#include <filesystem>

#include "io/atomic_file.hpp"
#include "io/collective.hpp"
#include "io/run_folder.hpp"
#include "io/vtk_grids.hpp"

#ifndef LIDWRIGHT_VERSION
#define LIDWRIGHT_VERSION "unknown"
#endif
#ifndef LIDWRIGHT_COMMIT
#define LIDWRIGHT_COMMIT "unknown"
#endif
#ifndef LIDWRIGHT_FLAGS
#define LIDWRIGHT_FLAGS "unknown"
#endif
#ifndef LIDWRIGHT_BUILD_TYPE
#ifdef NDEBUG
#define LIDWRIGHT_BUILD_TYPE "without assertions"
#else
#define LIDWRIGHT_BUILD_TYPE "with assertions"
#endif
#endif

// OpenBLAS's header clashes with other declarations of BLAS; this is all that is needed of it.
extern "C" char* openblas_get_config();
extern "C" int openblas_get_num_threads();

namespace lidwright {
namespace {

std::string petsc_version() {
  std::array<char, 256> text{};
  PetscGetVersion(text.data(), text.size());
  std::string version(text.data());
  while (version.ends_with(' ')) version.pop_back();
  return version;
}

std::string mpi_version() {
  std::array<char, MPI_MAX_LIBRARY_VERSION_STRING> text{};
  int length = 0;
  MPI_Get_library_version(text.data(), &length);
  const std::string whole(text.data());
  return whole.substr(0, whole.find('\n'));
}

std::string hdf5_version() {
  unsigned major = 0, minor = 0, release = 0;
  H5get_libversion(&major, &minor, &release);
  return fmt::format("{}.{}.{}", major, minor, release);
}

std::string host_name() {
  std::array<char, 256> text{};
  return ::gethostname(text.data(), text.size() - 1) == 0 ? text.data() : "unknown";
}

std::string compiler() {
#ifdef __clang__
  return "Clang " __VERSION__;
#else
  return "GCC " __VERSION__;
#endif
}

std::string line(const std::string& key, const std::string& text) {
  return fmt::format("{} = {}\n", key, toml_string(text));
}

std::string describe_session(MPI_Comm comm, long first_step) {
  int ranks = 1;
  MPI_Comm_size(comm, &ranks);
  std::string text = "\n[[session]]\n";
  text += line("started", utc_now()) + fmt::format("first_step = {}\n", first_step);
  text += line("version", program_version()) + line("commit", program_commit());
  text += line("compiler", compiler()) + line("flags", LIDWRIGHT_FLAGS) +
          line("build_type", LIDWRIGHT_BUILD_TYPE);
  text += line("host", host_name()) +
          fmt::format("ranks = {}\nthreads = {}\n", ranks, openblas_get_num_threads());
  for (const auto& [name, version] : library_versions()) text += line("library." + name, version);
  return text;
}

std::string toml_value(const std::variant<double, long, std::string>& value) {
  if (const auto* text = std::get_if<std::string>(&value)) return toml_string(*text);
  if (const auto* whole = std::get_if<long>(&value)) return fmt::format("{}", *whole);
  std::string number = fmt::format("{}", std::get<double>(value));
  // TOML takes 3 for an integer.
  if (number.find_first_not_of("-0123456789") == std::string::npos) number += ".0";
  return number;
}

}  // namespace

std::string program_version() { return LIDWRIGHT_VERSION; }
std::string program_commit() { return LIDWRIGHT_COMMIT; }

std::vector<std::pair<std::string, std::string>> library_versions() {
  return {{"petsc", petsc_version()},
          {"slepc", fmt::format("{}.{}.{}", SLEPC_VERSION_MAJOR, SLEPC_VERSION_MINOR,
                                SLEPC_VERSION_SUBMINOR)},
          {"mpi", mpi_version()},
          {"vtk", vtk_version()},
          {"hdf5", hdf5_version()},
          {"cholmod", fmt::format("{}.{}.{}", CHOLMOD_MAIN_VERSION, CHOLMOD_SUB_VERSION,
                                  CHOLMOD_SUBSUB_VERSION)},
          {"eigen",
           fmt::format("{}.{}.{}", EIGEN_WORLD_VERSION, EIGEN_MAJOR_VERSION, EIGEN_MINOR_VERSION)},
          {"openblas", openblas_get_config()}};
}

std::string utc_now() {
  const std::time_t now = std::time(nullptr);
  std::tm utc{};
  gmtime_r(&now, &utc);
  std::array<char, 32> text{};
  std::strftime(text.data(), text.size(), "%Y-%m-%dT%H:%M:%SZ", &utc);
  return text.data();
}

std::string toml_string(const std::string& text) {
  std::string quoted = "\"";
  for (const char c : text) {
    if (c == '"' || c == '\\') quoted += '\\';
    if (static_cast<unsigned char>(c) < 0x20 || c == 0x7f)
      quoted += fmt::format("\\u{:04X}", static_cast<unsigned>(c));
    else
      quoted += c;
  }
  return quoted + '"';
}

Provenance::Provenance(MPI_Comm comm, std::string path, long first_step)
    : comm_(comm), path_(std::move(path)) {
  on_first_rank<OutputError>(comm_, [&] {
    earlier_ =
        std::filesystem::exists(path_) ? read_whole_file(path_) : std::string(provenance_mark);
    session_ = describe_session(comm_, first_step);
  });
  write("");
}

void Provenance::end_session(long last_step, const std::string& reason) {
  write(line("ended", utc_now()) + fmt::format("last_step = {}\n", last_step) +
        line("reason", reason));
}

void Provenance::write(const std::string& ending) {
  on_first_rank<OutputError>(comm_, [&] { write_atomically(path_, earlier_ + session_ + ending); });
}

std::string summary_text(const std::vector<SummaryEntry>& entries) {
  std::string text = "# lidwright summary\n";
  for (const SummaryEntry& e : entries) {
    text += fmt::format("\n# {}{}\n{} = {}\n", e.meaning, e.unit.empty() ? "" : " [" + e.unit + "]",
                        e.name, toml_value(e.value));
  }
  return text;
}

void write_summary(MPI_Comm comm, const std::string& path,
                   const std::vector<SummaryEntry>& entries) {
  on_first_rank<OutputError>(comm, [&] { write_atomically(path, summary_text(entries)); });
}

}  // namespace lidwright
