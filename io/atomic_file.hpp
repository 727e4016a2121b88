#pragma once

#include <stdexcept>
#include <string>
#include <string_view>

/// A file is complete or absent: written beside as NAME.partial, flushed to the disk, renamed.
namespace lidwright {

/// A file or folder that could not be written: `what()` is the whole message, with the path, the
/// system's reason and the remedy.
struct OutputError : std::runtime_error {
  using std::runtime_error::runtime_error;
};

/// Replaces the file at `path`. When this returns, contents and name are on the disk; when it
/// throws OutputError, the file is as it was before and no partial file is left. `writer` tells
/// processes apart that may write the same file at the same time. Not collective.
void write_atomically(const std::string& path, std::string_view contents,
                      const std::string& writer = {});

/// Flushes a folder, so that new names in it survive a power cut. Throws OutputError.
void sync_folder(const std::string& folder);

/// Whole contents. Throws std::runtime_error with path, reason and remedy.
std::string read_whole_file(const std::string& path);

/// "cannot write PATH: REASON; REMEDY" for an errno value.
std::string output_failure(const std::string& path, int error_number);

/// Suffix of files being written.
inline constexpr std::string_view partial_suffix = ".partial";

/// One owner for a file descriptor.
class Descriptor {
 public:
  Descriptor() = default;
  explicit Descriptor(int raw) : raw_(raw) {}
  Descriptor(Descriptor&& other) noexcept;
  Descriptor& operator=(Descriptor&& other) noexcept;
  ~Descriptor();
  operator int() const { return raw_; }  // NOLINT: a descriptor is meant to be passed to the system
  /// Closes and returns the system's error number, 0 if all is well (some file systems report
  /// late).
  int close();

 private:
  int raw_ = -1;
};

/// Writes everything or returns the system's error number; 0 if all is well.
int write_all(int descriptor, std::string_view contents);

}  // namespace lidwright
