#include "io/case_file.hpp"

#include <fmt/format.h>

#include <cerrno>
#include <cstring>
#include <filesystem>
#include <fstream>

#include "io/case_draft.hpp"
#include "io/case_entries.hpp"
#include "io/case_rules.hpp"
#include "io/case_values.hpp"

namespace lidwright {
namespace {

using namespace case_text;

/// A little more than the longest case, so that a file without end is not read to its end.
constexpr std::size_t most_bytes = (1 << 20) + 1;

std::string read_text(const std::string& path) {
  if (path.empty()) refuse("case file", "no path is given");
  std::error_code unused;
  if (std::filesystem::is_directory(path, unused))
    refuse(path, "is a folder; give the case file itself, such as cases/isoviscous_annulus.toml");
  errno = 0;
  std::ifstream file(path, std::ios::binary);
  if (!file)
    refuse(path, fmt::format("cannot be opened ({}); check the path and its permissions",
                             std::strerror(errno)));
  std::string text(most_bytes, '\0');
  file.read(text.data(), static_cast<std::streamsize>(text.size()));
  if (file.bad()) refuse(path, fmt::format("cannot be read ({})", std::strerror(errno)));
  text.resize(static_cast<std::size_t>(file.gcount()));
  return text;
}

/// A path in a case starts at the case file, wherever the program runs.
void settle_path(std::string& path, const std::string& case_file) {
  if (path.empty()) return;
  const std::filesystem::path from(path);
  if (from.is_absolute()) return;
  const auto folder = std::filesystem::path(case_file).parent_path();
  path = std::filesystem::absolute(folder / from).lexically_normal().string();
}

}  // namespace

Case parse_case(const std::string& text, const std::string& name,
                const std::vector<std::string>& settings) {
  Entries entries(text, name);
  for (std::size_t n = 0; n < settings.size(); ++n) entries.set(settings[n], n + 1);
  Draft draft;
  choose_tables(draft, entries);
  read_body_keys(draft, entries);
  check_body(draft, entries);
  read_other_keys(draft, entries);
  check_together(draft, entries);
  Case made = assemble(std::move(draft));
  settle_path(made.initial.from, name);
  return made;
}

Case read_case(const std::string& path, const std::vector<std::string>& settings) {
  return parse_case(read_text(path), path, settings);
}

}  // namespace lidwright
