#include "io/atomic_file.hpp"

#include <fcntl.h>
#include <fmt/format.h>
#include <sys/stat.h>
#include <unistd.h>

#include <cerrno>
#include <cstring>
#include <filesystem>
#include <utility>

namespace lidwright {
namespace {

const char* remedy(int error_number) {
  switch (error_number) {
    case ENOSPC:
    case EDQUOT:
      return "free space on that disk, or write into a folder on another one";
    case EACCES:
    case EPERM:
      return "get the right to write there, or write into another folder";
    case EROFS:
      return "that file system is read-only: write into another folder";
    case ENOENT:
    case ENOTDIR:
      return "the folder is not there (was it moved or removed?)";
    case EFBIG:
      return "raise the limit on the size of files (ulimit -f)";
    default:
      return "check the disk, or write into another folder";
  }
}

std::string input_failure(const std::string& path, int error_number) {
  return fmt::format("cannot read {}: {}; check the path and the right to read it", path,
                     std::strerror(error_number));
}

/// Writes and flushes; 0 or the system's error number.
int write_and_flush(const std::string& path, std::string_view contents) {
  Descriptor file(::open(path.c_str(), O_WRONLY | O_CREAT | O_TRUNC | O_CLOEXEC, 0666));
  if (file < 0) return errno;
  if (const int error = write_all(file, contents)) return error;
  if (::fsync(file) != 0) return errno;
  return file.close();
}

}  // namespace

Descriptor::Descriptor(Descriptor&& other) noexcept : raw_(std::exchange(other.raw_, -1)) {}

Descriptor& Descriptor::operator=(Descriptor&& other) noexcept {
  std::swap(raw_, other.raw_);
  return *this;
}

Descriptor::~Descriptor() { close(); }

int Descriptor::close() {
  if (raw_ < 0) return 0;
  return ::close(std::exchange(raw_, -1)) == 0 ? 0 : errno;
}

int write_all(int descriptor, std::string_view contents) {
  while (!contents.empty()) {
    const ssize_t written = ::write(descriptor, contents.data(), contents.size());
    if (written < 0 && errno == EINTR) continue;
    if (written < 0) return errno;
    contents.remove_prefix(static_cast<std::size_t>(written));
  }
  return 0;
}

std::string output_failure(const std::string& path, int error_number) {
  return fmt::format("cannot write {}: {}; {}", path, std::strerror(error_number),
                     remedy(error_number));
}

void sync_folder(const std::string& folder) {
  Descriptor descriptor(
      ::open(folder.empty() ? "." : folder.c_str(), O_RDONLY | O_DIRECTORY | O_CLOEXEC));
  if (descriptor < 0) throw OutputError(output_failure(folder, errno));
  // Some network file systems cannot flush a folder and say EINVAL: then nothing more can be done.
  if (::fsync(descriptor) != 0 && errno != EINVAL) throw OutputError(output_failure(folder, errno));
}

void write_atomically(const std::string& path, std::string_view contents,
                      const std::string& writer) {
  const std::string partial = path + writer + std::string(partial_suffix);
  int error = write_and_flush(partial, contents);
  if (error == 0 && ::rename(partial.c_str(), path.c_str()) != 0) error = errno;
  if (error != 0) {
    ::unlink(partial.c_str());
    throw OutputError(output_failure(path, error));
  }
  sync_folder(std::filesystem::path(path).parent_path().string());
}

std::string read_whole_file(const std::string& path) {
  Descriptor file(::open(path.c_str(), O_RDONLY | O_CLOEXEC));
  struct stat status {};
  if (file < 0 || ::fstat(file, &status) != 0) throw std::runtime_error(input_failure(path, errno));
  std::string contents(static_cast<std::size_t>(status.st_size), '\0');
  std::size_t filled = 0;
  while (filled < contents.size()) {
    const ssize_t got = ::read(file, contents.data() + filled, contents.size() - filled);
    if (got < 0 && errno == EINTR) continue;
    if (got < 0) throw std::runtime_error(input_failure(path, errno));
    if (got == 0) break;
    filled += static_cast<std::size_t>(got);
  }
  contents.resize(filled);
  return contents;
}

}  // namespace lidwright
