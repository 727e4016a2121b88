#pragma once

#include <fmt/format.h>
#include <sys/resource.h>

#include <chrono>
#include <cstdio>
#include <string>

#include "io/provenance.hpp"

/// What all measurements of speed share.
namespace lidwright {

inline double now() {
  return std::chrono::duration<double>(std::chrono::steady_clock::now().time_since_epoch()).count();
}

/// One measurement as a JSON line; `fields` without braces.
inline void line(const std::string& fields) {
  fmt::print("{{\"program\": \"{}\", \"commit\": \"{}\", {}}}\n", program_version(),
             program_commit(), fields);
  std::fflush(stdout);
}

/// Of this process, bytes.
inline double peak_memory() {
  rusage use{};
  getrusage(RUSAGE_SELF, &use);
  return 1024.0 * static_cast<double>(use.ru_maxrss);
}

}  // namespace lidwright
