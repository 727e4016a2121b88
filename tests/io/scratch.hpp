#pragma once

#include <mpi.h>
#include <stdlib.h>
#include <sys/mount.h>

#include <filesystem>
#include <fstream>
#include <string>

#include "io/collective.hpp"

/// A folder for one test, the same on all ranks, gone afterwards.
namespace lidwright::test {

class Scratch {
 public:
  Scratch() {
    MPI_Comm_rank(MPI_COMM_WORLD, &rank_);
    std::string name = (std::filesystem::temp_directory_path() / "lidwright_test_XXXXXX").string();
    if (rank_ == 0 && !::mkdtemp(name.data())) throw std::runtime_error("no scratch folder");
    broadcast(MPI_COMM_WORLD, name);
    path_ = name;
  }
  Scratch(const Scratch&) = delete;
  Scratch& operator=(const Scratch&) = delete;
  ~Scratch() {
    MPI_Barrier(MPI_COMM_WORLD);
    if (rank_ == 0) std::filesystem::remove_all(path_);
  }
  const std::string& path() const { return path_; }
  std::string operator/(const std::string& name) const { return path_ + "/" + name; }
  bool first_rank() const { return rank_ == 0; }

 private:
  std::string path_;
  int rank_ = 0;
};

inline void write_text(const std::string& path, const std::string& text) {
  std::ofstream(path) << text;
}

/// Number of entries of a folder, -1 when there is none.
inline long entries(const std::string& folder) {
  namespace fs = std::filesystem;
  return fs::exists(folder)
             ? std::distance(fs::directory_iterator(folder), fs::directory_iterator())
             : -1;
}

/// A small file system in memory at a folder of its own; needs root.
class SmallDisk {
 public:
  /// `options` as of tmpfs, "size=64k".
  SmallDisk(const std::string& folder, const char* options, unsigned long flags = 0)
      : folder_(folder) {
    std::filesystem::create_directories(folder);
    mounted_ = ::mount("tmpfs", folder.c_str(), "tmpfs", flags, options) == 0;
  }
  SmallDisk(const SmallDisk&) = delete;
  SmallDisk& operator=(const SmallDisk&) = delete;
  ~SmallDisk() {
    if (mounted_) ::umount(folder_.c_str());
  }
  bool mounted() const { return mounted_; }

 private:
  std::string folder_;
  bool mounted_ = false;
};

/// The message of the exception of type `Error` that `action` throws; empty when it throws none.
template <class Error, class Action>
std::string message_of(Action&& action) {
  try {
    action();
  } catch (const Error& e) {
    return e.what();
  }
  return {};
}

}  // namespace lidwright::test
