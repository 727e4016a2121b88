#include "io/text_file.hpp"

#include <fmt/format.h>

#include <cerrno>
#include <cstring>
#include <filesystem>
#include <fstream>

namespace lidwright {

std::string read_text_file(const std::string& path, const Complain& complain) {
  std::error_code unused;
  if (std::filesystem::is_directory(path, unused)) complain("is a folder; give the file itself");
  errno = 0;
  std::ifstream file(path, std::ios::binary);
  if (!file)
    complain(fmt::format("cannot be opened ({}); check the path and its permissions",
                         std::strerror(errno)));
  // A little more than the longest one, so that a file without end is not read to its end.
  std::string text(longest_text + 1, '\0');
  file.read(text.data(), static_cast<std::streamsize>(text.size()));
  if (file.bad()) complain(fmt::format("cannot be read ({})", std::strerror(errno)));
  text.resize(static_cast<std::size_t>(file.gcount()));
  return text;
}

}  // namespace lidwright
